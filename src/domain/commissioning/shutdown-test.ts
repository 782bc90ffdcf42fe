import { OUTSIDE_ARRAY_LIMIT_V } from '../verdicts/conductors';
import type { RuleSet } from '../verdicts/context';

/** NEC 690.12(B)(2), 2017 and later editions: inside the array boundary, between two conductors or to earth. */
export const INSIDE_ARRAY_LIMIT_V = 80;

/**
 * V that a home run may carry after the rule set's time, any two conductors or conductor to earth. Inside the array
 * the 2014 edition sets no limit; 80 V are a yardstick there too.
 */
export const homeRunLimit = (homeRunLeavesArray: boolean): number =>
  homeRunLeavesArray ? OUTSIDE_ARRAY_LIMIT_V : INSIDE_ARRAY_LIMIT_V;

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

export type TestResult = 'passed' | 'failed' | 'consistent' | 'not_witnessed';
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

export const TEST_CAUTIONS = [
  'Shutdown is not isolation: each module and its leads to its unit stay at module voltage.',
  'A result speaks of the day of the test. Local code and the authority having jurisdiction come first.',
] as const;

/** The gravest first: the whole of a test is as good as its worst string. */
export const WORST: readonly TestResult[] = ['failed', 'not_witnessed', 'consistent', 'passed'];

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
    missing.push(
      `Take each transmitter off alone once: ${together.map((t) => t.name).join(', ')} ${together.length === 1 ? 'was' : 'were'} not. A string that hears a neighbour's transmitter shows itself only so.`,
    );
    if (result === 'passed') result = 'consistent';
  }
  if (strings.some((s) => s.result === 'consistent' || s.result === 'not_witnessed'))
    missing.push(
      `Read + to −, + to earth and − to earth with a rated instrument at the inverter end of each home run, within ${input.timeLimitS} s.`,
    );
  if (input.light === 'night' || input.light === 'snow')
    missing.push('Test again in light that powers the units: without it a dead string proves nothing.');
  const failed = strings.filter((s) => s.result === 'failed');
  return {
    result,
    headline: testHeadline(result, failed, strings.length),
    strings,
    limits: { afterS: input.timeLimitS, voltage: OUTSIDE_ARRAY_LIMIT_V, source: limitSource(input.ruleSet) },
    missing,
    cautions: [...TEST_CAUTIONS],
  };
}

/** Where a rule set's limits come from. */
export const limitSource = (ruleSet: RuleSet): string =>
  ruleSet === 'rapid_shutdown_10s'
    ? 'NEC 690.12, 2014 edition: 30 V within 10 s'
    : ruleSet === 'rapid_shutdown_30s'
      ? 'NEC 690.12(B)(1), 2017 and later editions: 30 V within 30 s'
      : 'no time limit applies to this site; 30 V within 30 s taken as a yardstick';

/** The finding of a whole test in one line. */
export function testHeadline(result: TestResult, failed: readonly { name: string }[], all: number): string {
  if (result === 'failed') {
    const names = failed.map((s) => s.name);
    return `${names.length} of ${all} strings did not shut down as required: ${names.slice(0, 4).join(', ')}${names.length > 4 ? ` and ${names.length - 4} more` : ''}`;
  }
  if (result === 'passed') return `All ${all} strings were measured below the limit in time`;
  if (result === 'consistent')
    return 'What was reported is consistent with a shutdown; a rated instrument has not shown it for every string';
  return 'The shutdown was not witnessed';
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
      `${Math.max(...volts(tooHigh)).toFixed(0)} V stood on the home run ${tooHigh.afterS.toFixed(0)} s after the command; at most ${limitV} V are allowed after ${timeLimitS} s.`,
    );
  if (s.notShuttingDown > 0)
    return made('failed', `${s.notShuttingDown} of ${s.units} units passed on past ${timeLimitS} s.`);
  if (s.conductorsLive)
    return made(
      'failed',
      `${s.conductorsLive.voltageV.toFixed(0)} V stood at its input ${s.conductorsLive.afterS.toFixed(0)} s after the command, longer than capacitors hold it up.`,
    );
  if (slowest !== null && slowest[0] >= timeLimitS)
    return made('failed', `A unit took at least ${Math.floor(slowest[0])} s; ${timeLimitS} s are allowed.`);
  const lit = light === 'bright' || light === 'dull';
  const complete = inTime.filter((r) => volts(r).length === 3);
  const low = complete.at(-1);
  const stayedLow =
    low !== undefined && usable.every((r) => r.afterS < low.afterS || volts(r).every((v) => v <= limitV));
  if (low !== undefined && stayedLow && lit && s.beforeV !== null && Math.abs(s.beforeV) > limitV)
    return made(
      'passed',
      `From ${Math.abs(s.beforeV).toFixed(0)} V to ${Math.max(...volts(low)).toFixed(1)} V at most, ${low.afterS.toFixed(0)} s after the command, by a rated instrument.`,
    );
  if (s.conductorsStayUp)
    return made(
      'not_witnessed',
      "Its units claim shutdown, but the input's voltage stays up: measure at the home run.",
    );
  if (!lit)
    return made('not_witnessed', 'Too little light to power the units: a dead string proves nothing.');
  if (s.followed.length === s.units && s.units > 0 && slowest !== null)
    return made(
      'consistent',
      slowest[1] <= timeLimitS
        ? `All ${s.units} units reported shutdown within ${Math.ceil(slowest[1])} s.`
        : `All ${s.units} units reported shutdown; the slowest took between ${Math.floor(slowest[0])} and ${Math.ceil(slowest[1])} s, so the limit of ${timeLimitS} s can not be judged from reports.`,
    );
  if (s.inputFell && s.followed.length === 0)
    return made(
      'consistent',
      `The inverter's own measurement fell from ${s.inputFell.fromV.toFixed(0)} V to ${s.inputFell.toV.toFixed(0)} V within ${Math.ceil(s.inputFell.afterS)} s; it can not read a few volts.`,
    );
  return made(
    'not_witnessed',
    s.followed.length === 0
      ? 'Nothing reported whether its units followed.'
      : `${s.followed.length} of ${s.units} units reported shutdown; of the others nothing is known.`,
  );
}
