import { expectedState, type Hypothesis, type HypothesisKind, type ReadingQuestion } from './reading';

/** Prior chances of what a string can be like on the day it is measured. From experience; siblings and meters decide. */
export const PRIORS = {
  asExpected: 0.83,
  someOtherwise: 0.05, // in all, halving with each further unit
  allOtherwise: 0.02,
  unmated: [0.022, 0.006, 0.002],
  wiredPast: 0.01,
  reversed: 0.012,
  oneReversed: 0.004,
  bypassed: [0.014, 0.004],
  open: 0.02,
  twoInSeries: 0.004,
  unexplained: 0.01,
} as const;

/** Chance that the modules give too little to power the units. From experience. */
export const UNPOWERED = { bright: 0.0003, dull: 0.02, snow: 0.55, night: 0.985 } as const;

/** What an open lead shows: stray pick-up with a high-impedance meter, next to nothing with a low one. V. */
const OPEN_SD = { high_impedance: 4, low_impedance: 0.05 } as const;
const UNPOWERED_SD = 0.15;

/** Every hypothesis about one string with its prior; they add up to 1 with `unexplained`, which comes last. */
export function hypothesesFor(question: ReadingQuestion): Hypothesis[] {
  const { units: n, module } = question;
  const { passing: p0 } = expectedState(question);
  const s0 = n - p0;
  const list: Hypothesis[] = [];
  const add = (
    kind: HypothesisKind,
    count: number,
    passing: number,
    inShutdown: number,
    prior: number,
  ): void => {
    if (prior > 0) list.push({ kind, count, asExpected: false, passing, inShutdown, ownSd: 0, prior });
  };
  const mixed = (p: number): [HypothesisKind, number] =>
    p === 0 ? ['all_in_shutdown', n] : p === n ? ['all_passing', n] : ['some_passing', p];

  const [kind, count] = mixed(p0);
  add(kind, count, p0, s0, PRIORS.asExpected);
  list[0]!.asExpected = question.light !== 'night'; // without light no unit gives anything
  const others: number[] = [];
  for (let p = 0; p <= n; p++) if (p !== p0) others.push(p);
  const halving = (p: number): number => Math.pow(0.5, Math.abs(p - p0));
  const sum = others.reduce((s, p) => s + halving(p), 0);
  for (const p of others) {
    const whole = (p === 0 || p === n) && (p0 === 0 || p0 === n) ? PRIORS.allOtherwise : 0;
    const [otherKind, c] = mixed(p);
    add(otherKind, c, p, n - p, (PRIORS.someOtherwise * halving(p)) / sum + whole);
  }
  PRIORS.unmated.forEach((prior, k) => {
    const m = k + 1;
    if (m >= n) return;
    // which of both sorts is unmated is not known: the more numerous is meant
    if (s0 > p0) add('unmated', m, p0, Math.max(0, s0 - m), prior);
    else add('unmated', m, Math.max(0, p0 - m), s0, prior);
  });
  if (s0 > 0) add('wired_past_its_unit', 1, p0 + 1, s0 - 1, PRIORS.wiredPast);
  else add('wired_past_its_unit', 1, n, 0, PRIORS.wiredPast); // reads like all passing: the meter can't tell
  add('reversed', n, -p0, -s0, PRIORS.reversed);
  if (p0 >= 2) add('one_reversed', 1, p0 - 2, s0, PRIORS.oneReversed);
  if (p0 >= 1)
    PRIORS.bypassed.forEach((prior, k) =>
      add('substring_bypassed', k + 1, p0 - (k + 1) / module.bypassGroups, s0, prior),
    );
  add('open', 0, 0, 0, PRIORS.open);
  list.at(-1)!.ownSd = OPEN_SD[question.meter.mode];
  add('two_in_series', 2, 2 * p0, 2 * s0, PRIORS.twoInSeries);

  const dark = UNPOWERED[question.light];
  const total = list.reduce((s, h) => s + h.prior, 0) / (1 - PRIORS.unexplained);
  for (const h of list) h.prior = (h.prior / total) * (1 - dark);
  list.push({
    kind: 'unpowered',
    count: n,
    asExpected: question.light === 'night',
    passing: 0,
    inShutdown: 0,
    ownSd: UNPOWERED_SD,
    prior: dark * (1 - PRIORS.unexplained),
  });
  list.push({
    kind: 'unexplained',
    count: 0,
    asExpected: false,
    passing: 0,
    inShutdown: 0,
    ownSd: 0,
    prior: PRIORS.unexplained,
  });
  return list;
}
