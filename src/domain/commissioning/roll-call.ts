import { notStirredCouldBe } from '../../words/domain-roll-call';

/**
 * The roll call: how many of those not yet heard may be expected, and by when. Times are epoch seconds.
 *
 * Method: the time from the start until a unit is heard is taken as Weibull, with a share of units that never answer
 * (a "cure" model: Boag 1949; Berkson & Gage 1952). Shape, scale and share are not fitted to one value but weighed on a
 * grid (Bayes, priors from experience), with units not yet heard as censored at `nowS`. The band is the middle 90 % of
 * the posterior predictive distribution, widened because units heard through one gateway don't answer independently.
 */

export interface RollCallUnit {
  /** Name of its string by the as-built. */
  group: string;
  /** Gateway it was heard through, or is meant to be heard through where the as-built says; null: not known. */
  gateway: number | null;
  /** When it first answered; null: not yet. */
  heardAtS: number | null;
  serial?: string | null;
}

export interface ForecastInput {
  startedAtS: number;
  nowS: number;
  units: readonly RollCallUnit[];
}

export interface ForecastPoint {
  atS: number;
  expected: number;
  low: number;
  high: number;
}

/** Units of a string, a gateway or a block of serials of which not one was heard, though others long were. */
export interface NotStirred {
  kind: 'string' | 'gateway' | 'serials';
  group: string;
  units: number;
  couldBe: string[];
}

export interface RollCallForecast {
  heard: number;
  total: number;
  /** Units in groups that have not stirred: the forecast leaves them out. */
  excluded: number;
  /** How many are expected to have been heard in the end, with the middle 90 %; without the excluded. */
  expectedTotal: number;
  low: number;
  high: number;
  /** When all that may be expected are heard but for half a unit; null: can't tell, or nothing is left to wait for. */
  expectedByS: number | null;
  /** From now on. Empty while too few were heard to say anything. */
  curve: ForecastPoint[];
  notStirred: NotStirred[];
}

/** Fewer units heard than this say nothing of the rest. */
export const HEARD_MIN = 5;
const SHAPES = [0.45, 0.6, 0.8, 1, 1.3, 1.7, 2.3];
const NEVER = [0, 0.005, 0.01, 0.02, 0.04, 0.08, 0.15, 0.3];
/** Prior weights of NEVER; from experience: one or two of a hundred need a visit. */
const NEVER_PRIOR = [0.2, 0.22, 0.2, 0.16, 0.11, 0.06, 0.035, 0.015];
const SCALES = 36;
/** Correlation among units of one site that is left after the model; from experience, calibrated by simulation. */
const TOGETHER = 0.015;
export const BAND = 0.9;
const CURVE_POINTS = 24;
/** A group counts as not stirred when so improbable by the pace of the others. */
export const NOT_STIRRED_BELOW = 0.01;

interface Particle {
  weight: number;
  shape: number;
  scale: number;
  never: number;
}

/**
 * Forecast of a roll call from what has been heard. Groups of two or more of which nobody was heard, though by the
 * pace of the others that is less than one in a hundred, are named and left out.
 */
export function forecastRollCall(input: ForecastInput): RollCallForecast {
  const { startedAtS, nowS, units } = input;
  const heardCount = units.filter((u) => u.heardAtS !== null).length;
  const elapsed = Math.max(1, nowS - startedAtS);
  const base = { heard: heardCount, total: units.length };
  const nothing: RollCallForecast = {
    ...base,
    excluded: 0,
    expectedTotal: units.length,
    low: heardCount,
    high: units.length,
    expectedByS: null,
    curve: [],
    notStirred: [],
  };
  if (heardCount < HEARD_MIN) return nothing;

  // the pace of those that stir decides who doesn't, and who doesn't is left out of the pace
  const stirring = (list: readonly RollCallUnit[]): RollCallUnit[] => {
    const alive = new Set(list.filter((u) => u.heardAtS !== null).map((u) => u.group));
    return list.filter((u) => alive.has(u.group));
  };
  const pace = posterior(stirring(units), startedAtS, elapsed);
  const notStirred = findNotStirred(units, pace, elapsed);
  const left = new Set(notStirred.flatMap((n) => n.members));
  const counted = units.filter((u) => !left.has(u));
  const particles = posterior(counted, startedAtS, elapsed);
  const waiting = counted.length - heardCount;

  const at = (afterS: number): Omit<ForecastPoint, 'atS'> => {
    const chances = particles.map((p) => ({ weight: p.weight, q: chanceBy(p, elapsed, afterS) }));
    const mean = chances.reduce((sum, c) => sum + c.weight * c.q, 0) * waiting;
    return {
      expected: heardCount + mean,
      low: heardCount + quantile(chances, waiting, (1 - BAND) / 2),
      high: heardCount + quantile(chances, waiting, (1 + BAND) / 2),
    };
  };
  const inTheEnd = at(Infinity);
  const byS = waiting === 0 ? null : timeUntilHalfAUnit(particles, elapsed, waiting);
  const horizon = Math.max(600, Math.min(byS ?? elapsed, 20 * elapsed));
  const curve: ForecastPoint[] = [];
  for (let k = 0; k <= CURVE_POINTS; k++) {
    const afterS = Math.round((horizon * k) / CURVE_POINTS);
    curve.push({ atS: nowS + afterS, ...at(afterS) });
  }
  return {
    ...base,
    excluded: left.size,
    expectedTotal: inTheEnd.expected,
    low: inTheEnd.low,
    high: inTheEnd.high,
    expectedByS: byS === null ? null : Math.round(nowS + byS),
    curve,
    notStirred: notStirred.map(({ kind, group, members, couldBe }) => ({
      kind,
      group,
      units: members.length,
      couldBe,
    })),
  };
}

const survival = (p: Particle, t: number): number =>
  p.never + (1 - p.never) * Math.exp(-Math.pow(t / p.scale, p.shape));

/** Chance that a unit not heard after `elapsed` is heard within another `afterS`. */
function chanceBy(p: Particle, elapsed: number, afterS: number): number {
  const now = survival(p, elapsed);
  const then = afterS === Infinity ? p.never : survival(p, elapsed + afterS);
  return now <= 0 ? 0 : Math.min(1, Math.max(0, (now - then) / now));
}

/** Weighed shapes, scales and shares of units that never answer; those that hardly count are dropped. */
function posterior(units: readonly RollCallUnit[], startedAtS: number, elapsed: number): Particle[] {
  const times = units.flatMap((u) => (u.heardAtS === null ? [] : [Math.max(1, u.heardAtS - startedAtS)]));
  const waiting = units.length - times.length;
  const n = times.length;
  const logSum = times.reduce((sum, t) => sum + Math.log(t), 0);
  const particles: Particle[] = [];
  let best = -Infinity;
  for (const shape of SHAPES) {
    const powerSum = times.reduce((sum, t) => sum + Math.pow(t, shape), 0);
    for (let k = 0; k < SCALES; k++) {
      // from a minute to two days, evenly in the logarithm
      const scale = 60 * Math.pow(2880, k / (SCALES - 1));
      const heardLikely =
        n * (Math.log(shape) - shape * Math.log(scale)) +
        (shape - 1) * logSum -
        powerSum / Math.pow(scale, shape);
      NEVER.forEach((never, j) => {
        const still = survival({ weight: 0, shape, scale, never }, elapsed);
        const weight =
          heardLikely +
          n * Math.log(1 - never) +
          (waiting > 0 ? waiting * Math.log(Math.max(still, 1e-12)) : 0) +
          Math.log(NEVER_PRIOR[j]!);
        if (weight > best) best = weight;
        particles.push({ weight, shape, scale, never });
      });
    }
  }
  const kept = particles.filter((p) => p.weight > best - 7);
  const sum = kept.reduce((s, p) => s + Math.exp(p.weight - best), 0);
  return kept.map((p) => ({ ...p, weight: Math.exp(p.weight - best) / sum }));
}

interface Silent extends Omit<NotStirred, 'units'> {
  members: RollCallUnit[];
}
function findNotStirred(
  units: readonly RollCallUnit[],
  pace: readonly Particle[],
  elapsed: number,
): Silent[] {
  const chanceNone = (m: number): number =>
    pace.reduce((sum, p) => sum + p.weight * Math.pow(survival(p, elapsed), m), 0);
  const taken = new Set<RollCallUnit>();
  const look = (kind: NotStirred['kind'], keyOf: (u: RollCallUnit) => string | null): Silent[] => {
    const groups = new Map<string, RollCallUnit[]>();
    for (const unit of units) {
      const key = keyOf(unit);
      if (key === null || taken.has(unit)) continue;
      const group = groups.get(key);
      if (group === undefined) groups.set(key, [unit]);
      else group.push(unit);
    }
    const silent = [...groups].filter(
      ([, members]) =>
        members.length >= 2 &&
        members.every((u) => u.heardAtS === null) &&
        chanceNone(members.length) < NOT_STIRRED_BELOW,
    );
    return silent.map(([group, members]) => {
      for (const m of members) taken.add(m);
      return { kind, group, members, couldBe: notStirredCouldBe[kind] };
    });
  };
  return [
    ...look('gateway', (u) => (u.gateway === null ? null : String(u.gateway))),
    ...look('string', (u) => u.group),
    ...look('serials', (u) => blockOf(u.serial ?? null)),
  ];
}

/** Serials of one delivery mostly share all but their last two characters. */
const blockOf = (serial: string | null): string | null =>
  serial === null || serial.length < 5 ? null : `${serial.slice(0, -2)}..`;

/** Seconds until less than half a unit of those that will still answer is missing; null: beyond two days. */
function timeUntilHalfAUnit(particles: readonly Particle[], elapsed: number, waiting: number): number | null {
  const missing = (afterS: number): number =>
    waiting *
    particles.reduce(
      (sum, p) => sum + p.weight * (chanceBy(p, elapsed, Infinity) - chanceBy(p, elapsed, afterS)),
      0,
    );
  let high = 172_800;
  if (missing(high) > 0.5) return null;
  let low = 0;
  while (high - low > 1) {
    const middle = (low + high) / 2;
    if (missing(middle) > 0.5) low = middle;
    else high = middle;
  }
  return high;
}

/** Quantile of a mixture of binomials over `n` units, each widened by TOGETHER; normal approximation with ends kept. */
function quantile(chances: readonly { weight: number; q: number }[], n: number, probability: number): number {
  const below = (k: number): number =>
    chances.reduce((sum, { weight, q }) => {
      const sd = Math.sqrt(n * q * (1 - q) * (1 + TOGETHER * Math.max(0, n - 1)));
      const mean = n * q;
      return sum + weight * (sd < 1e-9 ? (k + 0.5 >= mean ? 1 : 0) : normalCdf((k + 0.5 - mean) / sd));
    }, 0);
  let low = -1;
  let high = n;
  while (high - low > 1) {
    const middle = Math.floor((low + high) / 2);
    if (below(middle) >= probability) high = middle;
    else low = middle;
  }
  return high;
}

/** Standard normal distribution; Abramowitz & Stegun 1964, 26.2.17, error below 7.5e-8. */
function normalCdf(x: number): number {
  const t = 1 / (1 + 0.231_641_9 * Math.abs(x));
  const tail =
    (Math.exp((-x * x) / 2) / Math.sqrt(2 * Math.PI)) *
    t *
    (0.319_381_53 + t * (-0.356_563_782 + t * (1.781_477_937 + t * (-1.821_255_978 + t * 1.330_274_429))));
  return x >= 0 ? 1 - tail : tail;
}
