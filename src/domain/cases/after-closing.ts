import { closedSaid, figuresSaid, wrongSaid } from '../../words/domain-after-closing';
import type { CaseKind, CasePart, CheckOutcome } from './cases';
import type { CaseFigures, FiguresString } from './figures';

/**
 * Whether what a closed case was about has really come right: looked at over the daylight that follows. "Can't tell" is
 * an answer; a case is opened again only on what was measured or claimed after its closing.
 */

const MINUTE_MS = 60_000;
const HOUR_MS = 3_600_000;

/** Limits of the judgement. From experience; none comes from a standard. */
export const AFTER_CLOSING = {
  /** Not looked at before: units take minutes to answer after a repair, and causes minutes to end. */
  graceMs: 30 * MINUTE_MS,
  /** So much daylight must have passed without a relapse. */
  lightMs: 3 * HOUR_MS,
  /** What nights judge (a lead's resistance, a wrong string) needs one of them. */
  nightMs: 36 * HOUR_MS,
  /** Longer isn't waited: then it can't be told. */
  waitMs: 7 * 24 * HOUR_MS,
  /** Reports older than this are no longer now. */
  freshMs: 10 * MINUTE_MS,
  /** A day that makes less than this share of what was expected has not come back. */
  outputRatio: 0.95,
  /** A unit is missing when more than this share of its voltage is. */
  unitShare: 0.6,
} as const;

/** What Wakeline knows at one look. Times epoch ms. */
export interface LookAgain {
  kind: CaseKind;
  closedMs: number;
  nowMs: number;
  /** Figures of now. */
  now: CaseFigures;
  /** Public identifiers of the strings that the case is about. */
  strings: readonly string[];
  parts: readonly CasePart[];
  /** Of the cause that it was opened from; null: there was none. */
  cause: { open: boolean } | null;
  /** Verdicts other than ok that units of these strings got after the closing. */
  relapses: readonly { stringId: string; position: number; verdict: string; atMs: number }[];
  /** Daylight since the closing, ms. */
  lightMs: number;
  /** A shutdown was in force at some time since the closing. */
  shutdownSince: boolean;
  /** Planned work is going on at the site or these strings. */
  plannedWork: boolean;
  /** Days after that of the closing, oldest first; ratio null: the day was left out. */
  days: readonly { stringId: string; day: string; ratio: number | null; z: number | null }[];
}

export interface LookedAgain {
  outcome: CheckOutcome | 'wait';
  headline: string;
  lines: string[];
}

const answer = (outcome: CheckOutcome | 'wait', headline: string, lines: string[] = []): LookedAgain => ({
  outcome,
  headline,
  lines,
});

function chosen(look: LookAgain): FiguresString[] {
  const wanted = new Set(look.strings);
  return look.now.strings.filter((s) => wanted.has(s.id));
}

/** Units of the case in a string; none named there: every unit of it. */
function slotsOf(look: LookAgain, string: FiguresString): FiguresString['slots'] {
  const positions = new Set(
    look.parts.filter((p) => p.stringId === string.id && p.position !== null).map((p) => p.position),
  );
  return positions.size === 0 ? string.slots : string.slots.filter((s) => positions.has(s.position));
}

const concerned = (look: LookAgain, stringId: string, position: number): boolean => {
  const positions = look.parts.filter((p) => p.stringId === stringId && p.position !== null);
  return positions.length === 0 || positions.some((p) => p.position === position);
};

/** Verdicts that only a commanded shutdown brings out. */
const OF_SHUTDOWN = new Set(['not_shutting_down', 'unconfirmed', 'late']);
const any = (): boolean => true;
const silence = (verdict: string): boolean => verdict === 'silent';
const ofShutdown = (verdict: string): boolean => OF_SHUTDOWN.has(verdict);

/** Units that are not right now, in words, by string and what they do. */
function wrongNow(look: LookAgain, counts: (verdict: string) => boolean): string[] {
  return chosen(look).flatMap((string) => {
    const by = new Map<string, number[]>();
    for (const slot of slotsOf(look, string)) {
      const what =
        slot.verdict !== null && slot.verdict !== 'ok'
          ? slot.verdict
          : slot.state === 'silent'
            ? 'silent'
            : null;
      if (what && counts(what)) by.set(what, [...(by.get(what) ?? []), slot.position]);
    }
    const units = [...by].map(([what, at]) => wrongSaid.are(string.name, at, what));
    if (string.finding === 'stuck_positions_unknown' && counts('stuck'))
      units.push(wrongSaid.someDoNotPass(string.name));
    if (string.finding === 'not_shutting_down') units.push(wrongSaid.voltageStands(string.name));
    if (string.finding === 'unexplained_voltage' && counts('stuck'))
      units.push(wrongSaid.voltageNotExplained(string.name));
    return units;
  });
}

/** Strings that give less than their expectation allows by more than a part of one unit. */
function voltageMissing(look: LookAgain): string[] {
  return chosen(look).flatMap((s) => {
    // the inverter sets the voltage of an optimizing string: it says nothing of its units
    if (s.optimizing || s.voltage === null || !s.expectedVoltage || !s.expectedBand || s.slots.length === 0)
      return [];
    const unit = s.expectedVoltage / s.slots.length;
    const short = s.expectedVoltage - s.voltage;
    return s.voltage < s.expectedBand[0] && short > AFTER_CLOSING.unitShare * unit
      ? [figuresSaid.gives(s.name, s.voltage, s.expectedVoltage)]
      : [];
  });
}

const voltageNow = (look: LookAgain): string[] =>
  chosen(look).flatMap((s) =>
    s.voltage === null ? [] : [figuresSaid.gives(s.name, s.voltage, s.expectedVoltage)],
  );

function relapsed(look: LookAgain, counts: (verdict: string) => boolean): string[] {
  const by = new Map<string, Set<number>>();
  for (const r of look.relapses) {
    if (
      !counts(r.verdict) ||
      r.atMs < look.closedMs + AFTER_CLOSING.graceMs ||
      !concerned(look, r.stringId, r.position)
    )
      continue;
    const name = look.now.strings.find((s) => s.id === r.stringId)?.name ?? figuresSaid.aStringWithin;
    const key = `${name}|${r.verdict}`;
    by.set(key, (by.get(key) ?? new Set()).add(r.position));
  }
  return [...by].map(([key, positions]) => {
    const [name = '', verdict = ''] = key.split('|');
    return wrongSaid.wereAgain(
      name,
      [...positions].sort((a, b) => a - b),
      verdict,
    );
  });
}

/** Why nothing can be said at this moment; null: it can. */
function notNow(look: LookAgain): string | null {
  if (look.nowMs - look.closedMs < AFTER_CLOSING.graceMs) return closedSaid.closedJustNow;
  if (look.plannedWork) return closedSaid.plannedWork;
  if (look.now.light.is !== 'light') return closedSaid.tooLittleLight;
  const strings = chosen(look);
  if (strings.some((s) => s.inForce !== null)) return closedSaid.shutdownIsCommanded;
  const old = strings.filter((s) => s.at === null || look.nowMs - Date.parse(s.at) > AFTER_CLOSING.freshMs);
  if (old.length > 0) return closedSaid.didNotReport(old.map((s) => s.name));
  return null;
}

/** Stuck, silent, and whatever is looked at by what units and conductors say now. */
function byUnits(look: LookAgain): LookedAgain {
  const waiting = notNow(look);
  if (waiting) return answer('wait', waiting);
  // a case of silence is about being heard: what else is wrong with a unit has a cause of its own
  const counts = look.kind === 'silent' ? silence : any;
  const missing = look.kind === 'silent' ? [] : voltageMissing(look);
  const wrong = [...wrongNow(look, counts), ...missing];
  if (look.cause?.open && wrong.length === 0) wrong.push(wrongSaid.causeStillHolds);
  if (wrong.length > 0)
    return answer('not_held', closedSaid.all(wrong), missing.length > 0 ? [] : voltageNow(look));
  const came = relapsed(look, counts);
  if (came.length > 0) return answer('not_held', closedSaid.all(came), voltageNow(look));
  if (look.lightMs < AFTER_CLOSING.lightMs) return answer('wait', closedSaid.wellUntilNow);
  const units = chosen(look).reduce((n, s) => n + slotsOf(look, s).length, 0);
  const shutdownOnly = chosen(look).every((s) => s.shutdownOnly);
  return answer(
    'held',
    shutdownOnly || units === 0 ? closedSaid.nothingAbnormal : closedSaid.unitsWereRight(units),
    voltageNow(look),
  );
}

/** What shows only while shutdown is commanded. */
function byShutdown(look: LookAgain): LookedAgain {
  const bad = wrongNow(look, ofShutdown);
  const early = look.nowMs - look.closedMs < AFTER_CLOSING.graceMs;
  if (look.plannedWork && look.kind !== 'not_shutting_down') return answer('wait', closedSaid.plannedWork);
  if (bad.length > 0 && (!early || look.kind === 'not_shutting_down'))
    return answer('not_held', closedSaid.all(bad), voltageNow(look));
  if (early) return answer('wait', closedSaid.closedJustNow);
  if (look.cause?.open) return answer('not_held', closedSaid.causeStillHolds, voltageNow(look));
  const came = relapsed(look, ofShutdown);
  if (came.length > 0) return answer('not_held', closedSaid.all(came), voltageNow(look));
  const strings = chosen(look);
  const followed = strings.filter((s) => s.inForce !== null && s.shutdown === s.units && s.units > 0);
  if (strings.length > 0 && followed.length === strings.length)
    return answer('held', closedSaid.followedByTheirWord, voltageNow(look));
  if (look.shutdownSince && look.lightMs >= AFTER_CLOSING.lightMs)
    return answer('held', closedSaid.noneWasFoundPassing, voltageNow(look));
  if (look.lightMs < AFTER_CLOSING.lightMs) return answer('wait', closedSaid.noShutdownYet);
  return answer('cant_tell', closedSaid.noShutdown, voltageNow(look));
}

function byDays(look: LookAgain): LookedAgain {
  const lines: string[] = [];
  const low: string[] = [];
  let missing = 0;
  for (const id of look.strings) {
    const name = look.now.strings.find((s) => s.id === id)?.name ?? figuresSaid.aString;
    const day = look.days.find((d) => d.stringId === id && d.ratio !== null);
    if (!day || day.ratio === null) {
      missing += 1;
      continue;
    }
    lines.push(figuresSaid.made(name, day.ratio, day.day));
    if (day.ratio < AFTER_CLOSING.outputRatio && (day.z === null || day.z < -3.5)) low.push(name);
  }
  if (low.length > 0) return answer('not_held', closedSaid.makeTooLittle(low), lines);
  if (missing === 0) return answer('held', closedSaid.firstDayWasRight, lines);
  return answer('wait', closedSaid.noDayYet, lines);
}

function byNights(look: LookAgain): LookedAgain {
  if (!look.cause) return answer('cant_tell', closedSaid.noCause, voltageNow(look));
  if (look.nowMs - look.closedMs < AFTER_CLOSING.nightMs) return answer('wait', closedSaid.nightIsWaitedFor);
  return look.cause.open
    ? answer('not_held', closedSaid.causeStillHolds, voltageNow(look))
    : answer('held', closedSaid.causeIsOver, voltageNow(look));
}

/** What the figures after a closing say. `wait`: look again later. */
export function lookAgain(look: LookAgain): LookedAgain {
  const found = judge(look);
  if (found.outcome === 'wait' && look.nowMs - look.closedMs > AFTER_CLOSING.waitMs)
    return answer('cant_tell', closedSaid.nothingForAWeek(found.headline), found.lines);
  return found;
}

function judge(look: LookAgain): LookedAgain {
  if (look.strings.length === 0 && !look.cause)
    return look.nowMs - look.closedMs < AFTER_CLOSING.graceMs
      ? answer('wait', closedSaid.closedJustNow)
      : answer('cant_tell', closedSaid.namesNothing);
  switch (look.kind) {
    case 'not_shutting_down':
    case 'unconfirmed':
      return byShutdown(look);
    case 'low_output':
      return look.strings.length > 0 ? byDays(look) : byNights(look);
    case 'loop_resistance':
    case 'wrong_string':
    case 'weak_unit':
      return byNights(look);
    case 'stuck':
    case 'silent':
    case 'other':
      return byUnits(look);
  }
}
