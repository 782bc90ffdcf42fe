import { cosDeg } from '../angles';
import { within } from '../range';

/** Pa, standard atmosphere at sea level. */
export const STANDARD_PRESSURE = 101_325;

export const AIR_MASS_MODELS = ['kasten_young_1989', 'gueymard_1993', 'simple'] as const;
export type AirMassModel = (typeof AIR_MASS_MODELS)[number];

/**
 * Pressure in Pa of the standard atmosphere at an altitude in m (−500 to 9000): ICAO 1993, as in Portland State
 * Aerospace Society, "A Quick Derivation relating altitude to air pressure" (2004).
 */
export function pressureAtAltitude(altitude: number): number {
  within('altitude', altitude, -500, 9000, 'm');
  return 100 * ((44331.514 - altitude) / 11880.516) ** (1 / 0.1902632);
}

/**
 * Optical air mass relative to the zenith; null with the sun below the horizon.
 * `kasten_young_1989`: F. Kasten, A.T. Young, Applied Optics 28 (1989) 4735. `gueymard_1993`: C. Gueymard, Solar Energy
 * 51 (1993) 121. `simple`: 1/cos z, which says nothing near the horizon.
 *
 * @param zenith degrees, 0 to 180; apparent for the first two models
 */
export function relativeAirMass(zenith: number, model: AirMassModel = 'kasten_young_1989'): number | null {
  within('zenith', zenith, 0, 180, 'degrees');
  if (zenith > 90) return null;
  const cosZenith = cosDeg(zenith);
  switch (model) {
    case 'kasten_young_1989':
      return 1 / (cosZenith + 0.50572 * (6.07995 + (90 - zenith)) ** -1.6364);
    case 'gueymard_1993':
      return 1 / (cosZenith + 0.00176759 * zenith * (94.37515 - zenith) ** -1.21563);
    case 'simple':
      return 1 / cosZenith;
  }
}

/** Air mass corrected for pressure in Pa (0 to 120 000): the same proportion of the standard atmosphere. */
export function absoluteAirMass(relative: number, pressure: number): number {
  within('relative air mass', relative, 0, 50, '');
  within('pressure', pressure, 0, 120_000, 'Pa');
  return (relative * pressure) / STANDARD_PRESSURE;
}
