import { expectedStateSaid, interpretationSaid, readingCautions } from '../../words/domain-readings';
import { earthFinding, type EarthFinding } from './earth';
import { posteriorOf, type Posterior } from './posterior';
import { expectedState, type HypothesisKind, type ReadingQuestion } from './reading';
import { hypothesisWords, READING_CAUTION, ROLL_CALL_CAUTION } from './words';

export interface RankedHypothesis {
  kind: HypothesisKind;
  count: number;
  words: string;
  asExpected: boolean;
  probability: number;
  prior: number;
  /** Reading that it would give, and its standard deviation; null for `unexplained`. */
  expectedV: number | null;
  sdV: number | null;
}

/** What one piece of knowledge brought: how far it moved the answer. */
export interface Help {
  what: 'siblings' | 'conditions' | 'roll_call' | 'meter';
  /** Probability of the best hypothesis without it and with it. */
  without: number;
  with: number;
  /** Information gained, bits (Kullback–Leibler divergence). */
  bits: number;
}

export interface Interpretation {
  /** `proves_nothing`: the units have no light. `cant_tell`: no explanation reaches four in five. */
  outcome: 'as_expected' | 'finding' | 'cant_tell' | 'proves_nothing';
  headline: string;
  expected: string;
  /** Likeliest first. */
  hypotheses: RankedHypothesis[];
  /** The likeliest that together make up 95 %, and what would read exactly like one of them. */
  likely: RankedHypothesis[];
  earth: EarthFinding | null;
  helped: Help[];
  /** Do the units follow the initiator as far as is known? null: some do. */
  obeysInitiator: boolean | null;
  cautions: string[];
}

/** From here on an explanation is named as the finding; below it, "can't tell". */
export const TELL_FROM = 0.8;
const SET = 0.95;

/**
 * What a reading + to − means, with chances. Two explanations that give the same voltage share their chances and are
 * both named: then it can't be told which of them it is.
 * @throws RangeError when units, reading or meter are no numbers that a string can have
 */
export function interpretReading(question: ReadingQuestion): Interpretation {
  check(question);
  const posterior = posteriorOf(question);
  const ranked = rank(posterior, question);
  const best = ranked[0]!;
  const likely: RankedHypothesis[] = [];
  let sum = 0;
  for (const h of ranked) {
    likely.push(h);
    sum += h.probability;
    if (sum >= SET) break;
  }
  // what reads exactly alike belongs in the set however rare it is: no meter parts it from the rest
  for (const h of ranked)
    if (h.probability >= 0.002 && !likely.includes(h) && likely.some((l) => sameReading(l, h)))
      likely.push(h);
  const state = expectedState(question);
  const told = best.probability >= TELL_FROM;
  const alike = told && sameOnAll(posterior);
  const outcome = !told
    ? 'cant_tell'
    : best.kind === 'unpowered'
      ? 'proves_nothing'
      : best.asExpected
        ? 'as_expected'
        : 'finding';
  const deaf = state.unheardPassing;
  const night = question.light === 'night';
  const lit = night && best.kind !== 'unpowered' && best.kind !== 'open';
  return {
    outcome,
    headline: told ? best.words : interpretationSaid.cantTell(ranked[0]!.words, ranked[1]!.words),
    expected: night ? expectedStateSaid.night : state.words,
    hypotheses: ranked.filter((h) => h.probability >= 0.001 || h.asExpected),
    likely,
    earth: earthFinding(question, alike),
    helped: helpOf(question, posterior),
    obeysInitiator: deaf === 0 ? true : deaf === question.units ? false : null,
    cautions: [
      ...(lit ? [readingCautions.litAtNight] : []),
      ...(deaf > 0 ? [ROLL_CALL_CAUTION] : []),
      READING_CAUTION,
    ],
  };
}

/** Whether in the likeliest explanation all modules of the string give the same voltage. */
function sameOnAll({ hypotheses, probability }: Posterior): boolean {
  const h = hypotheses[probability.indexOf(Math.max(...probability))]!;
  const kinds: HypothesisKind[] = ['all_passing', 'all_in_shutdown', 'reversed'];
  return kinds.includes(h.kind) && (h.passing === 0 || h.inShutdown === 0);
}

const sameReading = (a: RankedHypothesis, b: RankedHypothesis): boolean =>
  a.expectedV !== null &&
  b.expectedV !== null &&
  a.sdV !== null &&
  b.sdV !== null &&
  Math.abs(a.expectedV - b.expectedV) < 1e-6 &&
  Math.abs(a.sdV - b.sdV) < 1e-6;

function rank(posterior: Posterior, question: ReadingQuestion): RankedHypothesis[] {
  return posterior.hypotheses
    .map((h, i) => ({
      kind: h.kind,
      count: h.count,
      words: hypothesisWords(h, question),
      asExpected: h.asExpected,
      probability: posterior.probability[i]!,
      prior: h.prior,
      expectedV: h.kind === 'unexplained' ? null : posterior.expectedV[i]!,
      sdV: h.kind === 'unexplained' ? null : posterior.sdV[i]!,
    }))
    .sort((a, b) => b.probability - a.probability);
}

/** Each piece of knowledge left out once: what is the answer then? */
function helpOf(question: ReadingQuestion, full: Posterior): Help[] {
  const best = full.probability.indexOf(Math.max(...full.probability));
  const key = (p: Posterior, i: number): string => {
    const h = p.hypotheses[i]!;
    return `${h.kind} ${h.passing} ${h.inShutdown}`;
  };
  const compare = (what: Help['what'], less: ReadingQuestion): Help => {
    const without = posteriorOf(less);
    const at = new Map(without.probability.map((p, i) => [key(without, i), p]));
    let bits = 0;
    full.probability.forEach((p, i) => {
      if (p > 1e-9) bits += p * Math.log2(p / Math.max(1e-9, at.get(key(full, i)) ?? 1e-9));
    });
    return {
      what,
      without: at.get(key(full, best)) ?? 0,
      with: full.probability[best]!,
      bits: Math.max(0, bits),
    };
  };
  const helped: Help[] = [];
  if (question.siblings.length > 0) helped.push(compare('siblings', { ...question, siblings: [] }));
  if (question.conditions !== null) helped.push(compare('conditions', { ...question, conditions: null }));
  if (question.meter.mode === 'high_impedance')
    helped.push(compare('meter', { ...question, meter: { ...question.meter, mode: 'low_impedance' } }));
  if (question.unitType.kind !== 'shutdown_only' && question.heard > 0)
    helped.push(compare('roll_call', { ...question, heard: 0 }));
  return helped;
}

function check(question: ReadingQuestion): void {
  const { units, voltageV, meter } = question;
  if (!Number.isInteger(units) || units < 1 || units > 63)
    throw new RangeError(`units: ${units} is not a whole number from 1 to 63`);
  const volts: [string, number | null][] = [
    ['voltageV', voltageV],
    ['earth.positiveV', question.earth?.positiveV ?? null],
    ['earth.negativeV', question.earth?.negativeV ?? null],
    ...question.siblings.map((s, i): [string, number] => [`siblings[${i}].voltageV`, s.voltageV]),
  ];
  for (const [name, v] of volts)
    if (v !== null && !(Math.abs(v) <= 2000)) throw new RangeError(`${name}: ${v} V is not within ±2000 V`);
  for (const [i, s] of question.siblings.entries())
    if (!Number.isInteger(s.units) || s.units < 1 || s.units > 63)
      throw new RangeError(`siblings[${i}].units: ${s.units} is not a whole number from 1 to 63`);
  if (!(meter.sd > 0) || !(meter.relativeSd >= 0))
    throw new RangeError('meter: its uncertainty must be above 0 V and not negative');
}
