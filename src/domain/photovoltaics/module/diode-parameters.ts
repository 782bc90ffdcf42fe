import { positive, within } from '../range';

/** Boltzmann's constant, eV/K (CODATA 2018, exact). */
export const BOLTZMANN_EV = 8.617333262e-5;
/** K at 0 °C. */
export const KELVIN = 273.15;
/** Standard test conditions: W/m² and °C. */
export const STC = { poaGlobal: 1000, temperatureCell: 25 } as const;

export const DIODE_MODELS = ['de_soto', 'cec'] as const;
export type DiodeModel = (typeof DIODE_MODELS)[number];

/** The five parameters of a module at standard test conditions, and how they move with temperature. */
export interface DiodeReference {
  /** Temperature coefficient of isc, A/K. */
  alphaIsc: number;
  /** Modified ideality n·cellsInSeries·kT/q at 25 °C, V. */
  idealityVoltageRef: number;
  /** A */
  photocurrentRef: number;
  /** A */
  saturationCurrentRef: number;
  /** Ω */
  resistanceShuntRef: number;
  /** Ω */
  resistanceSeries: number;
  /** Band gap at 25 °C, eV; without it 1.121 (silicon). */
  bandGapRef?: number;
  /** Relative change of the band gap, 1/K; without it −0.0002677 (silicon). */
  bandGapSlope?: number;
  /** The CEC model's sixth parameter, %; the De Soto model leaves it out. */
  adjust?: number;
}

/** The five parameters at one irradiance and cell temperature: I = IL − Io (exp((V + I·Rs)/a) − 1) − (V + I·Rs)/Rsh. */
export interface DiodeParameters {
  /** IL, A */
  photocurrent: number;
  /** Io, A */
  saturationCurrent: number;
  /** Rs, Ω */
  resistanceSeries: number;
  /** Rsh, Ω; infinite in the dark. */
  resistanceShunt: number;
  /** a, V */
  idealityVoltage: number;
}

/** W/m² below which there is no light: keeps tiny numbers from overflowing where they divide. */
export const DARK = 1e-6;

/** Refuses irradiance outside 0 to 2000 W/m² and cell temperature outside −90 to 150 °C. */
export function checkOperation(poaGlobal: number, temperatureCell: number): void {
  within('poaGlobal', poaGlobal, 0, 2000, 'W/m²');
  within('temperatureCell', temperatureCell, -90, 150, '°C');
}

export function checkReference(reference: DiodeReference): void {
  within('alphaIsc', reference.alphaIsc, -1, 1, 'A/K');
  positive('idealityVoltageRef', reference.idealityVoltageRef, 100, 'V');
  positive('photocurrentRef', reference.photocurrentRef, 1000, 'A');
  positive('saturationCurrentRef', reference.saturationCurrentRef, 1, 'A');
  positive('resistanceShuntRef', reference.resistanceShuntRef, 1e9, 'Ω');
  within('resistanceSeries', reference.resistanceSeries, 0, 1e4, 'Ω');
}

/**
 * The five parameters at an irradiance and a cell temperature: W. De Soto, S.A. Klein, W.A. Beckman, Solar Energy 80
 * (2006) 78; for `cec` with `adjust` on alphaIsc: A. Dobos, J. Sol. Energy Eng. 134 (2012) 021011.
 *
 * @param poaGlobal W/m², 0 to 2000: what reaches the cells, after any incidence-angle modifier
 * @param temperatureCell °C, −90 to 150
 * @throws RangeError naming the parameter
 */
export function diodeParameters(
  reference: DiodeReference,
  poaGlobal: number,
  temperatureCell: number,
  model: DiodeModel = 'de_soto',
): DiodeParameters {
  checkOperation(poaGlobal, temperatureCell);
  checkReference(reference);
  const bandGapRef = reference.bandGapRef ?? 1.121;
  const bandGapSlope = reference.bandGapSlope ?? -0.0002677;
  const adjust = model === 'cec' ? (reference.adjust ?? 0) : 0;
  const alpha = reference.alphaIsc * (1 - adjust / 100);
  const rise = temperatureCell - STC.temperatureCell;
  const kelvinRef = STC.temperatureCell + KELVIN;
  const kelvin = temperatureCell + KELVIN;
  const bandGap = bandGapRef * (1 + bandGapSlope * rise);
  const light = poaGlobal < DARK ? 0 : poaGlobal / STC.poaGlobal;
  return {
    photocurrent: Math.max(0, light * (reference.photocurrentRef + alpha * rise)),
    saturationCurrent:
      reference.saturationCurrentRef *
      (kelvin / kelvinRef) ** 3 *
      Math.exp(bandGapRef / (BOLTZMANN_EV * kelvinRef) - bandGap / (BOLTZMANN_EV * kelvin)),
    resistanceSeries: reference.resistanceSeries,
    resistanceShunt: reference.resistanceShuntRef / light,
    idealityVoltage: reference.idealityVoltageRef * (kelvin / kelvinRef),
  };
}

/** The same parameters for one of `groups` equal sub-strings of the module. */
export function parametersOfGroup(module: DiodeParameters, groups: number): DiodeParameters {
  return {
    ...module,
    resistanceSeries: module.resistanceSeries / groups,
    resistanceShunt: module.resistanceShunt / groups,
    idealityVoltage: module.idealityVoltage / groups,
  };
}
