import { membershipSaid } from '../../words/domain-membership';
import { typicalOf } from './membership-evidence';
import { median, sigmaMad } from './robust';

/**
 * Does a unit sit in the string that the drawing says? Units in series carry one current, on the output side. What
 * counts are differences against the units' accuracy, not correlation: under a clear sky all strings of a plane
 * correlate. The answer names another string, never a position. Amperes.
 */

export interface MemberString {
  name: string;
  /** Per unit, current at each sample; NaN: not reported. */
  currents: readonly Float64Array[];
}

export type MembershipOutcome = 'here' | 'elsewhere' | 'cant_tell' | 'fits_none';
export interface Membership {
  string: string;
  /** 0-based. */
  unit: number;
  outcome: MembershipOutcome;
  /** The string whose current it carries. */
  otherString: string | null;
  /** ln of the odds of that string against its own. */
  logOdds: number;
  /** Strings whose currents its accuracy can't part from its own string's. */
  undecidedWith: string[];
  words: string;
}

export interface MembershipOptions {
  /** Units' current accuracy: a constant gain error, relative (0.01 = 1 %), as one standard deviation. */
  accuracy: number;
  /** Least current that says something, A. */
  currentMin?: number;
}

/** A, from which a current says something of where a unit sits. */
export const CURRENT_MIN = 0.5;
/** What no unit is taken to be better than. */
const ACCURACY_MIN = 0.002;
/** Samples that are taken to be independent: neighbours in time repeat each other. */
const SAMPLES_MAX = 60;
const SAMPLES_MIN = 12;
/** Relative noise of one report when it can't be learned: rounding and the skew of reports within a minute. */
const NOISE_FLOOR = 0.002;
/** What a report is rounded to and skewed by within its minute, A, as a standard deviation. From experience. */
const RESOLUTION = 0.006;
/** Samples below this share of the day's highest current are left out. */
const SHARE_OF_PEAK = 0.1;
/** A unit on another string must be so much likelier there: odds of 1 to 1,000 are the prior of a wrong drawing. */
export const ODDS_NEEDED = Math.log(1000) + Math.log(20);
/**
 * How much of each sample counts: neighbours in time repeat each other, and a string's typical current has an error of
 * its own that all comparisons with it share. From experience, checked by simulation.
 */
const INDEPENDENT = 0.4;
/** Deviations are cut off here: one wild report doesn't decide. */
const Z_MAX = 3;

/**
 * Judges every unit of every string. `cant_tell` where no string runs, too few samples are left, or the strings'
 * currents differ by less than the accuracy can part. A string that never carried current says nothing and would keep
 * the others from being told: theirs are judged without it.
 */
export function judgeMembership(strings: readonly MemberString[], options: MembershipOptions): Membership[] {
  return [...membershipsByString(strings, options)].flat();
}

/** The same string by string, in their order, for whoever has something else to do in between. */
export function* membershipsByString(
  strings: readonly MemberString[],
  options: MembershipOptions,
): Generator<Membership[]> {
  const { currentMin = CURRENT_MIN } = options;
  const carrying = strings.filter((s) => typicalOf(s.currents).some((i) => i >= currentMin));
  const judged = carrying.length < 2 ? strings : carrying;
  const judge = judgeTogether(judged, Math.max(ACCURACY_MIN, options.accuracy), currentMin);
  for (const s of strings) {
    const own = judged.indexOf(s);
    yield own >= 0
      ? judge(own)
      : s.currents.map((_, unit) => madeOf(s, unit)('cant_tell', membershipSaid.noCurrent));
  }
}

/** What is said of one unit, where nothing else is known of it. */
const madeOf =
  (s: MemberString, unit: number) =>
  (outcome: MembershipOutcome, words: string, more: Partial<Membership> = {}): Membership => ({
    string: s.name,
    unit,
    outcome,
    otherString: null,
    logOdds: 0,
    undecidedWith: [],
    words,
    ...more,
  });

/** What judges the units of one of the strings, by its index. */
function judgeTogether(
  strings: readonly MemberString[],
  accuracy: number,
  currentMin: number,
): (own: number) => Membership[] {
  const steps = strings[0]?.currents[0]?.length ?? 0;
  const typical = strings.map((s) => typicalOf(s.currents));
  const chosen = chooseSamples(typical, steps, currentMin);
  const logs = typical.map((t) => chosen.map((q) => Math.log(t[q]!)));
  const relative = learnNoise(strings, logs, chosen);
  const noise = chosen.map((q) => Math.hypot(relative, RESOLUTION / Math.min(...typical.map((t) => t[q]!))));

  return (own) => {
    const s = strings[own]!;
    // most units report every sample: what parts their string from the others is the same for all of these
    const apart = new Map<string, number[]>();
    return s.currents.map((current, unit): Membership => {
      const usable = chosen.flatMap((q, k) => (current[q]! >= currentMin ? [k] : []));
      const made = madeOf(s, unit);
      if (usable.length < SAMPLES_MIN) return made('cant_tell', membershipSaid.tooFewSamples);
      const mine = usable.map((k) => Math.log(current[chosen[k]!]!));
      const noiseHere = usable.map((k) => noise[k]!);
      const spread = median(noiseHere);
      const likely = logs.map((log) =>
        likelihood(
          mine.map((x, j) => x - log[usable[j]!]!),
          accuracy,
          noiseHere,
          spread,
        ),
      );
      const key = usable.join();
      // how much likelihood a unit of this string would lose if it were held against another: what can be told at all
      const separation =
        apart.get(key) ??
        logs.map(
          (log) =>
            -likelihood(
              usable.map((k) => logs[own]![k]! - log[k]!),
              accuracy,
              noiseHere,
              spread,
            ),
        );
      apart.set(key, separation);
      const rivals = likely.map((l, i) => ({ i, odds: l - likely[own]! })).filter((r) => r.i !== own);
      rivals.sort((a, b) => b.odds - a.odds);
      const best = rivals[0];
      const undecidedWith = rivals
        .filter(({ i }) => separation[i]! < ODDS_NEEDED)
        .map(({ i }) => strings[i]!.name);
      const worstFit = -0.5 * INDEPENDENT * Z_MAX * Z_MAX * usable.length * 0.6;
      if (best !== undefined && best.odds > ODDS_NEEDED) {
        const other = strings[best.i]!.name;
        const second = rivals[1];
        if (second !== undefined && best.odds - second.odds < Math.log(20))
          return made('cant_tell', membershipSaid.twoFit(s.name, other, strings[second.i]!.name), {
            logOdds: best.odds,
            undecidedWith: [other, strings[second.i]!.name],
          });
        return made('elsewhere', membershipSaid.elsewhere(s.name, other), {
          otherString: other,
          logOdds: best.odds,
          undecidedWith,
        });
      }
      if (likely[own]! < worstFit)
        return made('fits_none', membershipSaid.fitsNone, {
          logOdds: best?.odds ?? 0,
          undecidedWith,
        });
      if (undecidedWith.length > 0)
        return made('cant_tell', membershipSaid.notParted(s.name, undecidedWith.slice(0, 3)), {
          logOdds: best?.odds ?? 0,
          undecidedWith,
        });
      return made('here', membershipSaid.here(s.name), { logOdds: best?.odds ?? 0 });
    });
  };
}

/** Steps at which every string runs; of many, those where the strings differ most, spread over the time. */
function chooseSamples(typical: readonly Float64Array[], steps: number, currentMin: number): number[] {
  const running: number[] = [];
  let peak = 0;
  for (const t of typical) for (const i of t) if (i > peak) peak = i;
  const least = Math.max(currentMin, SHARE_OF_PEAK * peak);
  for (let q = 0; q < steps; q++) if (typical.every((t) => t[q]! >= least)) running.push(q);
  if (running.length <= SAMPLES_MAX) return running;
  const width = running.length / SAMPLES_MAX;
  return Array.from({ length: SAMPLES_MAX }, (_, k) => {
    const slice = running.slice(Math.floor(k * width), Math.floor((k + 1) * width));
    const spreadAt = (q: number): number => {
      const logs = typical.map((t) => Math.log(t[q]!));
      return Math.max(...logs) - Math.min(...logs);
    };
    return slice.reduce((best, q) => (spreadAt(q) > spreadAt(best) ? q : best), slice[0]!);
  });
}

/** Relative noise of one report about its own string's current, gain taken out: the median over all units. */
function learnNoise(
  strings: readonly MemberString[],
  logs: readonly number[][],
  chosen: readonly number[],
): number {
  const spreads: number[] = [];
  strings.forEach((s, i) => {
    for (const current of s.currents) {
      const d = chosen.flatMap((q, k) => (current[q]! > 0 ? [Math.log(current[q]!) - logs[i]![k]!] : []));
      if (d.length >= SAMPLES_MIN) spreads.push(sigmaMad(d));
    }
  });
  return spreads.length === 0 ? NOISE_FLOOR : Math.max(NOISE_FLOOR, median(spreads));
}

/**
 * ln likelihood of differences d = gain + noise, gain normal with `accuracy`: its mean against both, its scatter
 * against the noise (`spread` is its median), each deviation cut off.
 */
function likelihood(
  d: readonly number[],
  accuracy: number,
  noise: readonly number[],
  spread: number,
): number {
  const gain = median(d);
  const gainVariance = accuracy ** 2 + (1.57 * spread ** 2) / d.length; // variance of a median
  let scatter = 0;
  d.forEach((x, j) => {
    const z = Math.min(Z_MAX, Math.abs(x - gain) / noise[j]!);
    scatter += z * z;
  });
  return -0.5 * (gain ** 2 / gainVariance + INDEPENDENT * scatter);
}
