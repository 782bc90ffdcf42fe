import { within } from '../range';

export const EXTRATERRESTRIAL_MODELS = ['spencer_1971', 'asce'] as const;
export type ExtraterrestrialModel = (typeof EXTRATERRESTRIAL_MODELS)[number];

/** W/m² */
export const SOLAR_CONSTANT = 1366.1;

/**
 * Irradiance normal to the beam outside the atmosphere, W/m². `spencer_1971`: J.W. Spencer, Search 2 (1971) 172, as in
 * Duffie & Beckman eq. 1.4.1b; `asce`: one cosine, Duffie & Beckman eq. 1.4.1a.
 *
 * @param dayOfYear 1 to 366
 * @throws RangeError naming the parameter
 */
export function dniExtra(
  dayOfYear: number,
  model: ExtraterrestrialModel = 'spencer_1971',
  solarConstant: number = SOLAR_CONSTANT,
): number {
  within('dayOfYear', dayOfYear, 1, 367, '');
  within('solarConstant', solarConstant, 1000, 2000, 'W/m²');
  if (model === 'asce') return solarConstant * (1 + 0.033 * Math.cos((2 * Math.PI * dayOfYear) / 365));
  const b = (2 * Math.PI * (dayOfYear - 1)) / 365;
  return (
    solarConstant *
    (1.00011 +
      0.034221 * Math.cos(b) +
      0.00128 * Math.sin(b) +
      0.000719 * Math.cos(2 * b) +
      0.000077 * Math.sin(2 * b))
  );
}
