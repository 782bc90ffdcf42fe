import { describe, expect, it } from 'vitest';
import { UNIT_PRESETS } from '../equipment/unit-type';
import { FLOWS_FROM_A, judgeInput, seenPassing, STEADY_S, type InputReading } from './conductors';
import { commandedSpans, judgementTimes, type CommandPoint, type StringContext } from './context';
import { UNCHANGED } from './evidence';
import { judgeFrame, sweepString } from './judge';
import { newMemory, type StringMemory } from './memory';

const NOON = 1_750_000_000;
const released: CommandPoint = { sinceS: NOON - 86_400, inForce: 'released' };
const pressed: CommandPoint = { sinceS: NOON, inForce: 'initiator' };

function contextOf(kind: 'shutdown_only' | 'monitored', zone: CommandPoint[], n: number): StringContext {
  const behaviour = UNIT_PRESETS[kind];
  return {
    behaviour,
    times: judgementTimes(60, 30),
    timeLimitSource: '',
    slots: new Array<boolean>(n).fill(true),
    heardAtS: new Array<number>(n).fill(0),
    commands: commandedSpans(behaviour, 'operating', zone, []),
    light: [],
    snowLikely: false,
  };
}
const reading = (atS: number, voltageV: number, more: Partial<InputReading> = {}): InputReading => ({
  atS,
  voltageV,
  currentA: 0,
  strings: 1,
  module: { expectedV: 40, relativeSd: 0.01 },
  ...more,
});
const feed = (
  memory: StringMemory,
  context: StringContext,
  fromS: number,
  volts: number[],
  more: Partial<InputReading> = {},
) => volts.map((v, k) => judgeInput(memory, context, reading(fromS + 60 * k, v, more)).finding);

describe('a home run that stays up', () => {
  it('is not shutting down, position unknown, while every unit claims shutdown', () => {
    const context = contextOf('monitored', [released, pressed], 10);
    const memory = newMemory(context);
    judgeFrame(memory, context, { atS: NOON + 20, state: new Array<number>(10).fill(2) });
    const found = feed(memory, context, NOON + 60, [400, 400, 84.4, 84.2]);
    expect(found.slice(0, 2)).toEqual([null, null]); // capacitors may still hold it up
    expect(found[2]).toBeNull(); // one reading may be a stray
    expect(found[3]?.finding).toMatchObject({
      kind: 'not_shutting_down',
      evidence: { scope: 'string', thresholdV: 30, ofN: 10, units: 2 },
    });
  });
  it('is named right after the time limit while current flows: no capacitor gives that', () => {
    const context = contextOf('monitored', [released, pressed], 10);
    const memory = newMemory(context);
    judgeFrame(memory, context, { atS: NOON + 20, state: new Array<number>(10).fill(2) });
    const at = (afterS: number, currentA: number | null) =>
      judgeInput(memory, context, reading(NOON + afterS, 355, { currentA })).finding;
    expect([at(29, 10.8), at(31, FLOWS_FROM_A), at(32, null), at(33, -3)]).toEqual([null, null, null, null]);
    expect(at(34, 10.8)).toBeNull(); // one reading may be a stray
    const finding = at(40, 10.8)?.finding;
    expect(finding).toMatchObject({ kind: 'not_shutting_down', sinceS: NOON + 40 });
    expect(finding!.evidence.couldBe?.join()).not.toContain('capacitors');
  });
  it('is left to the unit that says that it passes', () => {
    const context = contextOf('monitored', [released, pressed], 10);
    const memory = newMemory(context);
    judgeFrame(memory, context, { atS: NOON + 90, state: [1, ...new Array<number>(9).fill(2)] });
    expect(feed(memory, context, NOON + 200, [45, 45, 45])).toEqual([null, null, null]);
  });
  it('is left to a unit of another string on the input that is seen to pass', () => {
    const context = contextOf('monitored', [released, pressed], 10);
    const memory = newMemory(context);
    judgeFrame(memory, context, { atS: NOON + 20, state: new Array<number>(10).fill(2) });
    const shared = { strings: 2, othersPassing: 1 };
    expect(feed(memory, context, NOON + 200, [45, 45, 45], shared)).toEqual([null, null, null]);
    const found = feed(memory, context, NOON + 400, [45, 45], { ...shared, othersPassing: 0 });
    expect(found[1]?.finding).toMatchObject({ kind: 'not_shutting_down', evidence: { scope: 'input' } });
  });
  it('is not explained by a unit that passed before the command and is silent since', () => {
    const context = contextOf('monitored', [released, pressed], 10);
    const memory = newMemory(context);
    judgeFrame(memory, context, { atS: NOON - 60, state: new Array<number>(10).fill(1) });
    const state = [null, ...new Array<number>(9).fill(2)];
    judgeFrame(memory, context, { atS: NOON + 20, state });
    expect(seenPassing(memory, context, NOON + 200)).toBe(0);
    const found = feed(memory, context, NOON + 200, [45, 45]);
    expect(found[1]?.finding).toMatchObject({ kind: 'not_shutting_down', evidence: { scope: 'string' } });
  });
  it('ends with the release, and a shared input is named as such', () => {
    const zone = [released, pressed, { sinceS: NOON + 900, inForce: 'released' as const }];
    const context = contextOf('shutdown_only', zone, 10);
    const memory = newMemory(context);
    sweepString(memory, context, NOON + 40);
    const found = feed(memory, context, NOON + 200, [390, 390], { strings: 2 });
    expect(found[1]?.finding?.evidence).toMatchObject({ scope: 'input', units: null });
    expect(sweepString(memory, context, NOON + 905).finding).toMatchObject({
      finding: null,
      before: 'not_shutting_down',
    });
  });
  it('takes a few volts for what they are', () => {
    const context = contextOf('shutdown_only', [released, pressed], 14);
    const memory = newMemory(context);
    expect(feed(memory, context, NOON + 200, [8.4, 8.4, 8.4])).toEqual([null, null, null]);
  });
});

describe('a released string whose units tell nothing', () => {
  const MINUTES = STEADY_S / 60;
  const steady = (volts: number, minutes = MINUTES + 1) => new Array<number>(minutes).fill(volts);
  it('counts the held ones once they have stood for two hours, and forgives one odd reading', () => {
    const context = contextOf('shutdown_only', [released], 12);
    const memory = newMemory(context);
    // 10 × 40 V, two by their bypass path at −0.5 V, under load
    const volts = [...steady(399, 20), 480, ...steady(399, MINUTES)];
    const found = feed(memory, context, NOON, volts, { currentA: 6 });
    expect(found.slice(0, MINUTES).every((f) => f === null)).toBe(true);
    expect(found.find((f) => f !== null)?.finding).toMatchObject({
      kind: 'stuck_positions_unknown',
      evidence: { units: 2, ofN: 12, scope: 'string' },
    });
    const after = NOON + 60 * volts.length;
    expect(feed(memory, context, after, [480, 480], { currentA: 6 })[1]).toMatchObject({ finding: null });
  });
  it('one of eighteen is told against inputs of the same inverter, and not against a datasheet', () => {
    const context = contextOf('shutdown_only', [released], 18);
    const volts = steady(17 * 40 - 0.5);
    const against = (siblings: number) =>
      feed(newMemory(context), context, NOON, volts, {
        currentA: 6,
        module: { expectedV: 40, relativeSd: siblings === 0 ? 0.04 : 0.012, siblings },
      }).find((f) => f !== null)?.finding?.evidence;
    expect(against(6)).toMatchObject({ units: 1, unitsRange: [1, 1] });
    expect(against(2)).toMatchObject({ units: 1 });
    expect(against(0)).toBeUndefined();
  });
  it('a shadow that moves on is not a held unit', () => {
    const context = contextOf('shutdown_only', [released], 18);
    const memory = newMemory(context);
    const shadow = Array.from({ length: 5 }, (_, hour) => steady(40 * (17 - (hour % 2)), 60)).flat();
    const module = { expectedV: 40, relativeSd: 0.012, siblings: 6 };
    expect(feed(memory, context, NOON, shadow, { currentA: 6, module }).every((f) => f === null)).toBe(true);
  });
  it('takes a dead string in frost for a dark one', () => {
    const frost = { ...contextOf('shutdown_only', [released], 12), snowLikely: true };
    expect(feed(newMemory(frost), frost, NOON, steady(0, 10)).every((f) => f === null)).toBe(true);
    const mild = contextOf('shutdown_only', [released], 12);
    expect(feed(newMemory(mild), mild, NOON, steady(0, 10))[2]?.finding?.evidence).toMatchObject({
      units: 12,
    });
  });
  it('says nothing of a deficit that its expectation cannot carry', () => {
    const context = contextOf('shutdown_only', [released], 12);
    const memory = newMemory(context);
    const wide = { module: { expectedV: 40, relativeSd: 0.06 }, currentA: 6 };
    expect(feed(memory, context, NOON, steady(440), wide).every((f) => f === null)).toBe(true);
  });
  it('says nothing of one string among parallel ones, unless all are down', () => {
    const context = contextOf('shutdown_only', [released], 12);
    const memory = newMemory(context);
    expect(feed(memory, context, NOON, [430, 430, 430], { strings: 3, currentA: 9 })).toEqual([
      null,
      null,
      null,
    ]);
    const found = feed(memory, context, NOON + 300, [7.2, 7.2, 7.2], { strings: 3 });
    expect(found[2]?.finding?.evidence).toMatchObject({ scope: 'input', units: 12, ofN: 12 });
  });
  it('keeps still by night', () => {
    const context = {
      ...contextOf('shutdown_only', [released], 12),
      light: [{ sinceS: 0, light: 'dark' as const }],
    };
    expect(judgeInput(newMemory(context), context, reading(NOON, 0))).toBe(UNCHANGED);
  });
});

describe('a measured string on its input', () => {
  const frame = (atS: number, each: number[]) => ({
    atS,
    state: each.map(() => 1),
    voltageOut: each.map((v) => v * 100),
  });
  it('is unexplained when the input has a module more than the units give', () => {
    const context = contextOf('monitored', [released], 10);
    const memory = newMemory(context);
    const found = [0, 1, 2].map((k) => {
      judgeFrame(memory, context, frame(NOON + 60 * k, new Array<number>(10).fill(35)));
      return judgeInput(memory, context, reading(NOON + 60 * k, 385)).finding;
    });
    expect(found[2]?.finding).toMatchObject({ kind: 'unexplained_voltage' });
    expect(found[2]?.finding?.evidence.couldBe[0]).toContain('without its unit');
  });
  it('is explained within cable and accuracy', () => {
    const context = contextOf('monitored', [released], 10);
    const memory = newMemory(context);
    for (let k = 0; k < 4; k++) {
      judgeFrame(memory, context, frame(NOON + 60 * k, new Array<number>(10).fill(35)));
      expect(judgeInput(memory, context, reading(NOON + 60 * k, 346, { currentA: 9 }))).toBe(UNCHANGED);
    }
  });
  it('of units that measure their module only is held against what they claim', () => {
    const context = contextOf('monitored', [released], 10);
    context.behaviour = { ...context.behaviour, measures: 'input' };
    const claims = (atS: number, state: number[]) => ({
      atS,
      state,
      voltageIn: state.map(() => 3500),
    });
    const judged = (volts: number, state: number[]) => {
      const memory = newMemory(context);
      return [0, 1, 2].map((k) => {
        judgeFrame(memory, context, claims(NOON + 60 * k, state));
        return judgeInput(memory, context, reading(NOON + 60 * k, volts, { currentA: 7 })).finding;
      })[2];
    };
    const all = new Array<number>(10).fill(1);
    expect(judged(346, all)).toBeFalsy();
    const lacking = judged(312, all)?.finding;
    expect(lacking).toMatchObject({ kind: 'unexplained_voltage', evidence: { expectedV: 350 } });
    expect(lacking?.evidence.couldBe[0]).toBe('a unit that claims to pass does not');
    expect(lacking?.evidence.thresholdSource).toContain('what the units claim');
    // the one that says it is in shutdown explains the voltage, and has a verdict of its own
    expect(judged(312, [2, ...all.slice(1)])).toBeFalsy();
    // an optimizing unit moves its output: its module's voltage says nothing of it
    context.behaviour = { ...context.behaviour, kind: 'optimizing' };
    expect(judged(250, all)).toBeFalsy();
  });
});
