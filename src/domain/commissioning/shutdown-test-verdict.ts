import { testCautions } from '../../words/domain-shutdown-test';
import { verdictSaid } from '../../words/domain-shutdown-test-record';
import { judgementTimes, timeLimitOf } from '../verdicts/context';
import { instrumentFaults, missing, notesOf } from './shutdown-test-remarks';
import { homeRunLimit } from '../verdicts/conductor-limits';
import { judgeString, limitSource, testHeadline, type StringTestResult } from './shutdown-test';
import { WORST, type TestResult } from './test-results';
import { FLOWS_A } from './shutdown-test-record';
import type {
  RoundEvidence,
  StringConduct,
  TestedPart,
  TestFacts,
  TestReading,
  TestRecord,
  UnitConduct,
} from './shutdown-test-record';

/** The verdict of a whole test: per string, per unit, and what to do about it. Seconds and volts. */

export interface UnitVerdict {
  position: number;
  serial: string | null;
  verdict: 'followed' | 'late' | 'not_shutting_down' | 'was_down' | 'unknown';
  /** Seconds from the command, at least and at most; null: not seen to have followed. */
  followed: [number, number] | null;
  basis: UnitConduct['basis'];
  /** It did not come back after the release. */
  stuck: boolean;
}
export interface StringVerdict {
  string: string;
  name: string;
  result: TestResult;
  words: string;
  /** V that its home run may carry, and where it runs. */
  limitV: number;
  /** Highest voltage of the deciding reading; null: none in time. */
  highestV: number | null;
  rounds: { round: number; result: TestResult; words: string }[];
  units: UnitVerdict[];
  /** Why it must be treated as live whatever was commanded; null: nothing speaks for it. */
  live: string | null;
  /** Not tested again: the result is another test's. */
  carriedFrom: { test: string; at: string } | null;
}
export interface TestVerdict {
  result: TestResult;
  headline: string;
  limits: { afterS: number; outsideV: number; insideV: number; source: string };
  strings: StringVerdict[];
  missing: string[];
  cautions: string[];
  /** What must be treated as live whatever the initiator says, and why. */
  treatAsLive: { string: string; name: string; why: string }[];
  stuck: { string: string; name: string; positions: number[]; words: string }[];
  notes: string[];
}
/** A result of an earlier test that this one repeats in part. */
export interface CarriedResult {
  string: string;
  name: string;
  result: TestResult;
  words: string;
  test: string;
  at: string;
}

/** Verdict of the test as it stands: `evidence` in the order of the record's rounds. */
export function judgeTest(
  facts: TestFacts,
  record: TestRecord,
  evidence: readonly RoundEvidence[],
  carried: readonly CarriedResult[] = [],
): TestVerdict {
  const { timeLimitS } = timeLimitOf(facts.ruleSet);
  const light = record.plan?.light ?? 'bright';
  const readings = record.rounds.flatMap((r) => r.readings.filter((x) => x.struck === null));
  const volts = readings
    .flatMap((r) => Object.values(r.voltages))
    .flatMap((v: number | null) => (v === null ? [] : [Math.abs(v)]));
  const faults = instrumentFaults(record.plan?.instrument ?? null, record.provedAfter, Math.max(0, ...volts));
  const tested = facts.strings.filter((s) => record.plan?.strings.includes(s.id));
  const several = alone(facts, tested);
  const heldAlone = new Set<string>();
  const verdicts = tested.map((part): StringVerdict => {
    const rounds = record.rounds.flatMap((round, index) => {
      const conduct = evidence[index]?.strings.find((s) => s.string === part.id);
      if (!conduct || round.watchStarted === null || !concerns(round.transmitter, part)) return [];
      const figures = conductFigures(part, conduct, timeLimitS, facts.reportIntervalS);
      const judged = judgeString(
        {
          name: part.name,
          homeRunLeavesArray: part.homeRunLeavesArray,
          beforeV: before(readings, part.id),
          readings: round.readings
            .filter((r) => r.struck === null && r.string === part.id && r.moment === 'after')
            .map((r) => ({
              afterS: r.afterS ?? Infinity,
              ...r.voltages,
              rated: faults.length === 0,
              atInverterEnd: r.atInverterEnd,
            })),
          ...figures,
        },
        { timeLimitS, light },
      );
      return [{ round: index, transmitter: round.transmitter, up: figures.conductorsStayUp, ...judged }];
    });
    const whole = combined(rounds, part, several);
    const units = unitVerdicts(part, record, evidence, timeLimitS, facts.reportIntervalS);
    const up = rounds.some((r) => r.up);
    return {
      string: part.id,
      name: part.name,
      ...whole,
      limitV: homeRunLimit(part.homeRunLeavesArray),
      rounds: rounds.map(({ round, result, words }) => ({ round, result, words })),
      units,
      live: whyLive(whole.result, whole.words, units, up),
      carriedFrom: null,
    };
  });
  for (const t of several) if (takenOffAlone(t, facts, tested, record, verdicts)) heldAlone.add(t);
  const notAlone = facts.transmitters.filter((t) => several.includes(t.id) && !heldAlone.has(t.id));
  const strings = [
    ...verdicts.map((v) => lowered(v, facts, notAlone)),
    ...carried
      .filter((c) => !tested.some((s) => s.id === c.string))
      .map((c): StringVerdict => ({
        string: c.string,
        name: c.name,
        result: c.result,
        words: c.words,
        limitV: homeRunLimit(facts.strings.find((s) => s.id === c.string)?.homeRunLeavesArray ?? true),
        highestV: null,
        rounds: [],
        units: [],
        live: c.result === 'failed' ? c.words : null,
        carriedFrom: { test: c.test, at: c.at },
      })),
  ];
  const result = strings.reduce<TestResult>(
    (worst, s) => (WORST.indexOf(s.result) < WORST.indexOf(worst) ? s.result : worst),
    strings.length === 0 ? 'not_witnessed' : 'passed',
  );
  return {
    result,
    headline: testHeadline(
      result,
      strings.filter((s) => s.result === 'failed'),
      strings.length,
    ),
    limits: {
      afterS: timeLimitS,
      outsideV: homeRunLimit(true),
      insideV: homeRunLimit(false),
      source: limitSource(facts.ruleSet),
    },
    strings,
    missing: missing(strings, notAlone, faults, readings, light, timeLimitS),
    cautions: [...testCautions],
    treatAsLive: strings.flatMap((s) =>
      s.live === null ? [] : [{ string: s.string, name: s.name, why: s.live }],
    ),
    stuck: stuckOf(strings),
    notes: notesOf(tested, record, evidence),
  };
}

/** Transmitters that must each be taken off alone: those that the tested strings hear, where they are several. */
function alone(facts: TestFacts, tested: readonly TestedPart[]): string[] {
  const heard = new Set(tested.flatMap((s) => s.transmitters));
  return facts.transmitters.length > 1 ? facts.transmitters.map((t) => t.id).filter((t) => heard.has(t)) : [];
}

/** The initiator shuts every string down; one transmitter off alone only those that hear no other. */
const concerns = (transmitter: string | null, part: TestedPart): boolean =>
  transmitter === null || (part.transmitters.length === 1 && part.transmitters[0] === transmitter);

const before = (readings: readonly TestReading[], string: string): number | null =>
  readings.findLast(
    (r) =>
      r.string === string &&
      r.moment === 'before' &&
      r.atInverterEnd &&
      r.voltages.positiveToNegativeV !== null,
  )?.voltages.positiveToNegativeV ?? null;

/** What reports say of one string, in the figures of `judgeString`. */
function conductFigures(
  part: TestedPart,
  conduct: StringConduct,
  timeLimitS: number,
  reportIntervalS: number,
) {
  const units = conduct.units.filter((u) => u.serial !== null);
  const { capacitorHoldS } = judgementTimes(reportIntervalS, timeLimitS);
  const passing = units.filter((u) => u.passedAtS !== null && u.passedAtS >= timeLimitS).length;
  const limitV = Math.max(homeRunLimit(part.homeRunLeavesArray), 2 * part.shutdownV.max);
  const { input, inputBeforeV } = conduct;
  // capacitors hold a voltage up, no current: where one flows past the limit, units pass it
  const flows =
    conduct.current !== undefined &&
    conduct.current.afterS >= timeLimitS &&
    conduct.current.currentA > FLOWS_A;
  const pastHold = input !== null && input.afterS >= timeLimitS + (flows ? 0 : capacitorHoldS);
  const up = pastHold && input.voltageV > limitV && passing === 0;
  return {
    units: units.length,
    followed: units.flatMap((u) => (u.followed === null ? [] : [u.followed])),
    notShuttingDown: passing,
    conductorsStayUp: up && part.input.strings > 1,
    conductorsLive:
      up && part.input.strings === 1 ? { voltageV: input.voltageV, afterS: input.afterS } : null,
    inputFell:
      input !== null && input.voltageV <= limitV && inputBeforeV !== null && inputBeforeV > 2 * limitV
        ? { fromV: inputBeforeV, toV: input.voltageV, afterS: input.afterS }
        : null,
  };
}

type RoundResult = StringTestResult & { round: number; transmitter: string | null };

/** A string failed in any round has failed; else the initiator's rounds decide, the best of them. */
function combined(
  rounds: readonly RoundResult[],
  part: TestedPart,
  several: readonly string[],
): Pick<StringVerdict, 'result' | 'words' | 'highestV'> {
  const failed = rounds.find((r) => r.result === 'failed');
  if (failed) {
    const { result, words, highestV } = failed;
    const only = failed.transmitter !== null && several.includes(failed.transmitter);
    return {
      result,
      highestV,
      words: only ? verdictSaid.onlyItsOwnOff(words) : words,
    };
  }
  const whole = rounds
    .filter((r) => r.transmitter === null)
    .reduce<RoundResult | null>(
      (best, r) => (best === null || WORST.indexOf(r.result) > WORST.indexOf(best.result) ? r : best),
      null,
    );
  if (whole === null)
    return {
      result: 'not_witnessed',
      highestV: null,
      words: verdictSaid.notByInitiator(part.name),
    };
  return { result: whole.result, words: whole.words, highestV: whole.highestV };
}

function takenOffAlone(
  transmitter: string,
  facts: TestFacts,
  tested: readonly TestedPart[],
  record: TestRecord,
  verdicts: readonly StringVerdict[],
): boolean {
  const run = record.rounds.flatMap((r, i) =>
    r.transmitter === transmitter && r.watchStarted !== null ? [i] : [],
  );
  if (run.length === 0 || !facts.transmitters.some((t) => t.id === transmitter)) return false;
  const own = tested.filter((s) => concerns(transmitter, s));
  return own.every((s) =>
    verdicts
      .find((v) => v.string === s.id)
      ?.rounds.some((r) => run.includes(r.round) && (r.result === 'passed' || r.result === 'consistent')),
  );
}

/** A pass of the whole array together says nothing of a string that may hear a neighbour's transmitter. */
function lowered(
  v: StringVerdict,
  facts: TestFacts,
  notAlone: readonly { id: string; name: string }[],
): StringVerdict {
  if (v.result !== 'passed') return v;
  const own = facts.strings.find((s) => s.id === v.string)?.transmitters ?? [];
  const open = notAlone.filter((t) => own.includes(t.id));
  if (open.length === 0) return v;
  return {
    ...v,
    result: 'consistent',
    words: verdictSaid.notShownAlone(
      v.words,
      open.map((t) => t.name),
    ),
  };
}

function unitVerdicts(
  part: TestedPart,
  record: TestRecord,
  evidence: readonly RoundEvidence[],
  timeLimitS: number,
  reportIntervalS: number,
): UnitVerdict[] {
  const heldFromS = timeLimitS + judgementTimes(reportIntervalS, timeLimitS).graceS;
  const rounds = record.rounds.flatMap((round, i) => {
    const conduct = evidence[i]?.strings.find((s) => s.string === part.id);
    return conduct && round.watchStarted !== null && concerns(round.transmitter, part) ? [conduct] : [];
  });
  return part.serials.map((serial, i) => {
    const all = rounds.flatMap((c) => c.units[i] ?? []);
    const passing = all.find((u) => u.passedAtS !== null && u.passedAtS >= timeLimitS);
    const slowest = all
      .filter((u) => u.followed !== null)
      .reduce<UnitConduct | null>(
        (worst, u) => (worst === null || u.followed![1] > worst.followed![1] ? u : worst),
        null,
      );
    const verdict: UnitVerdict['verdict'] = passing
      ? 'not_shutting_down'
      : slowest
        ? slowest.followed![0] >= timeLimitS
          ? 'late'
          : 'followed'
        : all.some((u) => u.downBefore)
          ? 'was_down'
          : 'unknown';
    const last = all.at(-1);
    return {
      position: i + 1,
      serial,
      verdict,
      followed: slowest?.followed ?? null,
      basis: (passing ?? slowest ?? last)?.basis ?? 'nothing',
      stuck: last?.heldAtS != null && last.heldAtS >= heldFromS,
    };
  });
}

/** Why a string must be treated as live whatever was commanded; null: nothing speaks for it. */
function whyLive(
  result: TestResult,
  words: string,
  units: readonly UnitVerdict[],
  conductorsUp: boolean,
): string | null {
  const passing = units.filter((u) => u.verdict === 'not_shutting_down');
  if (passing.length > 0) return verdictSaid.keptPassing(passing.map((u) => u.position));
  return result === 'failed' || conductorsUp ? words : null;
}

const stuckOf = (strings: readonly StringVerdict[]): TestVerdict['stuck'] =>
  strings.flatMap((s) => {
    const positions = s.units.filter((u) => u.stuck).map((u) => u.position);
    if (positions.length === 0) return [];
    const words = verdictSaid.didNotComeBack(s.name, positions);
    return [{ string: s.string, name: s.name, positions, words }];
  });
