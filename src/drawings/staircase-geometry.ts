import { conditionOf, rise, type Condition, type DrawnSlot } from './condition';
import { ticksTo } from './ticks';

export interface StaircaseInput {
  slots: readonly DrawnSlot[];
  /** V over the string by its units or its input; the only figure where units tell nothing. */
  voltage: number | null;
  /** V if all passed */
  expectedVoltage: number | null;
  /** V with all in shutdown, while that is in force: then it is what the dotted line shows. */
  expectedInShutdown?: number | null;
}

export interface Step {
  position: number;
  condition: Condition;
  assumed: boolean;
  /** px */
  x: number;
  width: number;
  /** px: the level before and after this slot */
  yFrom: number;
  yTo: number;
  /** px: how high the expected unit would stand on yFrom */
  yExpected: number;
  /** V added; null where nothing says */
  rise: number | null;
}
export interface Run {
  condition: Condition;
  from: number;
  to: number;
  x: number;
  width: number;
}
export interface StaircaseGeometry {
  width: number;
  height: number;
  plot: { left: number; right: number; top: number; bottom: number };
  ticks: { value: number; y: number }[];
  steps: Step[];
  /** Neighbouring slots of one condition that needs words. */
  runs: Run[];
  /** The dotted path of what is expected; empty where nothing is. */
  expectedPath: string;
  /** V and px of both ends of the gap; null where there is none worth showing. */
  gap: { volts: number; yExpected: number; yMeasured: number } | null;
  /** Where units tell nothing: one total, and how many passing units explain it. */
  total: { y: number; passing: number | null; of: number } | null;
  /** Positions whose number fits; those that need words come first. */
  labels: ReadonlySet<number>;
}

const GRAVEST_FIRST: readonly Condition[] = ['not_shutting_down', 'stuck', 'silent', 'unheard', 'shutdown'];
const TOLD_APART: ReadonlySet<Condition> = new Set([
  'stuck',
  'not_shutting_down',
  'shutdown',
  'silent',
  'unheard',
  'empty',
]);
/** A gap under this share of the expectation is not marked. */
const GAP_FROM = 0.03;

function runsOf(steps: readonly Step[]): Run[] {
  const runs: Run[] = [];
  for (const step of steps) {
    if (!TOLD_APART.has(step.condition)) continue;
    const last = runs[runs.length - 1];
    if (last?.condition === step.condition && last.to === step.position - 1) {
      last.to = step.position;
      last.width = step.x + step.width - last.x;
    } else {
      runs.push({
        condition: step.condition,
        from: step.position,
        to: step.position,
        x: step.x,
        width: step.width,
      });
    }
  }
  return runs;
}

/** Which position numbers fit beside each other, 18 px apart. */
function labelled(steps: readonly Step[], pitch: number): ReadonlySet<number> {
  const apart = 18 / pitch;
  const every = pitch >= 18 ? 1 : pitch >= 9 ? 2 : 5;
  const chosen: number[] = [];
  const add = (position: number) => {
    if (chosen.every((c) => Math.abs(c - position) >= apart)) chosen.push(position);
  };
  for (const condition of GRAVEST_FIRST)
    for (const s of steps) if (s.condition === condition) add(s.position);
  for (const s of steps) if (s.position === 1 || s.position % every === 0) add(s.position);
  return new Set(chosen);
}

/** How many passing units a total amounts to; null where expectation is too small to divide by. */
export function passingByTotal(
  voltage: number,
  expectedVoltage: number | null,
  units: number,
): number | null {
  if (!expectedVoltage || units === 0 || expectedVoltage / units < 5) return null;
  return Math.max(0, Math.min(units, Math.round((voltage / expectedVoltage) * units)));
}

function owesNothing(slot: DrawnSlot): boolean {
  const condition = conditionOf(slot);
  return rise(slot) === null || condition === 'shutdown' || condition === 'dark';
}

/** Where everything of a staircase lies, in px of a drawing `width` × `height`. Pure: screen, paper and mail share it. */
export function staircaseGeometry(input: StaircaseInput, width: number, height: number): StaircaseGeometry {
  const { slots } = input;
  const plot = { left: 54, right: width - (width < 500 ? 30 : 76), top: 14, bottom: height - 40 };
  const untold = slots.length > 0 && slots.every((s) => ['untold', 'empty'].includes(conditionOf(s)));
  const sumExpected = slots.reduce((sum, s) => sum + (s.serial === null ? 0 : (s.expected ?? 0)), 0);
  const ifPassing = sumExpected > 0 ? sumExpected : input.expectedVoltage;
  const expectedTotal = input.expectedInShutdown ?? ifPassing;
  const measured = slots.map((s) => rise(s) ?? 0);
  // in shutdown too the scale is that of a passing string: a few volts must look like a few volts
  let peak = Math.max(ifPassing ?? 0, expectedTotal ?? 0, untold ? (input.voltage ?? 0) : 0, 10);
  let level = 0;
  let lowest = 0;
  for (const v of measured) {
    level += v;
    peak = Math.max(peak, level);
    lowest = Math.min(lowest, level);
  }
  const ticks = ticksTo(peak, height < 240 ? 4 : 6);
  const top = ticks[ticks.length - 1] ?? 1;
  const scale = (plot.bottom - plot.top) / (top - Math.min(0, lowest));
  const y = (v: number) => plot.bottom - (v - Math.min(0, lowest)) * scale;
  const pitch = (plot.right - plot.left) / Math.max(1, slots.length);

  level = 0;
  const steps = slots.map((slot, i): Step => {
    const up = rise(slot);
    const from = level;
    level += up ?? 0;
    return {
      position: slot.position,
      condition: conditionOf(slot),
      assumed: slot.assumed,
      x: plot.left + i * pitch,
      width: pitch,
      yFrom: y(from),
      yTo: y(level),
      yExpected: y(from + (slot.expected ?? 0)),
      rise: up,
    };
  });

  let expectedPath = '';
  if (expectedTotal && expectedTotal > 0) {
    const share = slots.filter((s) => s.serial !== null).length;
    let e = 0;
    expectedPath = `M${plot.left} ${y(0).toFixed(1)}`;
    slots.forEach((slot, i) => {
      if (slot.serial !== null)
        e += sumExpected > 0 && expectedTotal === sumExpected ? (slot.expected ?? 0) : expectedTotal / share;
      expectedPath += `V${y(e).toFixed(1)}H${(plot.left + (i + 1) * pitch).toFixed(1)}`;
    });
  }

  const reached = untold ? input.voltage : level;
  // what a silent or unheard unit gives is not known, and one in shutdown on purpose or in the dark owes nothing
  const notOwed = slots.reduce((sum, s) => sum + (!untold && owesNothing(s) ? (s.expected ?? 0) : 0), 0);
  const short = expectedTotal !== null && reached !== null ? expectedTotal - notOwed - reached : 0;
  const gap =
    expectedTotal && !input.expectedInShutdown && reached !== null && short > expectedTotal * GAP_FROM
      ? { volts: short, yExpected: y(reached + short), yMeasured: y(reached) }
      : null;
  const units = slots.filter((s) => s.serial !== null).length;
  return {
    width,
    height,
    plot,
    ticks: ticks.map((value) => ({ value, y: y(value) })),
    steps,
    runs: runsOf(steps),
    expectedPath,
    gap,
    total:
      untold && input.voltage !== null
        ? {
            y: y(input.voltage),
            passing: passingByTotal(input.voltage, input.expectedVoltage, units),
            of: units,
          }
        : null,
    labels: labelled(steps, pitch),
  };
}
