import { median } from '../output/robust';
import { byInputOnly, inputsAt } from './isolation-inputs';
import {
  BEFORE_MIN_A,
  CLEAR_OF_ZERO,
  IN_A_ROW,
  MAJORITY,
  TOGETHER_INTERVALS,
  ZERO_A,
  ZERO_SHARE,
  currentBefore,
  type Between,
  type IsolationFinding,
  type IsolationOutcome,
  type IsolationWatch,
  type UnitFate,
  type UnitResult,
  type WatchedUnit,
} from './isolation-watch';

/**
 * The decisive way to learn which units sit in a string: a person isolates one string by its load-break device, and
 * whose current goes to zero? Currents in A, instants in epoch seconds. Pure: frames in, finding out.
 *
 * Clouds, dusk and a stopping inverter lower every current at once, so each unit's current is held against what the
 * rest of the site kept (`shared`: the median, over units that the drawing has elsewhere, of current now over current
 * before). A unit counts as dropped where it reads zero while it should, by that share, carry a clear current.
 */

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
  const inputs = watch.inputs.map((i) => ({ input: i, before: currentBefore(i.samples, watch) }));
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

function trace(unit: WatchedUnit, watch: IsolationWatch): Traced {
  const told = unit.samples
    .flatMap((s) => (s.current === null || s.atS > watch.nowS ? [] : [{ atS: s.atS, current: s.current }]))
    .sort((a, b) => a.atS - b.atS);
  const since = told.filter((s) => s.atS > watch.startedAtS);
  const earlier = told.filter((s) => s.atS <= watch.startedAtS);
  return {
    unit,
    before: currentBefore(unit.samples, watch),
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
