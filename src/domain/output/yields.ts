/** One recording interval; null where nothing was measured. */
export interface YieldRecord {
  /** W/m² in the plane */
  poaGlobal: number | null;
  /** °C */
  temperatureModule: number | null;
  /** W, AC, averaged over the interval. */
  powerOut: number | null;
  /** W, DC, averaged over the interval. */
  powerDc?: number | null;
  /** Whether the plant could have run; absent: not known. */
  available?: boolean;
}

export interface YieldInputs {
  /** Rated DC power at STC, W. */
  p0: number;
  /** Relative temperature coefficient of power, 1/K. */
  gammaPmp: number;
  /** Length of an interval, h. */
  intervalH: number;
  /** Irradiance-weighted module temperature of a typical or longer period, °C; without it that ratio is null. */
  temperatureModuleAnnual?: number;
}

/** Yields and ratios over the intervals that have what each needs; null where none has. */
export interface Yields {
  /** kWh, AC, over intervals with irradiance. */
  energyKWh: number;
  /** kWh/m² over the same intervals. */
  insolationKWhM2: number;
  /** Yf = E/P0, h. */
  finalYieldH: number;
  /** Yr = H/Gref, h. */
  referenceYieldH: number;
  /** Ya = E_DC/P0, h, over intervals with DC power; null without any. */
  arrayYieldH: number | null;
  /** Yr − Ya and Ya − Yf over the intervals that have all three, h. */
  captureLossH: number | null;
  systemLossH: number | null;
  performanceRatio: number | null;
  /** Denominator corrected to 25 °C. */
  performanceRatioStc: number | null;
  /** Denominator corrected to `temperatureModuleAnnual`. */
  performanceRatioAnnual: number | null;
  /** °C */
  irradianceWeightedTemperature: number | null;
  /** Share of daylight intervals with known state in which the plant could have run. */
  availability: number | null;
  /** Share of intervals that hold both irradiance and power, and of those that hold temperature too. */
  completeness: number;
  completenessWithTemperature: number;
}

const REFERENCE_IRRADIANCE = 1000;
/** Availability counts intervals with more light than this, W/m² (common practice). */
const DAYLIGHT = 50;

function checkInputs(records: readonly YieldRecord[], inputs: YieldInputs): void {
  const { p0, gammaPmp, intervalH, temperatureModuleAnnual } = inputs;
  const refuse = (name: string, value: number, allowed: string) => {
    throw new RangeError(`${name} must be ${allowed}, but is ${value}`);
  };
  if (!(p0 > 0 && p0 < 1e12)) refuse('p0', p0, 'above 0 W');
  if (!(gammaPmp >= -0.02 && gammaPmp <= 0.01)) refuse('gammaPmp', gammaPmp, 'between -0.02 and 0.01 1/K');
  if (!(intervalH > 0 && intervalH <= 24)) refuse('intervalH', intervalH, 'above 0 and at most 24 h');
  if (
    temperatureModuleAnnual !== undefined &&
    !(temperatureModuleAnnual >= -60 && temperatureModuleAnnual <= 120)
  ) {
    refuse('temperatureModuleAnnual', temperatureModuleAnnual, 'between -60 and 120 °C');
  }
  records.forEach((record, index) => {
    for (const key of ['poaGlobal', 'temperatureModule', 'powerOut', 'powerDc'] as const) {
      const value = record[key] ?? 0;
      if (!Number.isFinite(value)) refuse(`records[${index}].${key}`, value, 'finite or null');
    }
  });
}

const ratio = (above: number, below: number): number | null => (below > 0 ? above / below : null);

/**
 * Yields and performance ratios by IEC 61724-1:2017, clause 10. The STC-corrected ratio weighs each interval of the
 * denominator by 1 + gammaPmp (T − 25 °C), the annual-temperature-equivalent one by 1 + gammaPmp (T − T_annual) (the
 * latter from memory; also T. Dierauf et al., NREL/TP-5200-57991, eq. 5). T_annual must come from a typical or longer
 * period: taken from the same records the correction cancels out.
 *
 * An interval counts only if it has what the figure needs, so a gap in irradiance never makes a plant look good. The two
 * corrected ratios use intervals that have temperature as well.
 *
 * @throws RangeError naming the parameter
 */
export function yields(records: readonly YieldRecord[], inputs: YieldInputs): Yields {
  checkInputs(records, inputs);
  const { p0, gammaPmp, intervalH, temperatureModuleAnnual } = inputs;
  let energy = 0;
  let insolation = 0;
  let counted = 0;
  let energyWarm = 0;
  let insolationWarm = 0;
  let correctedStc = 0;
  let correctedAnnual = 0;
  let weighted = 0;
  let countedWarm = 0;
  let energyDc = 0;
  let insolationDc = 0;
  let energyAcDc = 0;
  let countedDc = 0;
  let daylight = 0;
  let ready = 0;
  for (const { poaGlobal, temperatureModule, powerOut, powerDc = null, available } of records) {
    if (poaGlobal === null) continue;
    if (available !== undefined && poaGlobal > DAYLIGHT) {
      daylight += 1;
      if (available) ready += 1;
    }
    if (powerOut === null) continue;
    counted += 1;
    energy += powerOut;
    insolation += poaGlobal;
    if (powerDc !== null) {
      countedDc += 1;
      energyDc += powerDc;
      insolationDc += poaGlobal;
      energyAcDc += powerOut;
    }
    if (temperatureModule === null) continue;
    countedWarm += 1;
    energyWarm += powerOut;
    insolationWarm += poaGlobal;
    weighted += poaGlobal * temperatureModule;
    correctedStc += poaGlobal * (1 + gammaPmp * (temperatureModule - 25));
    correctedAnnual += poaGlobal * (1 + gammaPmp * (temperatureModule - (temperatureModuleAnnual ?? 25)));
  }
  const finalYieldH = (energy * intervalH) / p0;
  const referenceYieldH = (insolation * intervalH) / REFERENCE_IRRADIANCE;
  const arrayYieldH = countedDc > 0 ? (energyDc * intervalH) / p0 : null;
  const warmRatio = (denominator: number) =>
    ratio(energyWarm / p0, Math.max(0, denominator) / REFERENCE_IRRADIANCE);
  return {
    energyKWh: (energy * intervalH) / 1000,
    insolationKWhM2: (insolation * intervalH) / 1000,
    finalYieldH,
    referenceYieldH,
    arrayYieldH,
    captureLossH:
      arrayYieldH === null ? null : (insolationDc * intervalH) / REFERENCE_IRRADIANCE - arrayYieldH,
    systemLossH: arrayYieldH === null ? null : arrayYieldH - (energyAcDc * intervalH) / p0,
    performanceRatio: ratio(finalYieldH, referenceYieldH),
    performanceRatioStc: warmRatio(correctedStc),
    performanceRatioAnnual: temperatureModuleAnnual === undefined ? null : warmRatio(correctedAnnual),
    irradianceWeightedTemperature: ratio(weighted, insolationWarm),
    availability: daylight > 0 ? ready / daylight : null,
    completeness: records.length > 0 ? counted / records.length : 0,
    completenessWithTemperature: records.length > 0 ? countedWarm / records.length : 0,
  };
}
