import { solarPositionQuick } from '../photovoltaics/sun/position-quick';
import { DIM_BELOW_ELEVATION } from '../verdicts/context';

const STEP_MS = 10 * 60_000;

/**
 * Time between two instants (epoch ms) at which the sun stands high enough at a place for every unit to be awake, ms, to
 * ten minutes. Counting ends at `enoughMs`.
 */
export function daylightBetween(
  fromMs: number,
  toMs: number,
  place: { latitude: number; longitude: number; altitude: number },
  enoughMs: number,
): number {
  let lightMs = 0;
  for (let at = fromMs; at < toMs && lightMs < enoughMs; at += STEP_MS) {
    const stepMs = Math.min(STEP_MS, toMs - at);
    if (solarPositionQuick(at + stepMs / 2, place).apparentElevation >= DIM_BELOW_ELEVATION)
      lightMs += stepMs;
  }
  return Math.min(lightMs, enoughMs);
}
