import { describe, expect, it } from 'vitest';
import {
  judgeShutdownTest,
  type InstrumentReading,
  type ShutdownTestInput,
  type TestedString,
} from './shutdown-test';

const reading = (
  afterS: number,
  volts: number,
  more: Partial<InstrumentReading> = {},
): InstrumentReading => ({
  afterS,
  positiveToNegativeV: volts,
  positiveToEarthV: volts / 2,
  negativeToEarthV: -volts / 2,
  rated: true,
  atInverterEnd: true,
  ...more,
});
const tested = (more: Partial<TestedString> = {}): TestedString => ({
  name: 'A1',
  homeRunLeavesArray: true,
  beforeV: 540,
  readings: [],
  units: 3,
  followed: [
    [0, 12],
    [0, 14],
    [0, 11],
  ],
  notShuttingDown: 0,
  conductorsStayUp: false,
  ...more,
});
const test = (strings: TestedString[], more: Partial<ShutdownTestInput> = {}) =>
  judgeShutdownTest({
    ruleSet: 'rapid_shutdown_30s',
    timeLimitS: 30,
    light: 'bright',
    strings,
    transmitters: [{ name: 'T1', takenOffAlone: false }],
    ...more,
  });

describe('a shutdown test', () => {
  it('passes with a rated instrument at the inverter end in time, all three readings', () => {
    const finding = test([tested({ readings: [reading(22, 8.4)] })]);
    expect(finding).toMatchObject({ result: 'passed', limits: { voltage: 30, afterS: 30 } });
    expect(finding.strings[0]).toMatchObject({ highestV: 8.4, slowest: [0, 14] });
  });
  it.each<[string, Partial<TestedString>]>([
    ['telemetry alone', {}],
    ['an instrument that is not rated', { readings: [reading(22, 8.4, { rated: false })] }],
    ['a reading at the wrong end', { readings: [reading(22, 8.4, { atInverterEnd: false })] }],
    ['no reading to earth', { readings: [reading(22, 8.4, { negativeToEarthV: null })] }],
    ['nothing measured before', { readings: [reading(22, 8.4)], beforeV: null }],
    ['a reading past the limit', { readings: [reading(45, 8.4)] }],
  ])('is consistent at best with %s', (_, more) => {
    const finding = test([tested(more)]);
    expect(finding.result).toBe('consistent');
    expect(finding.missing.join(' ')).toContain('rated instrument');
  });
  it('gives times from reports as intervals and does not judge the limit from them', () => {
    const { strings } = test([
      tested({
        followed: [
          [18, 78],
          [0, 60],
          [0, 60],
        ],
      }),
    ]);
    expect(strings[0]).toMatchObject({ result: 'consistent', slowest: [18, 78] });
    expect(strings[0]!.words).toContain('between 18 and 78 s');
  });
  it('fails on what stands on the home run past the limit, on a unit that passes on, on a unit too slow', () => {
    expect(test([tested({ readings: [reading(31, 42)] })]).result).toBe('failed');
    expect(test([tested(), tested({ name: 'A2', notShuttingDown: 1, followed: [] })])).toMatchObject({
      result: 'failed',
      headline: '1 of 2 strings did not shut down as required: A2',
    });
    expect(test([tested({ followed: [[40, 70]] })]).result).toBe('failed');
    expect(
      test([tested({ readings: [reading(12, 42)] })], { timeLimitS: 10, ruleSet: 'rapid_shutdown_10s' })
        .result,
    ).toBe('failed');
  });
  it('is not witnessed by night, by silence, or against its conductors', () => {
    expect(test([tested({ readings: [reading(20, 0)] })], { light: 'night' }).result).toBe('not_witnessed');
    expect(test([tested({ followed: [[0, 12]] })]).result).toBe('not_witnessed');
    expect(test([tested({ conductorsStayUp: true })]).result).toBe('not_witnessed');
    expect(test([]).result).toBe('not_witnessed');
  });
  it('asks for each of several transmitters to be taken off alone', () => {
    const two = [
      { name: 'T1', takenOffAlone: true },
      { name: 'T2', takenOffAlone: false },
    ];
    const finding = test([tested({ readings: [reading(22, 8.4)] })], { transmitters: two });
    expect(finding.result).toBe('consistent');
    expect(finding.missing[0]).toContain('T2 was not');
  });
});
