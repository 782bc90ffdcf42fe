import { cosDeg } from '../angles';
import { within } from '../range';

export interface Decomposition {
  /** Clearness index, 0 to 1. */
  kt: number;
  dni: number;
  dhi: number;
}

/** The diffuse share of ghi at a clearness index (D.G. Erbs, S.A. Klein, J.A. Duffie, Solar Energy 28 (1982) 293). */
function diffuseShare(kt: number): number {
  if (kt <= 0.22) return 1 - 0.09 * kt;
  if (kt <= 0.8) return 0.9511 + kt * (-0.1604 + kt * (4.388 + kt * (-16.638 + kt * 12.336)));
  return 0.165;
}

/**
 * Splits ghi into dni and dhi (W/m²) by Erbs 1982; Duffie & Beckman eq. 2.10.1. The clearness index uses cos z no less
 * than 0.065 and is held to 0..1; with the sun lower than 3° all light counts as diffuse.
 *
 * @param ghi W/m², 0 to 2000
 * @param zenith degrees, 0 to 180
 * @param dniExtra W/m²
 * @throws RangeError naming the parameter
 */
export function erbs(ghi: number, zenith: number, dniExtra: number): Decomposition {
  within('ghi', ghi, 0, 2000, 'W/m²');
  within('zenith', zenith, 0, 180, 'degrees');
  within('dniExtra', dniExtra, 1, 2000, 'W/m²');
  const cosZenith = cosDeg(zenith);
  const kt = Math.min(1, ghi / (dniExtra * Math.max(cosZenith, 0.065)));
  if (zenith > 87) return { kt, dni: 0, dhi: ghi };
  const dhi = diffuseShare(kt) * ghi;
  return { kt, dni: (ghi - dhi) / cosZenith, dhi };
}
