import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { outputLimits } from '../verdicts/observe';
import { conductOf, type ConductTimes, type StringReports } from './shutdown-test-evidence';
import type { TestedPart } from './shutdown-test-record';

const part: TestedPart = {
  id: 'A1',
  name: 'A1',
  kind: 'monitored',
  serials: ['S1', null],
  homeRunLeavesArray: true,
  input: { name: 'x', strings: 1 },
  transmitters: [],
  shutdownV: { nominal: 0.6, max: 0.7 },
  passingFromV: 3,
};
const limits = outputLimits({ shutdownVoltage: { nominal: 0.6, min: 0.55, max: 0.66 }, measures: 'output' });
const C = 1000;
const times: ConductTimes = { commandS: C, releaseS: null, untilS: C + 600, timeLimitS: 30, lookBackS: 120 };
const frame = (s: number, state: number, volts: number) => ({
  atS: C + s,
  state: [state, null],
  voltageOut: [Math.round(volts * 100), null],
});
const PASSING = 1;
const SHUTDOWN = 2;
const run = (
  frames: StringReports['frames'],
  more: Partial<ConductTimes> = {},
  rest: Partial<StringReports> = {},
) => conductOf({ part, limits, frames, traces: [], inputs: [], ...rest }, { ...times, ...more });

describe('the conduct of a unit', () => {
  it('lies between two reports: passing at 18 s, in shutdown at 78 s', () => {
    const { units } = run([frame(-42, PASSING, 38), frame(18, PASSING, 38), frame(78, SHUTDOWN, 0.6)]);
    expect(units[0]).toMatchObject({ followed: [18, 78], passedAtS: null, basis: 'measured' });
    expect(units[1]).toMatchObject({ serial: null, followed: null, basis: 'nothing' });
  });
  it('begins at the command where only a report before it shows it passing', () => {
    expect(run([frame(-42, PASSING, 38), frame(18, SHUTDOWN, 0.6)]).units[0]!.followed).toEqual([0, 18]);
  });
  it('shows nothing of a unit that was in shutdown before', () => {
    const [u] = run([frame(-42, SHUTDOWN, 0.6), frame(18, SHUTDOWN, 0.6)]).units;
    expect(u).toMatchObject({ followed: null, downBefore: true });
  });
  it('shows nothing where nobody knows what it did before', () => {
    expect(run([frame(18, SHUTDOWN, 0.6)]).units[0]).toMatchObject({ followed: null, downBefore: false });
    expect(run([frame(-500, PASSING, 38), frame(18, SHUTDOWN, 0.6)]).units[0]!.followed).toBeNull();
  });
  it('believes the conductors before the claim', () => {
    const [u] = run([frame(-42, PASSING, 38), frame(18, SHUTDOWN, 38), frame(78, SHUTDOWN, 38)]).units;
    expect(u).toMatchObject({ followed: null, passedAtS: 78, basis: 'measured' });
  });
  it('counts a unit that comes up again before the release as passing', () => {
    const [u] = run([frame(-2, PASSING, 38), frame(8, SHUTDOWN, 0.6), frame(68, PASSING, 38)]).units;
    expect(u).toMatchObject({ followed: null, passedAtS: 68 });
  });
  it('does not blame it for passing after the release, and gives the return as an interval', () => {
    const frames = [
      frame(-2, PASSING, 38),
      frame(8, SHUTDOWN, 0.6),
      frame(62, SHUTDOWN, 0.6),
      frame(90, PASSING, 38),
    ];
    expect(run(frames, { releaseS: C + 60 }).units[0]).toMatchObject({
      followed: [0, 8],
      returned: [2, 30],
      heldAtS: null,
    });
    expect(run(frames.slice(0, 3), { releaseS: C + 60 }).units[0]).toMatchObject({
      returned: null,
      heldAtS: 2,
    });
  });
  it('says nothing of a return where it never went', () => {
    const frames = [frame(-2, PASSING, 38), frame(40, PASSING, 38), frame(90, PASSING, 38)];
    expect(run(frames, { releaseS: C + 60 }).units[0]).toMatchObject({
      passedAtS: 40,
      returned: null,
      heldAtS: null,
    });
  });
  it('follows a trace to the second', () => {
    const unitV = [38, 38, 38, 20, 0.6, 0.6].map((v) => [v, null]);
    const trace = {
      measuringPoint: 'unit_sum' as const,
      accuracyV: 1,
      startedS: C,
      voltage: unitV.map(([v]) => v ?? null),
      unitV,
    };
    const seen = run([], {}, { traces: [trace] });
    expect(seen.units[0]!.followed).toEqual([3, 4]);
    expect(seen.traces[0]).not.toHaveProperty('unitV');
  });
  it('is not changed by what a trace goes on to say after the end of the round', () => {
    const trace = (seconds: number) => ({
      measuringPoint: 'unit_sum' as const,
      accuracyV: 1,
      startedS: C,
      voltage: new Array<number>(seconds).fill(38),
      unitV: new Array<(number | null)[]>(seconds).fill([38, null]),
    });
    const at = (seconds: number) =>
      run([], { untilS: C + 50 }, { traces: [trace(seconds), { ...trace(9), startedS: C + 60 }] });
    expect(at(120)).toEqual(at(51));
    expect(at(120).traces).toHaveLength(1);
    expect(at(120).units[0]!.passedAtS).toBe(50);
  });
  it('says nothing before a command', () => {
    expect(run([frame(-42, PASSING, 38)], { commandS: null }).units[0]).toMatchObject({
      followed: null,
      basis: 'nothing',
    });
  });
  it('never gives an interval that ends before it begins, and never both followed and passing', () => {
    const report = fc.record({
      s: fc.integer({ min: -100, max: 500 }),
      up: fc.boolean(),
      claim: fc.constantFrom(PASSING, SHUTDOWN),
    });
    fc.assert(
      fc.property(
        fc.array(report, { maxLength: 12 }),
        fc.integer({ min: 30, max: 400 }),
        (reports, release) => {
          const frames = reports.sort((a, b) => a.s - b.s).map((r) => frame(r.s, r.claim, r.up ? 38 : 0.6));
          const u = run(frames, { releaseS: C + release }).units[0]!;
          if (u.followed) {
            expect(u.followed[0]).toBeLessThanOrEqual(u.followed[1]);
            expect(u.followed[1]).toBeLessThan(release);
            expect(u.passedAtS).toBeNull();
          }
          if (u.returned) expect(u.returned[0]).toBeLessThanOrEqual(u.returned[1]);
        },
      ),
    );
  });
});

describe('a string by its input', () => {
  const inputs = [
    { atS: C - 10, voltageV: 480 },
    { atS: C + 10, voltageV: 300 },
    { atS: C + 40, voltageV: 60 },
    { atS: C + 90, voltageV: 20 },
    { atS: C + 200, voltageV: 470 },
  ];
  it('is looked at before the command, past the limit, and after the release', () => {
    expect(run([], { releaseS: C + 100 }, { inputs })).toMatchObject({
      inputBeforeV: 480,
      input: { afterS: 90, voltageV: 20 },
      inputAgain: { afterS: 100, voltageV: 470 },
    });
  });
  it('keeps the newest current while the command is in force', () => {
    const flowing = inputs.map((i, n) => ({ ...i, currentA: [11, 10.9, 10.8, 10.7, 11][n]! }));
    const current = (releaseS: number | null, list: typeof flowing | typeof inputs = flowing) =>
      run([], { releaseS }, { inputs: list }).current;
    expect(current(C + 100)).toEqual({ afterS: 90, currentA: 10.7 });
    expect(current(C + 5)).toBeUndefined();
    expect(current(C + 100, inputs)).toBeUndefined();
  });
  it('gives sums only where every unit reported', () => {
    const seen = run([
      frame(-10, PASSING, 38),
      frame(20, SHUTDOWN, 0.6),
      { atS: C + 30, state: [null, null], voltageOut: [null, null] },
    ]);
    expect(seen.sums).toEqual([
      [-10, 38],
      [20, 0.6],
    ]);
  });
});
