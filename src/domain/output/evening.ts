import { solarPositionQuick } from '../photovoltaics/sun/position-quick';
import type { Place } from '../photovoltaics/sun/position';

const STEP_S = 300;

/**
 * When the sun of a local day is down for good, epoch s, to five minutes: the end of the day where it stays up, the
 * day's beginning where it never rises.
 *
 * @param fromS where the local day begins
 * @param toS where it ends
 */
export function eveningOf(fromS: number, toS: number, place: Place): number {
  for (let s = toS; s > fromS; s -= STEP_S)
    if (solarPositionQuick((s - STEP_S / 2) * 1000, place).elevation > 0) return s;
  return fromS;
}
