import { RADIANS } from '../photovoltaics/angles';
import { solarPositionQuick } from '../photovoltaics/sun/position-quick';
import type { Place } from '../photovoltaics/sun/position';

/** How the loss of a cause adds up between two looks. */

const STEP_S = 900;
const DAY_S = 86_400;

/**
 * Share of a day's light that falls between two instants, epoch s: by the sun's height, so that noon counts and night
 * doesn't. Spans longer than a day give more than one. Without any sun in the day it is 0.
 */
export function lightShare(fromS: number, toS: number, place: Place): number {
  let share = 0;
  for (let s = fromS; s < toS; s += DAY_S) share += within(s, Math.min(s + DAY_S, toS), place);
  return share;
}

function within(fromS: number, toS: number, place: Place): number {
  const whole = integral(toS - DAY_S, toS, place);
  return whole > 0 ? Math.min(1, integral(fromS, toS, place) / whole) : 0;
}

function integral(fromS: number, toS: number, place: Place): number {
  let sum = 0;
  for (let s = fromS; s < toS; s += STEP_S) {
    const dt = Math.min(STEP_S, toS - s);
    const { apparentElevation } = solarPositionQuick((s + dt / 2) * 1000, place);
    sum += Math.max(0, Math.sin(apparentElevation * RADIANS)) * dt;
  }
  return sum;
}
