import { median } from '../output/robust';

/**
 * The decisive way to learn which units sit in a string: a person isolates one string by its load-break device, and
 * whose current goes to zero? Currents in A, instants in epoch seconds. Pure: frames in, finding out.
 *
 * Clouds, dusk and a stopping inverter lower every current at once, so each unit's current is held against what the
 * rest of the site kept (`shared`: the median, over units that the drawing has elsewhere, of current now over current
 * before). A unit counts as dropped where it reads zero while it should, by that share, carry a clear current.
 */

export interface CurrentSample {
  atS: number;
  /** null: not reported. */
  current: number | null;
}
export interface WatchedUnit {
  serial: string;
  string: string;
  position: number;
  samples: readonly CurrentSample[];
}
/** An input's own measurement: what is left where units tell nothing. */
export interface WatchedInput {
  name: string;
  /** Strings on it, by the drawing. */
  strings: readonly string[];
  samples: readonly CurrentSample[];
}
export interface IsolationWatch {
  /** The string that the person on site isolates. */
  string: string;
  startedAtS: number;
  nowS: number;
  reportIntervalS: number;
  units: readonly WatchedUnit[];
  inputs: readonly WatchedInput[];
}

/** Between which two reports something happened. */
export interface Between {
  afterS: number;
  byS: number;
}
export type UnitFate =
  | 'member_dropped'
  | 'member_kept'
  | 'other_dropped'
  | 'other_kept'
  /** No report since, or too little current to part zero from the rest. */
  | 'not_told';
export interface UnitResult {
  serial: string;
  string: string;
  position: number;
  fate: UnitFate;
  /** A, median before the start; null: none. */
  before: number | null;
  /** A, while the string was isolated; the newest value before that. */
  during: number | null;
  dropped: Between | null;
}
export interface InputResult {
  name: string;
  strings: string[];
  before: number | null;
  during: number | null;
  /** Share of its current lost beyond what all inputs lost, 0 … 1. */
  lost: number | null;
}
export type IsolationOutcome =
  /** Nothing has dropped yet. */
  | 'watching'
  /** The string dropped: who is in it is told. */
  | 'told'
  /** Another string than the one named dropped. */
  | 'other_string'
  /** Two strings or more dropped together. */
  | 'several_strings'
  /** Only the input's current tells: the string's units report nothing. */
  | 'input_only'
  | 'cant_tell';
export interface IsolationFinding {
  outcome: IsolationOutcome;
  /** Why it can't be told; null otherwise. */
  reason:
    | 'no_current_before'
    | 'no_reports'
    | 'everything_stopped'
    | 'too_little_current'
    | 'nothing_beside'
    | null;
  /** Strings of which more than half of the units dropped, by the drawing. */
  strings: string[];
  /** When, as an interval of reports; null: not seen. */
  dropped: Between | null;
  /** When current came back; null: not yet. */
  returned: Between | null;
  units: UnitResult[];
  inputs: InputResult[];
}

/** Reads as no current, A: rounding of a report and its offset. From experience, twice a unit's resolution error. */
export const ZERO_A = 0.06;
/** And no more than this share of what the unit would otherwise carry. */
const ZERO_SHARE = 0.04;
/** Less than this before the start says nothing, A. */
export const BEFORE_MIN_A = 0.3;
/** What a unit should carry, over ZERO_A, before "zero" means anything: clouds must leave four times the noise. */
const CLEAR_OF_ZERO = 4;
/** How far back the current before is taken, in report intervals. */
const BEFORE_INTERVALS = 6;
/** Reports in a row that must agree. */
const IN_A_ROW = 2;
/** A unit outside the string belongs to the drop when both fell within so many report intervals. */
const TOGETHER_INTERVALS = 1.5;
/** Share of a string's units that must drop before the string is said to have dropped. */
const MAJORITY = 0.5;
/** An input has lost a string when it lost at least this share of one string's part of its current. */
const INPUT_SHARE = 0.6;

interface Traced {
  unit: WatchedUnit;
  before: number | null;
  /** Reports since the start, oldest first. */
  since: { atS: number; current: number }[];
  /** Instant of its last report before the first in `since`. */
  lastBeforeS: number;
}

/**
 * What a watch shows so far. The same frames give the same finding at any later time: what follows the string's
 * return to its input doesn't change who dropped.
 */
export function isolationFinding(watch: IsolationWatch): IsolationFinding {
  const traced = watch.units.map((unit) => trace(unit, watch));
  const inputs = watch.inputs.map((i) => ({ input: i, before: before(i.samples, watch) }));
  const result = (outcome: IsolationOutcome, more: Partial<IsolationFinding> = {}): IsolationFinding => ({
    outcome,
    reason: null,
    strings: [],
    dropped: null,
    returned: null,
    units: traced.map((t) => ({
      serial: t.unit.serial,
      string: t.unit.string,
      position: t.unit.position,
      fate: 'not_told',
      before: t.before,
      during: t.since.at(-1)?.current ?? null,
      dropped: null,
    })),
    inputs: inputsAt(inputs, watch, watch.nowS),
    ...more,
  });
  const cantTell = (reason: IsolationFinding['reason']) => result('cant_tell', { reason });

  const own = traced.filter((t) => t.unit.string === watch.string);
  const ownInput = inputs.find((i) => i.input.strings.includes(watch.string));
  if (own.length === 0) return byInputOnly(watch, ownInput, inputs, result);
  const carried = traced.filter((t) => t.before !== null && t.before >= BEFORE_MIN_A);
  if (carried.filter((t) => t.unit.string === watch.string).length < Math.max(1, own.length * MAJORITY))
    return own.every((t) => t.before === null) ? cantTell('no_reports') : cantTell('no_current_before');

  const shareOf = sharedCourse(carried, watch);
  const runs = new Map(carried.map((t) => [t, zeroRun(t, shareOf)]));
  const names = [...new Set(traced.map((t) => t.unit.string))];
  const gone = names.filter((name) => {
    const members = carried.filter((t) => t.unit.string === name);
    return members.length > 0 && members.filter((t) => runs.get(t)).length > members.length * MAJORITY;
  });
  if (gone.length === 0) {
    const newest = Math.max(...carried.map((t) => t.since.at(-1)?.atS ?? -Infinity));
    if (newest === -Infinity) return result('watching');
    const share = shareOf(newest);
    if (share === null) return cantTell('nothing_beside');
    const zero = carried.filter((t) => (t.since.at(-1)?.current ?? Infinity) <= ZERO_A).length;
    if (share * typical(carried) < CLEAR_OF_ZERO * ZERO_A)
      return zero > carried.length * MAJORITY
        ? cantTell('everything_stopped')
        : cantTell('too_little_current');
    return result('watching');
  }
  const main = gone.includes(watch.string) ? watch.string : gone[0]!;
  const group = [...runs].flatMap(([t, run]) => (t.unit.string === main && run ? [run] : []));
  const dropped: Between = {
    afterS: median(group.map((r) => r.between.afterS)),
    byS: median(group.map((r) => r.between.byS)),
  };
  const endsS = median(group.map((r) => r.lastS));
  const ends = group.flatMap((r) => (r.returned ? [r.returned] : []));
  const returned =
    ends.length * 2 > group.length
      ? { afterS: median(ends.map((e) => e.afterS)), byS: median(ends.map((e) => e.byS)) }
      : null;
  const units = traced.map((t): UnitResult => {
    const run = runs.get(t);
    const together =
      run !== undefined &&
      run !== null &&
      Math.abs(run.between.byS - dropped.byS) <= TOGETHER_INTERVALS * watch.reportIntervalS;
    const while_ = t.since.filter((s) => s.atS >= dropped.byS && s.atS <= endsS);
    const kept = while_.filter(({ atS, current }) => carries(t, current, shareOf(atS)));
    const member = t.unit.string === watch.string;
    const fate: UnitFate =
      t.before === null || t.before < BEFORE_MIN_A
        ? 'not_told'
        : together
          ? member
            ? 'member_dropped'
            : 'other_dropped'
          : kept.length >= IN_A_ROW || (kept.length > 0 && kept.length === while_.length && returned !== null)
            ? member
              ? 'member_kept'
              : 'other_kept'
            : 'not_told';
    const during = while_.map((s) => s.current);
    return {
      serial: t.unit.serial,
      string: t.unit.string,
      position: t.unit.position,
      fate,
      before: t.before,
      during: during.length > 0 ? median(during) : null,
      dropped: together ? run.between : null,
    };
  });
  const outcome = gone.length > 1 ? 'several_strings' : gone[0] === watch.string ? 'told' : 'other_string';
  return result(outcome, {
    strings: gone,
    dropped,
    returned,
    units,
    inputs: inputsAt(inputs, watch, returned?.afterS ?? watch.nowS, dropped.byS),
  });
}

/** Median current before the start; null where nothing was reported. */
function before(samples: readonly CurrentSample[], watch: IsolationWatch): number | null {
  const fromS = watch.startedAtS - BEFORE_INTERVALS * watch.reportIntervalS;
  const values = samples.flatMap((s) =>
    s.current !== null && s.atS >= fromS && s.atS <= watch.startedAtS ? [s.current] : [],
  );
  return values.length === 0 ? null : median(values);
}

function trace(unit: WatchedUnit, watch: IsolationWatch): Traced {
  const told = unit.samples
    .flatMap((s) => (s.current === null || s.atS > watch.nowS ? [] : [{ atS: s.atS, current: s.current }]))
    .sort((a, b) => a.atS - b.atS);
  const since = told.filter((s) => s.atS > watch.startedAtS);
  const earlier = told.filter((s) => s.atS <= watch.startedAtS);
  return {
    unit,
    before: before(unit.samples, watch),
    since,
    lastBeforeS: earlier.at(-1)?.atS ?? watch.startedAtS,
  };
}

const typical = (traced: readonly Traced[]): number => median(traced.map((t) => t.before ?? 0));

/**
 * Share of its earlier current that the site kept at an instant: the median over units of other strings, each by its
 * report nearest in time; strings that dropped as a whole are left out by the median as long as they are fewer than
 * half. null: nobody else reports.
 */
function sharedCourse(carried: readonly Traced[], watch: IsolationWatch): (atS: number) => number | null {
  const others = carried.filter((t) => t.unit.string !== watch.string);
  const known = new Map<number, number | null>();
  return (atS) => {
    const found = known.get(atS);
    if (found !== undefined) return found;
    const ratios = others.flatMap((t) => {
      const near = nearest(t.since, atS);
      return near !== undefined && Math.abs(near.atS - atS) <= 1.5 * watch.reportIntervalS
        ? [near.current / t.before!]
        : [];
    });
    const share = ratios.length === 0 ? null : Math.max(0, median(ratios));
    known.set(atS, share);
    return share;
  };
}

/** The sample nearest in time; `samples` in order of time. */
function nearest<S extends { atS: number }>(samples: readonly S[], atS: number): S | undefined {
  let low = 0;
  let high = samples.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (samples[middle]!.atS < atS) low = middle + 1;
    else high = middle;
  }
  const [earlier, later] = [samples[low - 1], samples[low]];
  if (earlier === undefined || later === undefined) return earlier ?? later;
  return atS - earlier.atS <= later.atS - atS ? earlier : later;
}

/** What the unit would carry by the others' course; null: nobody else tells. */
const wouldCarry = (t: Traced, share: number | null): number | null =>
  share === null ? null : t.before! * share;

const isZero = (t: Traced, current: number, share: number | null): boolean => {
  const would = wouldCarry(t, share);
  return (
    would !== null &&
    would >= CLEAR_OF_ZERO * ZERO_A &&
    Math.abs(current) <= Math.max(ZERO_A, ZERO_SHARE * would)
  );
};
const carries = (t: Traced, current: number, share: number | null): boolean => {
  const would = wouldCarry(t, share);
  return would !== null && would >= CLEAR_OF_ZERO * ZERO_A && current >= 0.4 * would;
};

interface ZeroRun {
  between: Between;
  lastS: number;
  returned: Between | null;
}
/** The first run of reports without current while the rest of the site carries on; null: none that lasted. */
function zeroRun(t: Traced, shareOf: (atS: number) => number | null): ZeroRun | null {
  for (let i = 0; i < t.since.length; i++) {
    let j = i;
    while (j < t.since.length && isZero(t, t.since[j]!.current, shareOf(t.since[j]!.atS))) j++;
    if (j - i >= IN_A_ROW) {
      const last = t.since[j - 1]!.atS;
      const next = t.since[j];
      const came = next !== undefined && carries(t, next.current, shareOf(next.atS));
      return {
        between: { afterS: t.since[i - 1]?.atS ?? t.lastBeforeS, byS: t.since[i]!.atS },
        lastS: last,
        returned: came ? { afterS: last, byS: next.atS } : null,
      };
    }
    i = Math.max(i, j);
  }
  return null;
}

type InputBefore = { input: WatchedInput; before: number | null };

/** What inputs carried in a span, and what each lost beyond the course that all inputs share. */
function inputsAt(
  inputs: readonly InputBefore[],
  watch: IsolationWatch,
  toS: number,
  fromS = toS - 2 * watch.reportIntervalS,
): InputResult[] {
  const during = inputs.map(({ input, before: was }) => {
    const values = input.samples.flatMap((s) =>
      s.current !== null && s.atS >= fromS && s.atS <= toS && s.atS > watch.startedAtS ? [s.current] : [],
    );
    return { was, now: values.length === 0 ? null : median(values) };
  });
  return inputs.map(({ input, before: was }, k) => {
    const { now } = during[k]!;
    const others = during.flatMap((d, i) =>
      i !== k && d.was !== null && d.was >= BEFORE_MIN_A && d.now !== null ? [d.now / d.was] : [],
    );
    const share = others.length === 0 ? null : median(others);
    return {
      name: input.name,
      strings: [...input.strings],
      before: was,
      during: now,
      lost:
        was === null ||
        was < BEFORE_MIN_A ||
        now === null ||
        share === null ||
        share * was < CLEAR_OF_ZERO * ZERO_A
          ? null
          : Math.min(1, Math.max(0, 1 - now / (was * share))),
    };
  });
}

/** For strings whose units report nothing: only the sum at an input tells, and not which unit. */
function byInputOnly(
  watch: IsolationWatch,
  own: InputBefore | undefined,
  inputs: readonly InputBefore[],
  result: (outcome: IsolationOutcome, more?: Partial<IsolationFinding>) => IsolationFinding,
): IsolationFinding {
  if (own?.before == null) return result('cant_tell', { reason: 'no_reports' });
  if (own.before < BEFORE_MIN_A) return result('cant_tell', { reason: 'no_current_before' });
  const times = [...new Set(inputs.flatMap((i) => i.input.samples.map((s) => s.atS)))].filter(
    (t) => t > watch.startedAtS && t <= watch.nowS,
  );
  times.sort((a, b) => a - b);
  // an input that lost what one string gives it, beyond what all inputs lost
  const fallenAt = (t: number): InputResult[] =>
    inputsAt(inputs, watch, t, t - watch.reportIntervalS / 2).filter(
      (i) => i.lost !== null && i.lost * i.strings.length >= INPUT_SHARE,
    );
  const key = (list: readonly InputResult[]): string => list.map((i) => i.name).join();
  for (let k = 0; k + 1 < times.length; k++) {
    const fell = fallenAt(times[k]!);
    if (fell.length === 0 || key(fell) !== key(fallenAt(times[k + 1]!))) continue;
    let last = k + 1;
    while (last + 1 < times.length && key(fallenAt(times[last + 1]!)) === key(fell)) last++;
    const next = times[last + 1];
    const here = fell.some((i) => i.name === own.input.name);
    return result(!here ? 'other_string' : fell.length > 1 ? 'several_strings' : 'input_only', {
      strings: here && fell.length === 1 ? [watch.string] : fell.flatMap((i) => i.strings),
      dropped: { afterS: times[k - 1] ?? watch.startedAtS, byS: times[k]! },
      returned: next === undefined ? null : { afterS: times[last]!, byS: next },
      inputs: inputsAt(inputs, watch, times[last]!, times[k]!),
    });
  }
  return result('watching');
}
