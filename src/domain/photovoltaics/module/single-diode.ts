import type { DiodeParameters } from './diode-parameters';

/** The points that name a module's curve; A, V, W. */
export interface CurvePoints {
  isc: number;
  voc: number;
  imp: number;
  vmp: number;
  pmp: number;
  /** Current at half of voc. */
  ix: number;
  /** Current midway between vmp and voc. */
  ixx: number;
  /** pmp / (voc·isc); 0 in the dark. */
  fillFactor: number;
}

const MAX_STEPS = 200;

/*
 * All solutions work on the voltage across the diode, x = V + I·Rs (J.W. Bishop, Solar Cells 25 (1988) 73): both current
 * and voltage are explicit in it. The current is concave and falling in x, so Newton's method started where the function
 * is negative walks down to the root without overshooting, and needs no bracket.
 */

/** Current at a diode voltage x, A. */
function currentAcross(p: DiodeParameters, x: number): number {
  return p.photocurrent - p.saturationCurrent * Math.expm1(x / p.idealityVoltage) - x / p.resistanceShunt;
}

/** Root of weight·(current(x) − wanted) − pull·(x − from), falling and concave in x. */
function solve(p: DiodeParameters, start: number, wanted: number, weight = 1, pull = 0, from = 0): number {
  const { idealityVoltage, photocurrent, saturationCurrent } = p;
  const leak = weight / p.resistanceShunt + pull;
  let x = start;
  for (let step = 0; step < MAX_STEPS; step += 1) {
    const grown = saturationCurrent * Math.exp(x / idealityVoltage);
    const current = photocurrent + saturationCurrent - grown - x / p.resistanceShunt;
    const value = weight * (current - wanted) - pull * (x - from);
    const change = value / ((weight * grown) / idealityVoltage + leak);
    x += change;
    if (Math.abs(change) <= 1e-13 * Math.max(Math.abs(x), 1e-3)) break;
  }
  return x;
}

/** Open-circuit voltage, V. */
export function vocOfDiode(p: DiodeParameters): number {
  if (p.photocurrent <= 0) return 0;
  return solve(p, p.idealityVoltage * Math.log1p(p.photocurrent / p.saturationCurrent), 0);
}

/**
 * Current at a terminal voltage, A; below zero beyond voc.
 *
 * @param voltage V, any finite value
 * @throws RangeError for a voltage that is not finite
 */
export function currentAtVoltage(p: DiodeParameters, voltage: number): number {
  if (!Number.isFinite(voltage)) throw new RangeError(`voltage must be finite, but is ${voltage}`);
  const { resistanceSeries } = p;
  if (resistanceSeries === 0) return currentAcross(p, voltage);
  const linear =
    (voltage + (p.photocurrent + p.saturationCurrent) * resistanceSeries) /
    (1 + resistanceSeries / p.resistanceShunt);
  // far above voc the current is what the series resistance lets through: start no further than that needs
  const ceiling =
    p.idealityVoltage *
    Math.log1p((p.photocurrent + Math.abs(voltage) / resistanceSeries) / p.saturationCurrent);
  const x = solve(p, Math.min(linear, ceiling), 0, resistanceSeries, 1, voltage);
  // of the two ways to read the current off x, the one that an error in x moves less
  const slope = (p.saturationCurrent / p.idealityVoltage) * Math.exp(x / p.idealityVoltage);
  return slope * resistanceSeries < 1 ? currentAcross(p, x) : (x - voltage) / resistanceSeries;
}

/** Short-circuit current, A. */
export function iscOfDiode(p: DiodeParameters): number {
  return p.photocurrent <= 0 ? 0 : currentAtVoltage(p, 0);
}

/**
 * Terminal voltage at a current, V: above voc for a negative current, negative beyond isc (reverse breakdown is left
 * out, so a bypass diode has to be put beside it; see string/series).
 *
 * @throws RangeError for a current that is not finite, and for a current above zero through a module in the dark
 */
export function voltageAtCurrent(p: DiodeParameters, current: number): number {
  if (!Number.isFinite(current)) throw new RangeError(`current must be finite, but is ${current}`);
  const driven = p.photocurrent - current;
  if (current > 0 && p.resistanceShunt === Infinity) {
    throw new RangeError(`current must not be above 0 A for a module in the dark, but is ${current}`);
  }
  const start =
    driven >= 0
      ? p.idealityVoltage * Math.log1p(driven / p.saturationCurrent)
      : (driven + p.saturationCurrent) * p.resistanceShunt;
  const x =
    p.resistanceShunt === Infinity && driven < 0
      ? p.idealityVoltage * Math.log1p(driven / p.saturationCurrent)
      : solve(p, start, current);
  return x - current * p.resistanceSeries;
}

/** The maximum power point: A, V, W; zeros in the dark. */
export function maximumPowerPoint(p: DiodeParameters): { imp: number; vmp: number; pmp: number } {
  if (p.photocurrent <= 0) return { imp: 0, vmp: 0, pmp: 0 };
  const { idealityVoltage, resistanceSeries, saturationCurrent } = p;
  let low = 0;
  let high = vocOfDiode(p);
  let x = 0.85 * high;
  for (let step = 0; step < MAX_STEPS; step += 1) {
    const grown = saturationCurrent * Math.exp(x / idealityVoltage);
    const current = currentAcross(p, x);
    const slope = -grown / idealityVoltage - 1 / p.resistanceShunt;
    const bend = -grown / (idealityVoltage * idealityVoltage);
    // dP/dx and d²P/dx² of P = I·(x − I·Rs)
    const gain = current + slope * (x - 2 * current * resistanceSeries);
    const curvature =
      2 * slope + bend * (x - 2 * current * resistanceSeries) - 2 * slope * slope * resistanceSeries;
    if (gain > 0) low = x;
    else high = x;
    const newton = x - gain / curvature;
    const next = newton > low && newton < high ? newton : (low + high) / 2;
    const moved = Math.abs(next - x);
    x = next;
    if (moved <= 1e-13 * x) break;
  }
  const imp = currentAcross(p, x);
  const vmp = x - imp * resistanceSeries;
  return { imp, vmp, pmp: imp * vmp };
}

/** Every named point of the curve. */
export function curvePoints(p: DiodeParameters): CurvePoints {
  const isc = iscOfDiode(p);
  const voc = vocOfDiode(p);
  const { imp, vmp, pmp } = maximumPowerPoint(p);
  return {
    isc,
    voc,
    imp,
    vmp,
    pmp,
    ix: currentAtVoltage(p, voc / 2),
    ixx: currentAtVoltage(p, (voc + vmp) / 2),
    fillFactor: isc > 0 ? pmp / (voc * isc) : 0,
  };
}
