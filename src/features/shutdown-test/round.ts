import { FLOWS_A } from '../../domain/commissioning/shutdown-test-record';
import { CAPACITOR_HOLD_S, timeLimitSOf } from '../../domain/verdicts/time-limits';
import { homeRunLimit } from '../../domain/verdicts/conductor-limits';
import type {
  EvidenceTrace,
  RoundEvidence,
  StringConduct,
  TestedPart,
  TestFacts,
  TestReading,
  TestRound,
  Voltages,
} from '../../domain/commissioning/shutdown-test-record';
import type { TestVerdict } from '../../domain/commissioning/shutdown-test-verdict';
import type { TestLine } from '../../drawings/TestLines';
import { shutdownTestRound } from '../../words/shutdown-test';

/** One round of a test in figures, for the page that watches it and for the paper. Seconds, V. */

const POINT_ORDER = { home_run: 0, unit_sum: 1, input: 2 } as const;
/** Traces that begin so near belong to the command. */
const SAME_ACT_S = 20;

const secondsOf = (iso: string): number => Date.parse(iso) / 1000;

/** When the command of a round came, epoch seconds, by the logger where it said so, else by the tap. */
export const commandedAtS = (round: TestRound, seen: RoundEvidence | undefined): number | null =>
  seen?.command ? secondsOf(seen.command.since) : round.operated ? secondsOf(round.operated.at) : null;

/** Seconds from the command to the release, the earlier of report and tap. */
export function releasedAfterS(round: TestRound, seen: RoundEvidence | undefined): number | null {
  const from = commandedAtS(round, seen);
  const times = [seen?.release?.since, round.released?.at].flatMap((t) => (t ? [secondsOf(t)] : []));
  return from === null || times.length === 0 ? null : Math.min(...times) - from;
}

/** What the logger has reported so long ago a person no longer notes: a later tap would tell a wrong time. */
const TAP_S = 15;

/** Which times a person may still note by a tap. */
export function tapsOpen(
  round: TestRound,
  seen: RoundEvidence | undefined,
  nowS: number,
): { operated: boolean; released: boolean } {
  const fresh = (since: string | undefined): boolean =>
    since === undefined || nowS - secondsOf(since) <= TAP_S;
  const begun = round.operated !== null || Boolean(seen?.command);
  return {
    operated:
      round.operated === null && round.released === null && !seen?.release && fresh(seen?.command?.since),
    released: begun && round.released === null && fresh(seen?.release?.since),
  };
}

/** The trace that says most of a string: at the home run, else its units' sum, else the input. */
export function bestTrace(conduct: StringConduct, fromS: number): EvidenceTrace | undefined {
  return conduct.traces
    .filter(
      (t) => Math.abs(secondsOf(t.startedAt) - fromS) <= SAME_ACT_S && t.voltage.some((v) => v !== null),
    )
    .sort((a, b) => POINT_ORDER[a.measuringPoint] - POINT_ORDER[b.measuringPoint])[0];
}

export interface StringNow {
  part: TestedPart;
  conduct: StringConduct | undefined;
  points: [number, number | null][];
  /** Where the points come from, in words. */
  source: string;
  /** Its input stands over the limit, and its capacitors may be all that holds it up. */
  capacitors: boolean;
  newest: { afterS: number; volts: number } | null;
  /** Seconds from which it stayed at or under its limit before the release; null: not so. */
  underFromS: number | null;
  limitV: number;
  readings: TestReading[];
}

/** Seconds, then reports of the units beyond them, else the input. */
function pointsOf(conduct: StringConduct, fromS: number): Pick<StringNow, 'points' | 'source'> {
  const trace = bestTrace(conduct, fromS);
  const start = trace ? secondsOf(trace.startedAt) - fromS : 0;
  const traced = trace?.voltage.map((v, s): [number, number | null] => [start + s, v]) ?? [];
  const rest = trace?.measuringPoint === 'input' ? conduct.inputs : conduct.sums;
  const untilS = traced.at(-1)?.[0] ?? -Infinity;
  if (trace)
    return {
      points: [...rest.filter(([s]) => s < start), ...traced, ...rest.filter(([s]) => s > untilS)],
      source:
        trace.measuringPoint === 'input'
          ? shutdownTestRound.invertersInput
          : trace.measuringPoint === 'home_run'
            ? shutdownTestRound.atTheHomeRun
            : shutdownTestRound.sumOfWhatIts,
    };
  if (conduct.sums.length > 0) return { points: conduct.sums, source: shutdownTestRound.sumOfWhatIts };
  if (conduct.inputs.length > 0) return { points: conduct.inputs, source: shutdownTestRound.invertersInput };
  return { points: [], source: shutdownTestRound.nothingReported };
}

/** What an input's newest voltage while the command is in force comes from. */
function inputSays(
  facts: TestFacts,
  part: TestedPart,
  conduct: StringConduct | undefined,
  [afterS, voltageV]: [number, number],
  limitV: number,
): { words: string; capacitors: boolean } {
  if (voltageV <= limitV) return { words: shutdownTestRound.invertersInput, capacitors: false };
  const current = conduct?.current;
  // one from much earlier says nothing of this voltage
  if (current && current.currentA > FLOWS_A && afterS - current.afterS <= facts.reportIntervalS)
    return {
      words: shutdownTestRound.invertersInputFlows(current.currentA, part.input.strings),
      capacitors: false,
    };
  return afterS < timeLimitSOf(facts.ruleSet) + CAPACITOR_HOLD_S
    ? { words: shutdownTestRound.invertersInputHeldUp, capacitors: true }
    : { words: shutdownTestRound.invertersInputTooLong, capacitors: false };
}

/** What is known of each string of a round, in the order of the as-built. */
export function stringsOfRound(
  facts: TestFacts,
  strings: readonly string[],
  round: TestRound,
  seen: RoundEvidence | undefined,
): StringNow[] {
  const fromS = commandedAtS(round, seen);
  const releaseS = releasedAfterS(round, seen);
  return facts.strings
    .filter((part) => strings.includes(part.id))
    .map((part) => {
      const conduct = seen?.strings.find((s) => s.string === part.id);
      const { points, source } =
        conduct && fromS !== null
          ? pointsOf(conduct, fromS)
          : { points: [], source: shutdownTestRound.nothingReported };
      const limitV = homeRunLimit(part.homeRunLeavesArray);
      const known = points.filter((p): p is [number, number] => p[1] !== null && p[0] >= 0);
      let underFromS: number | null = null;
      for (const [s, v] of known) {
        if (releaseS !== null && s >= releaseS) break;
        if (v > limitV) underFromS = null;
        else underFromS ??= s;
      }
      const last = known.at(-1);
      const input = source === shutdownTestRound.invertersInput;
      const standing = known.findLast(([s]) => releaseS === null || s < releaseS);
      const byInput =
        input && standing && last === standing
          ? inputSays(facts, part, conduct, standing, limitV)
          : { words: source, capacitors: false };
      return {
        part,
        conduct,
        points,
        source: byInput.words,
        capacitors: byInput.capacitors,
        newest: last ? { afterS: last[0], volts: last[1] } : null,
        underFromS,
        limitV,
        readings: round.readings.filter((r) => r.string === part.id),
      };
    });
}

export interface LiveNow {
  name: string;
  limitV: number;
  /** Its newest voltage stands over its limit, wherever it was measured. */
  above: boolean;
  /** A unit was seen to pass past the limit, or an instrument read too much. */
  failed: boolean;
}

/** Strings of a round that are not down past the time limit, and those of which nothing was reported since. */
export function liveStrings(
  strings: readonly StringNow[],
  verdict: TestVerdict,
  round: number,
  releaseS: number | null,
): { live: LiveNow[]; unknown: string[] } {
  const { afterS } = verdict.limits;
  const past = strings.map((s) => {
    // what comes back after the release is no failure
    const newest = s.points.findLast(
      (p): p is [number, number] => p[1] !== null && p[0] >= afterS && (releaseS === null || p[0] < releaseS),
    );
    const known = newest !== undefined;
    const judged = verdict.strings.find((v) => v.string === s.part.id)?.rounds.find((r) => r.round === round);
    return {
      name: s.part.name,
      limitV: s.limitV,
      known: known || s.readings.some((r) => r.struck === null && (r.afterS ?? 0) >= afterS),
      above: known && newest[1] > s.limitV,
      failed:
        judged?.result === 'failed' ||
        (s.conduct?.units.some((u) => u.passedAtS !== null && u.passedAtS >= afterS) ?? false),
    };
  });
  return {
    live: past.flatMap(({ known: _, ...s }) => (s.above || s.failed ? [s] : [])),
    unknown: past.flatMap((s) => (s.known || s.above || s.failed ? [] : [s.name])),
  };
}

/** The strings of a round as lines; one above its limit past the time limit may be live. */
export function linesOf(
  strings: readonly StringNow[],
  timeLimitS: number,
  releaseS: number | null,
): TestLine[] {
  return strings.map((s) => {
    const beforeRelease = s.points.filter(
      (p): p is [number, number] => p[1] !== null && p[0] >= 0 && (releaseS === null || p[0] < releaseS),
    );
    const last = beforeRelease.at(-1);
    return {
      name: s.part.name,
      points: s.points,
      tone:
        last && last[0] >= timeLimitS && last[1] > s.limitV && !s.capacitors
          ? 'live'
          : last && last[1] <= s.limitV
            ? 'fallen'
            : 'open',
    };
  });
}

export const highestOf = (v: Voltages): number | null => {
  const known = [v.positiveToNegativeV, v.positiveToEarthV, v.negativeToEarthV].flatMap((x) =>
    x === null ? [] : [Math.abs(x)],
  );
  return known.length === 0 ? null : Math.max(...known);
};

export const readingPoints = (strings: readonly StringNow[]) =>
  strings.flatMap((s) =>
    s.readings.flatMap((r) => {
      const volts = highestOf(r.voltages);
      return r.moment === 'after' && r.struck === null && r.afterS !== null && volts !== null
        ? [{ name: s.part.name, afterS: r.afterS, volts }]
        : [];
    }),
  );

/** How many units have come back after the release, of those that had gone. */
export function returnOf(seen: RoundEvidence | undefined): { back: number; held: number; gone: number } {
  const units = seen?.strings.flatMap((s) => s.units) ?? [];
  return {
    back: units.filter((u) => u.followed !== null && u.returned !== null).length,
    held: units.filter((u) => u.heldAtS !== null).length,
    gone: units.filter((u) => u.followed !== null).length,
  };
}

/** What is shut down in a round, in words: the zone by its initiator, or one transmitter. */
/** The transmitter of a round, by its name. */
const transmitterName = (facts: TestFacts, transmitter: string): string =>
  shutdownTestRound.transmitter(facts.transmitters.find((t) => t.id === transmitter)?.name);
/** What a person operates in a round: the initiator, or the one transmitter. */
export const operatedName = (facts: TestFacts, transmitter: string | null): string =>
  transmitter === null ? facts.initiator.name : transmitterName(facts, transmitter);
export function roundName(facts: TestFacts, transmitter: string | null): string {
  if (transmitter === null) return shutdownTestRound.wholeZone(facts.initiator.name);
  return shutdownTestRound.offAlone(transmitterName(facts, transmitter));
}
/** Strings that a round is to shut down: all by the initiator, else those that hear this transmitter alone. */
export const stringsConcerned = (
  facts: TestFacts,
  chosen: readonly string[],
  transmitter: string | null,
): string[] =>
  facts.strings
    .filter((s) => chosen.includes(s.id))
    .filter((s) => transmitter === null || (s.transmitters.length === 1 && s.transmitters[0] === transmitter))
    .map((s) => s.id);

/** The rounds that a plan needs: the initiator, then each transmitter that the strings hear, where they are several. */
export function roundsNeeded(facts: TestFacts, chosen: readonly string[]): (string | null)[] {
  const heard = new Set(facts.strings.filter((s) => chosen.includes(s.id)).flatMap((s) => s.transmitters));
  const list = facts.transmitters.filter((t) => heard.has(t.id)).map((t) => t.id);
  return facts.transmitters.length > 1 && list.length > 0 ? [null, ...list] : [null];
}
