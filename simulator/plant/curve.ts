import { NO_UNIT, PASSING, SHUTDOWN, STARTING, UNPOWERED, type StringPlant } from './string-plant';

/** V across a group of cells that its diode carries past. */
const DIODE = -0.45;
/** Ohm of a passing unit's switch and short leads. */
const UNIT_RESISTANCE = 0.012;

/**
 * Sets light and heat of each module from the plane's, ready for the curves below.
 *
 * @param beam W/m² at the string, clouds taken off
 * @param diffuse W/m²
 * @param kept share of light that dirt lets through
 * @param cell °C of the plane's cells
 */
export function setLight(s: StringPlant, beam: number, diffuse: number, kept: number, cell: number): void {
  const { iscRef, alphaIsc, betaVoc } = s.moduleType;
  const total = (beam + diffuse) * kept;
  s.slope = (s.slopeRef * (cell + 273.15)) / 298.15;
  const logLight = total > 0.01 ? Math.log(total / 1000) : -12;
  // Leakage within the cells: what an ideal diode's logarithm leaves out in weak light.
  const weak = total < 250 ? 0.03 * (1 - total / 250) ** 2 : 0;
  for (let i = 0; i < s.size; i++) {
    const t = cell + ((s.warmer[i] ?? 0) * total) / 1000;
    s.temperature[i] = t;
    s.irradiance[i] = total;
    const strength = s.strength[i] ?? 1;
    s.photocurrent[i] = iscRef * (total / 1000) * strength * (1 + alphaIsc * (t - 25));
    const vocRef = s.vocRef[i] ?? 0;
    const voc = vocRef * (1 + betaVoc * (t - 25) - weak) + s.slope * (logLight + strength - 1);
    const shorted = s.shortedGroups[i] ?? 0;
    s.voc[i] = Math.max(0, voc) * (1 - shorted / s.moduleType.bypassGroups);
  }
}

/** V of one module carrying `current` A: groups of cells in series, each with its bypass diode. */
export function moduleVoltage(s: StringPlant, i: number, current: number): number {
  const groups = s.moduleType.bypassGroups;
  const shorted = s.shortedGroups[i] ?? 0;
  const live = groups - shorted;
  if (live === 0) return DIODE * groups * 0.1;
  const photo = s.photocurrent[i] ?? 0;
  const rs = s.seriesResistance[i] ?? 0;
  const shaded = Math.min(live, s.shadedGroups[i] ?? 0);
  const voc = s.voc[i] ?? 0;
  if (shaded === 0) {
    const share = current / photo;
    if (!(share < 0.9999)) return DIODE * live;
    const v = voc + ((s.slope * live) / groups) * Math.log(1 - share) - current * rs * (live / groups);
    return v > DIODE * live ? v : DIODE * live;
  }
  const left = 1 - (s.shadeLoss[i] ?? 0);
  const slope = s.slope / groups;
  const group = (light: number) => {
    const share = current / (photo * light);
    if (!(share < 0.9999)) return DIODE;
    const v = voc / live + slope * Math.log(light * (1 - share)) - (current * rs) / groups;
    return v > DIODE ? v : DIODE;
  };
  return shaded * group(Math.max(left, 0.01)) + (live - shaded) * group(1);
}

/** V at the output of one unit (or of a module wired straight through where there is none). */
export function unitVoltage(s: StringPlant, i: number, current: number): number {
  switch (s.mode[i]) {
    case PASSING:
    case NO_UNIT:
      return moduleVoltage(s, i, current) - current * UNIT_RESISTANCE;
    case SHUTDOWN:
    case STARTING:
      // With current forced through, the unit conducts by its bypass path.
      return current > 0.02 ? (s.bypassVoltage[i] ?? 0) : (s.shutdownVoltage[i] ?? 0);
    default:
      return current > 0.02 ? (s.bypassVoltage[i] ?? 0) : 0;
  }
}

/** V at the inverter's end of the home run with `current` A flowing. */
export function stringVoltage(s: StringPlant, current: number): number {
  let v = -current * s.resistance;
  for (let i = 0; i < s.size; i++) v += unitVoltage(s, i, current);
  return v;
}

/** The largest photocurrent of a module that passes, A. */
export function largestPhotocurrent(s: StringPlant): number {
  let most = 0;
  for (let i = 0; i < s.size; i++)
    if (s.mode[i] === PASSING || s.mode[i] === NO_UNIT) most = Math.max(most, s.photocurrent[i] ?? 0);
  return most;
}

/** V over the string with no current, shadows left out: enough to see whether an input is alive. */
export function openVoltage(s: StringPlant): number {
  let v = 0;
  for (let i = 0; i < s.size; i++) {
    const mode = s.mode[i];
    if (mode === PASSING || mode === NO_UNIT) v += s.voc[i]!;
    else if (mode !== UNPOWERED) v += s.shutdownVoltage[i]!;
  }
  return v;
}

/** Writes the units' voltages for the current that was found. */
export function settle(s: StringPlant, current: number): void {
  s.current = current;
  let sum = 0;
  for (let i = 0; i < s.size; i++) {
    const out = unitVoltage(s, i, current);
    s.voltageOut[i] = out;
    s.voltageIn[i] =
      s.mode[i] === PASSING || s.mode[i] === NO_UNIT
        ? out + current * UNIT_RESISTANCE
        : s.mode[i] === UNPOWERED
          ? 0
          : moduleVoltage(s, i, 0.01);
    sum += out;
  }
  s.voltage = sum;
}
