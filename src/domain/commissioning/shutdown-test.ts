import { shutdownTestSaid, stringTestSaid, testCautions } from '../../words/domain-shutdown-test';
import { homeRunLimit, OUTSIDE_ARRAY_LIMIT_V } from '../verdicts/conductor-limits';
import type { RuleSet } from '../verdicts/context';
import { WORST, type TestResult } from './test-results';

/**
 * What a shutdown test has shown. Only a rated instrument at the home run's inverter end can witness a pass: inverters
 * can't read a few volts, their capacitors hold the home run up, and the logger may drop with the initiator.
 * Seconds from the command; volts.
 */

export interface InstrumentReading {
  afterS: number;
  positiveToNegativeV: number | null;
  positiveToEarthV: number | null;
  negativeToEarthV: number | null;
  /** Rated for the string's voltage and measurement category, and proved before and after. */
  rated: boolean;
  atInverterEnd: boolean;
}

export interface TestedString {
  name: string;
  homeRunLeavesArray: boolean;
  /** Voltage + to − before the command; null: not measured. */
  beforeV: number | null;
  readings: readonly InstrumentReading[];
  units: number;
  /** Per unit that reported: seconds from command to shutdown, at least and at most. */
  followed: readonly [number, number][];
  /** Units seen passing past the limit, by claim or by their own conductors. */
  notShuttingDown: number;
  /** A string-level contradiction: its conductors stay up while its units claim shutdown. */
  conductorsStayUp: boolean;
  /**
   * Voltage of an input that it has alone, so long after the command that the inverter's capacitors explain it no
   * more; null or absent: nothing such stood there.
   */
  conductorsLive?: { voltageV: number; afterS: number } | null;
  /** The inverter's own measurement of such an input fell; for units that tell nothing. */
  inputFell?: { fromV: number; toV: number; afterS: number } | null;
}

export interface ShutdownTestInput {
  ruleSet: RuleSet;
  timeLimitS: number;
  light: 'bright' | 'dull' | 'snow' | 'night';
  strings: readonly TestedString[];
  /** Transmitters that any tested string hears: with several, each must be taken off alone once. */
  transmitters: readonly { name: string; takenOffAlone: boolean }[];
}

export interface StringTestResult {
  name: string;
  result: TestResult;
  words: string;
  /** Highest voltage read within the limit at the inverter end, any pair of conductors or to earth. */
  highestV: number | null;
  /** Units' time to shutdown as an interval: the slowest. Null: nothing reported. */
  slowest: [number, number] | null;
}
export interface ShutdownTestFinding {
  result: TestResult;
  headline: string;
  strings: StringTestResult[];
  limits: { afterS: number; voltage: number; source: string };
  /** What a fuller test would still need. */
  missing: string[];
  cautions: string[];
}

/**
 * Result of each string and of the whole: the worst of its strings. `passed` needs a measured voltage before the
 * command, light that powers the units, and all three readings of a rated instrument at the inverter end within the
 * rule set's time and at most 30 V (NEC 690.12(B)(1)). Telemetry alone is `consistent` at best.
 */
export function judgeShutdownTest(input: ShutdownTestInput): ShutdownTestFinding {
  const strings = input.strings.map((s) => judgeString(s, input));
  let result = strings.reduce<TestResult>(
    (worst, s) => (WORST.indexOf(s.result) < WORST.indexOf(worst) ? s.result : worst),
    strings.length === 0 ? 'not_witnessed' : 'passed',
  );
  const missing: string[] = [];
  const together = input.transmitters.length > 1 ? input.transmitters.filter((t) => !t.takenOffAlone) : [];
  if (together.length > 0) {
    missing.push(shutdownTestSaid.takeOffAlone(together.map((t) => t.name)));
    if (result === 'passed') result = 'consistent';
  }
  if (strings.some((s) => s.result === 'consistent' || s.result === 'not_witnessed'))
    missing.push(shutdownTestSaid.readAtInverterEnds(input.timeLimitS));
  if (input.light === 'night' || input.light === 'snow') missing.push(shutdownTestSaid.testInLight);
  const failed = strings.filter((s) => s.result === 'failed');
  return {
    result,
    headline: testHeadline(result, failed, strings.length),
    strings,
    limits: { afterS: input.timeLimitS, voltage: OUTSIDE_ARRAY_LIMIT_V, source: limitSource(input.ruleSet) },
    missing,
    cautions: [...testCautions],
  };
}

/** Where a rule set's limits come from. */
export const limitSource = (ruleSet: RuleSet): string =>
  ruleSet === 'rapid_shutdown_10s' || ruleSet === 'rapid_shutdown_30s'
    ? shutdownTestSaid.limitSources[ruleSet]
    : shutdownTestSaid.limitSources.yardstick;

/** The finding of a whole test in one line. */
export function testHeadline(result: TestResult, failed: readonly { name: string }[], all: number): string {
  const said = shutdownTestSaid.headlines;
  if (result === 'failed')
    return said.failed(
      failed.map((s) => s.name),
      all,
    );
  if (result === 'passed') return said.passed(all);
  return result === 'consistent' ? said.consistent : said.notWitnessed;
}

/** Result of one string in one round of a test: see `judgeShutdownTest`. */
export function judgeString(
  s: TestedString,
  input: Pick<ShutdownTestInput, 'timeLimitS' | 'light'>,
): StringTestResult {
  const { timeLimitS, light } = input;
  const limitV = homeRunLimit(s.homeRunLeavesArray);
  const slowest = s.followed.reduce<[number, number] | null>(
    (worst, f) => (worst === null || f[1] > worst[1] ? [f[0], f[1]] : worst),
    null,
  );
  const volts = (r: InstrumentReading): number[] =>
    [r.positiveToNegativeV, r.positiveToEarthV, r.negativeToEarthV].flatMap((v) =>
      v === null ? [] : [Math.abs(v)],
    );
  const usable = s.readings.filter((r) => r.rated && r.atInverterEnd).toSorted((a, b) => a.afterS - b.afterS);
  const inTime = usable.filter((r) => r.afterS <= timeLimitS);
  const highestV = inTime.length === 0 ? null : Math.max(0, ...inTime.slice(-1).flatMap(volts));
  const made = (result: TestResult, words: string): StringTestResult => ({
    name: s.name,
    result,
    words,
    highestV,
    slowest,
  });
  const tooHigh = usable.filter((r) => r.afterS >= timeLimitS).find((r) => volts(r).some((v) => v > limitV));
  if (tooHigh !== undefined)
    return made(
      'failed',
      stringTestSaid.tooHigh(
        Math.max(...volts(tooHigh)).toFixed(0),
        tooHigh.afterS.toFixed(0),
        limitV,
        timeLimitS,
      ),
    );
  if (s.notShuttingDown > 0)
    return made('failed', stringTestSaid.passedOn(s.notShuttingDown, s.units, timeLimitS));
  if (s.conductorsLive)
    return made(
      'failed',
      stringTestSaid.inputLive(s.conductorsLive.voltageV.toFixed(0), s.conductorsLive.afterS.toFixed(0)),
    );
  if (slowest !== null && slowest[0] >= timeLimitS)
    return made('failed', stringTestSaid.unitLate(Math.floor(slowest[0]), timeLimitS));
  const lit = light === 'bright' || light === 'dull';
  const complete = inTime.filter((r) => volts(r).length === 3);
  const low = complete.at(-1);
  const stayedLow =
    low !== undefined && usable.every((r) => r.afterS < low.afterS || volts(r).every((v) => v <= limitV));
  if (low !== undefined && stayedLow && lit && s.beforeV !== null && Math.abs(s.beforeV) > limitV)
    return made(
      'passed',
      stringTestSaid.passed(
        Math.abs(s.beforeV).toFixed(0),
        Math.max(...volts(low)).toFixed(1),
        low.afterS.toFixed(0),
      ),
    );
  if (s.conductorsStayUp) return made('not_witnessed', stringTestSaid.conductorsStayUp);
  if (!lit) return made('not_witnessed', stringTestSaid.tooDark);
  if (s.followed.length === s.units && s.units > 0 && slowest !== null)
    return made(
      'consistent',
      slowest[1] <= timeLimitS
        ? stringTestSaid.allInTime(s.units, Math.ceil(slowest[1]))
        : stringTestSaid.allButWhen(s.units, Math.floor(slowest[0]), Math.ceil(slowest[1]), timeLimitS),
    );
  if (s.inputFell && s.followed.length === 0)
    return made(
      'consistent',
      stringTestSaid.inverterFell(
        s.inputFell.fromV.toFixed(0),
        s.inputFell.toV.toFixed(0),
        Math.ceil(s.inputFell.afterS),
      ),
    );
  return made(
    'not_witnessed',
    s.followed.length === 0
      ? stringTestSaid.nothingReported
      : stringTestSaid.someReported(s.followed.length, s.units),
  );
}
