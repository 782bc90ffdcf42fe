import { diodeParameters, parametersOfGroup, type DiodeParameters } from '../module/diode-parameters';
import { currentAtVoltage, voltageAtCurrent } from '../module/single-diode';
import { wholeWithin, within } from '../range';
import { fallingRoot, peakOf } from '../root';
import type { BypassGroup, StringElement, StringModule } from './elements';

/** A part of a string that is there `count` times: its voltage over the string's current. */
interface Part {
  count: number;
  /** V at a current in A other than 0. */
  voltageAt: (current: number) => number;
  /** V open circuit. */
  open: number;
  /** Currents at which the voltage has a corner, A. */
  corners: readonly number[];
  /** No current can be pushed back through it. */
  blocksReverse: boolean;
  /** Bypass groups in it, and whether they give power (rather than being bypassed) at a current. */
  groups: number;
  givesPower: (current: number) => boolean;
}

/** A series string, ready to be asked. */
export interface SeriesString {
  /** V */
  voc: number;
  /** A; 0 for a string that gives no voltage of the right sign. */
  isc: number;
  /** V at a current in A; below 0 A only where nothing in the string blocks it. */
  voltageAt: (current: number) => number;
  /** A at a voltage in V; below 0 beyond voc, 0 there if something blocks. */
  currentAt: (voltage: number) => number;
  /** Currents between which the power has at most one peak, rising, from 0. */
  corners: readonly number[];
  blocksReverse: boolean;
  /** Bypass groups that are not bypassed at a current. */
  groupsGivingPower: (current: number) => number;
}

const CURRENT_LIMIT = 1000;

function checkUnitVoltages(shutdownVoltage: number, bypassVoltage: number): void {
  within('shutdownVoltage', shutdownVoltage, 0, 10, 'V');
  within('bypassVoltage', bypassVoltage, -5, 0, 'V');
}

function groupPart(module: StringModule, group: BypassGroup, groupsOfModule: number): Part {
  within('bypassForwardVoltage', module.bypassForwardVoltage, 0, 2, 'V');
  const whole = diodeParameters(module.reference, group.poaGlobal, group.temperatureCell, module.model);
  const parameters: DiodeParameters = parametersOfGroup(whole, groupsOfModule);
  const dark = parameters.photocurrent === 0;
  // 0 − x, because −0 would travel on
  const bypassed = 0 - module.bypassForwardVoltage;
  const voltageAt = (current: number): number =>
    dark && current > 0 ? bypassed : Math.max(voltageAtCurrent(parameters, current), bypassed);
  return {
    count: 1,
    voltageAt,
    open: dark ? 0 : voltageAtCurrent(parameters, 0),
    corners: dark ? [] : [currentAtVoltage(parameters, bypassed)],
    blocksReverse: false,
    groups: 1,
    givesPower: (current) => voltageAt(current) > bypassed,
  };
}

/** The groups of one module as one part. */
function modulePart(module: StringModule, groups: readonly BypassGroup[]): Part {
  wholeWithin('groups', groups.length, 1, 50);
  const parts = groups.map((group) => groupPart(module, group, groups.length));
  return {
    count: 1,
    voltageAt: (current) => sumOf(parts, (part) => part.voltageAt(current)),
    open: sumOf(parts, (part) => part.open),
    corners: parts.flatMap((part) => part.corners),
    blocksReverse: false,
    groups: groups.length,
    givesPower: (current) => parts.some((part) => part.givesPower(current)),
  };
}

const sumOf = (parts: readonly Part[], of: (part: Part) => number): number =>
  parts.reduce((sum, part) => sum + part.count * of(part), 0);

function constantPart(open: number, underCurrent: number, blocksReverse: boolean): Part {
  return {
    count: 1,
    voltageAt: () => underCurrent,
    open,
    corners: [],
    blocksReverse,
    groups: 0,
    givesPower: () => false,
  };
}

function reversedPart(module: StringModule, groups: readonly BypassGroup[]): Part {
  const upright = modulePart(module, groups);
  return {
    ...upright,
    voltageAt: (current) => -upright.voltageAt(-current),
    open: -upright.open,
    corners: [],
    groups: 0,
    givesPower: () => false,
  };
}

function optimizingPart(element: Extract<StringElement, { kind: 'optimizing' }>): Part {
  const { module, groups, efficiency, currentOutMax, bypassVoltage } = element;
  within('efficiency', efficiency, 0.5, 1, '');
  within('currentOutMax', currentOutMax, 0.1, CURRENT_LIMIT, 'A');
  checkUnitVoltages(0, bypassVoltage);
  const input = modulePart(module, groups);
  const best = powerPeaks(input.corners, (current) => current * input.voltageAt(current))[0];
  const imp = best?.at ?? 0;
  const power = (best?.value ?? 0) * efficiency;
  return {
    count: 1,
    // up to imp the unit passes its module on, from there it holds the module's best power
    voltageAt: (current) =>
      current > currentOutMax || power <= 0
        ? bypassVoltage
        : current <= imp
          ? efficiency * input.voltageAt(current)
          : power / current,
    open: input.open,
    corners: [...input.corners.filter((corner) => corner < imp), imp, currentOutMax],
    blocksReverse: true,
    groups: input.groups,
    givesPower: (current) => current <= currentOutMax && power > 0,
  };
}

/** The parts of a string, like ones counted together; null where a lead is open. */
function partsOf(elements: readonly StringElement[]): Part[] | null {
  const parts = new Map<unknown, Part>();
  const names = new Map<StringModule, number>();
  const add = (key: unknown, make: () => Part): void => {
    const known = parts.get(key);
    if (known) known.count += 1;
    else parts.set(key, make());
  };
  for (const element of elements) {
    switch (element.kind) {
      case 'open':
        return null;
      case 'missing':
        break;
      case 'module': {
        const { module, groups } = element;
        wholeWithin('groups', groups.length, 1, 50);
        const name = names.get(module) ?? names.size;
        names.set(module, name);
        for (const group of groups) {
          const key = `${name} ${groups.length} ${group.poaGlobal} ${group.temperatureCell}`;
          add(key, () => groupPart(module, group, groups.length));
        }
        break;
      }
      case 'reversed':
        add(element, () => reversedPart(element.module, element.groups));
        break;
      case 'optimizing':
        add(element, () => optimizingPart(element));
        break;
      case 'in_shutdown': {
        const { shutdownVoltage, bypassVoltage } = element;
        checkUnitVoltages(shutdownVoltage, bypassVoltage);
        add(`shutdown ${shutdownVoltage} ${bypassVoltage}`, () =>
          constantPart(shutdownVoltage, bypassVoltage, true),
        );
        break;
      }
      case 'unpowered':
        checkUnitVoltages(0, element.bypassVoltage);
        add(`unpowered ${element.bypassVoltage}`, () => constantPart(0, element.bypassVoltage, true));
        break;
    }
  }
  return [...parts.values()];
}

/**
 * Peaks of a power between corners of the current, the highest first. Between two corners every part's voltage is
 * concave in the current (or holds its power), so the power has one peak there at most.
 */
export function powerPeaks(
  corners: readonly number[],
  power: (current: number) => number,
): { at: number; value: number }[] {
  const edges = [...new Set([0, ...corners.filter((corner) => corner > 0)])].sort((a, b) => a - b);
  const peaks: { at: number; value: number }[] = [];
  for (let i = 0; i + 1 < edges.length; i += 1) {
    const left = edges[i]!;
    const right = edges[i + 1]!;
    if (right - left <= 1e-9 * right) continue;
    const peak = peakOf(power, left, right);
    const inside = Math.min(peak.at - left, right - peak.at) > 1e-7 * right;
    if (inside && peak.value > 0) peaks.push(peak);
  }
  // a level stretch, such as an optimizing unit makes, may have its highest point on a corner
  for (let i = 1; i < edges.length; i += 1) {
    const at = edges[i]!;
    const value = power(at);
    const floor = value * (1 - 1e-9);
    const beside = i + 1 < edges.length ? power(at * (1 + 1e-6)) : 0;
    if (value <= 0 || power(at * (1 - 1e-6)) * (1 - 1e-9) > value || beside * (1 - 1e-9) > value) continue;
    const last = edges[i + 1] ?? at;
    const known = peaks.some((peak) => peak.at >= edges[i - 1]! && peak.at <= last && peak.value >= floor);
    if (!known) peaks.push({ at, value });
  }
  return peaks.sort((a, b) => b.value - a.value);
}

/**
 * A series string of elements: voltages add at a common current; a bypassed group gives −bypassForwardVoltage (J.W.
 * Bishop, Solar Cells 25 (1988) 73, with ideal diodes and without reverse breakdown).
 *
 * @param resistance Ω of cables and connectors in series, 0 to 1000
 * @returns null where a lead is open: no current can flow and the ends float
 * @throws RangeError naming the parameter
 */
export function seriesString(elements: readonly StringElement[], resistance = 0): SeriesString | null {
  within('resistance', resistance, 0, 1000, 'Ω');
  const parts = partsOf(elements);
  if (!parts) return null;
  const blocksReverse = parts.some((part) => part.blocksReverse);
  const voc = sumOf(parts, (part) => part.open);
  const voltageAt = (current: number): number => {
    within('current', current, -CURRENT_LIMIT, CURRENT_LIMIT, 'A');
    if (current === 0) return voc;
    if (current < 0 && blocksReverse) {
      throw new RangeError(`current must not be below 0 A where a unit blocks it, but is ${current}`);
    }
    return sumOf(parts, (part) => part.voltageAt(current)) - current * resistance;
  };
  const corners = [...new Set(parts.flatMap((part) => part.corners))]
    .filter((corner) => corner > 0)
    .sort((a, b) => a - b);
  const most = corners[corners.length - 1] ?? 0;
  let cornerVoltages: number[] | null = null;
  /** The corners between which a voltage below voc lies, A; the upper one is null beyond the last. */
  const bracket = (voltage: number): [low: number, high: number | null] => {
    cornerVoltages ??= corners.map(voltageAt);
    let low = 0;
    let high = corners.length;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (cornerVoltages[middle]! > voltage) low = middle + 1;
      else high = middle;
    }
    return [corners[low - 1] ?? 0, corners[low] ?? null];
  };

  const currentAt = (voltage: number): number => {
    within('voltage', voltage, -1e5, 1e5, 'V');
    if (voltage >= voc) {
      if (blocksReverse || voltage === voc) return 0;
      let back = -0.1;
      while (back > -CURRENT_LIMIT && voltageAt(back) < voltage) back = Math.max(-CURRENT_LIMIT, back * 4);
      return fallingRoot((current) => voltageAt(current) - voltage, back, 0);
    }
    const [low, corner] = bracket(voltage);
    let high = corner ?? Math.max(most, 1e-3);
    if (corner === null && (resistance > 0 || voltage < 0)) {
      // beyond the last corner only the series resistance (or nothing) limits the current
      while (high < CURRENT_LIMIT && voltageAt(high) > voltage) high = Math.min(CURRENT_LIMIT, high * 2);
    }
    // at exactly 0 A units in shutdown stand higher than under the least current
    return fallingRoot((current) => voltageAt(Math.max(current, Number.MIN_VALUE)) - voltage, low, high);
  };

  return {
    voc,
    isc: voc > 0 ? currentAt(0) : 0,
    voltageAt,
    currentAt,
    corners,
    blocksReverse,
    groupsGivingPower: (current) =>
      parts.reduce((sum, part) => sum + (part.givesPower(current) ? part.count * part.groups : 0), 0),
  };
}

/** Voltage of a string at a current, V; null where a lead is open. See `seriesString`. */
export function stringVoltageAt(
  elements: readonly StringElement[],
  current: number,
  resistance = 0,
): number | null {
  return seriesString(elements, resistance)?.voltageAt(current) ?? null;
}
