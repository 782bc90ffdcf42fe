import { UNIT_KINDS } from '../../domain/equipment/unit-type';
import type { Help, Interpretation, RankedHypothesis } from '../../domain/readings/interpret';
import { expectedState, type ReadingQuestion } from '../../domain/readings/reading';
import { number, percent, volts } from '../../drawings/numbers';
import { chosen, type Place, type ReadingForm } from './form-choices';
import { KIND_LABELS } from './kind-labels';
import { SHEET_KEYS, SHEETS } from './sheets';
import { sharedReadingsWords } from '../../words/shared-readings';
import { capital } from '../../words/domain-counts';

/** An answer in plain words: what a person on a roof reads or is read. */

export const LIGHT_LABELS = {
  bright: sharedReadingsWords.bright,
  dull: sharedReadingsWords.dull,
  snow: sharedReadingsWords.snow,
  night: sharedReadingsWords.night,
} as const;
export const METER_LABELS = {
  high_impedance: sharedReadingsWords.ordinaryInput,
  low_impedance: sharedReadingsWords.lowImpedance,
} as const;
export const PLACE_LABELS = {
  between: sharedReadingsWords.to,
  positive: sharedReadingsWords.toEarth,
  negative: sharedReadingsWords.toEarth2,
} as const;

/** What commands the units, by kind: shutdown-only units know only the keep-alive. */
export function commandedLabels(kind: string): Record<'shutdown' | 'released' | 'unknown', string> {
  return kind === 'shutdown_only'
    ? {
        shutdown: sharedReadingsWords.keepAliveOff,
        released: sharedReadingsWords.on,
        unknown: sharedReadingsWords.notKnown,
      }
    : {
        shutdown: sharedReadingsWords.inShutdown,
        released: sharedReadingsWords.released,
        unknown: sharedReadingsWords.nobodyHasSaid,
      };
}

/** "14 units, shutdown-only, 108 half cells, about 410 W" */
export function stringWords(form: ReadingForm): string {
  const kind = KIND_LABELS[chosen(UNIT_KINDS, form.kind, 'shutdown_only')].toLowerCase();
  const sheet = SHEET_KEYS.find((key) => key === form.module);
  const units = form.units.trim();
  const count = /^\d+$/.test(units)
    ? sharedReadingsWords.countedUnitsUnit(Number(units))
    : sharedReadingsWords.units(units);
  return sharedReadingsWords.moduleOf(count, kind, sheet && SHEETS[sheet].name);
}

export const HOW_TO_MEASURE: Record<Place, string> = {
  between: sharedReadingsWords.openCircuitStringIsolated,
  positive: sharedReadingsWords.openCircuitStringIsolatedPositive,
  negative: sharedReadingsWords.openCircuitStringIsolatedNegative,
};

/** The tag over the answer. */
export function outcomeWords(answer: Interpretation): string {
  switch (answer.outcome) {
    case 'as_expected':
      return sharedReadingsWords.asExpected;
    case 'proves_nothing':
      return sharedReadingsWords.provesNothing;
    case 'finding':
      return sharedReadingsWords.notAsExpected;
    case 'cant_tell': {
      const fit = answer.likely.filter((h) => h.kind !== 'unexplained').length;
      return fit === 2
        ? sharedReadingsWords.cantTellTwoExplanations
        : sharedReadingsWords.cantTellSeveralExplanations;
    }
  }
}

export type Hue = 'petrol' | 'plum' | 'rust' | 'crimson' | 'slate';
/** Colour by what an explanation says of the units; crimson only where more pass than should. */
export function hueOf(h: RankedHypothesis, question: ReadingQuestion): Hue {
  const { passing } = expectedState(question);
  const passes =
    (h.kind === 'all_passing' && passing < question.units) ||
    (h.kind === 'some_passing' && h.count > passing) ||
    (h.kind === 'wired_past_its_unit' && passing < question.units);
  if (passes && question.commanded === 'shutdown') return 'crimson';
  switch (h.kind) {
    case 'all_in_shutdown':
      return h.asExpected || question.commanded !== 'released' ? 'plum' : 'rust';
    case 'all_passing':
      return 'petrol';
    case 'some_passing':
      return h.asExpected ? 'petrol' : 'rust';
    case 'unpowered':
    case 'unexplained':
      return 'slate';
    default:
      return 'rust';
  }
}

/** A chance that never claims to be certain. */
export function chance(probability: number): string {
  if (probability >= 0.995) return sharedReadingsWords.over;
  if (probability < 0.005) return sharedReadingsWords.under;
  return percent(probability);
}

/** Explanations worth a line: the likely ones, and the expected state even if it is not among them. */
export function shownHypotheses(answer: Interpretation): RankedHypothesis[] {
  const shown = answer.likely.slice(0, 6);
  const expected = answer.hypotheses.find((h) => h.asExpected);
  return expected && !shown.includes(expected) ? [...shown, expected] : shown;
}

/** "14 units in shutdown should give 7.5 to 9.3 V" with two standard deviations; null: nothing is expected. */
export function expectedWords(answer: Interpretation): { words: string; from: number; to: number } | null {
  const h = answer.hypotheses.find((item) => item.asExpected && item.kind !== 'unpowered');
  if (!h || h.expectedV === null || h.sdV === null) return null;
  const from = h.expectedV - 2 * h.sdV;
  const to = h.expectedV + 2 * h.sdV;
  const digits = Math.abs(to) < 20 ? 1 : 0;
  return { words: sharedReadingsWords.fromToDigitsV(from, digits, to), from, to };
}

/** What the answer rests on and what would make it firmer. */
export function reasoning(answer: Interpretation, question: ReadingQuestion): string[] {
  const { units, unitType, meter, siblings, voltageV } = question;
  const sentences = [sharedReadingsWords.expected(answer.expected)];
  const band = expectedWords(answer);
  if (band) sentences.push(sharedReadingsWords.thatWouldRead(band.words));
  const { passing } = expectedState(question);
  const nominal = unitType.shutdownVoltage.nominal;
  if (passing === 0 && Math.abs(voltageV) < 3 * units * unitType.shutdownVoltage.max)
    sentences.push(
      sharedReadingsWords.oneUnitInShutdown(
        quantityV(nominal),
        quantityV(unitType.shutdownVoltage.min, 2),
        quantityV(unitType.shutdownVoltage.max, 2),
      ),
    );
  if (obeysUnasked(answer, question)) sentences.push(sharedReadingsWords.checkTypeAndRollCall);
  if (answer.outcome === 'cant_tell' && siblings.length === 0)
    sentences.push(sharedReadingsWords.measureAStringOf);
  if (answer.outcome === 'cant_tell' && siblings.length > 0)
    sentences.push(sharedReadingsWords.measureAgainBeforeAnything);
  if (meter.mode === 'low_impedance' && passing < units)
    sentences.push(sharedReadingsWords.aLowImpedanceInput);
  if (voltageV < 0) sentences.push(sharedReadingsWords.theReadingIsNegative);
  return sentences;
}
/** Whether units seem to be in shutdown that nothing has spoken to and that should pass by their type. */
function obeysUnasked({ outcome, hypotheses: [best] }: Interpretation, question: ReadingQuestion): boolean {
  const { unheardPassing } = expectedState(question);
  if (outcome !== 'finding' || best === undefined) return false;
  return (
    (best.kind === 'all_in_shutdown' && unheardPassing > 0) ||
    (best.kind === 'some_passing' && best.count < unheardPassing)
  );
}
const quantityV = (v: number, digits = 1): string => `${number(v, digits)}\u00a0V`;

/** Whether the units follow the initiator, as far as type, command and roll call say. */
export function initiatorWords(answer: Interpretation, question: ReadingQuestion): string {
  const best = answer.hypotheses[0];
  const contradicted = best !== undefined && hueOf(best, question) === 'crimson' && best.probability > 0.2;
  if (contradicted) return sharedReadingsWords.theReadingSpeaksAgainst;
  if (answer.obeysInitiator === false) return sharedReadingsWords.noNoneOfIts;
  if (answer.obeysInitiator === null) return sharedReadingsWords.onlySomeUnitsThat;
  return sharedReadingsWords.byTheTypeEntered;
}

const HELP_NAMES: Record<Help['what'], string> = {
  siblings: sharedReadingsWords.readingsOfOtherStrings,
  conditions: sharedReadingsWords.measuredLightAndTemperature,
  roll_call: sharedReadingsWords.theRollCall,
  meter: sharedReadingsWords.anOrdinaryMeterInput,
};
/** "Readings of other strings: from 58 % to 97 % for the first explanation". */
export function helpWords(help: Help): { name: string; words: string } {
  const name = HELP_NAMES[help.what];
  if (help.bits < 0.02) return { name, words: sharedReadingsWords.changedNothingWorthNaming };
  return {
    name,
    words: sharedReadingsWords.theFirstExplanationStands(chance(help.with), chance(help.without), help.bits),
  };
}

/** The bold beginning of a caution and the rest of it. */
export function cautionParts(caution: string): { strong: string; rest: string } {
  const at = caution.indexOf(': ');
  if (at < 0) return { strong: caution, rest: '' };
  const rest = caution.slice(at + 2);
  return { strong: `${caution.slice(0, at)}.`, rest: capital(rest) };
}

/** What is read aloud: the answer first, the cautions always. */
export function aloud(answer: Interpretation, question: ReadingQuestion): string {
  const spokenVolts = sharedReadingsWords.replaceVolts(
    sharedReadingsWords.spokenMinus(number(question.voltageV, 1)),
  );
  const ranked = answer.likely
    .filter((h) => h.kind !== 'unexplained')
    .slice(0, 2)
    .map((h) => `${h.words}: ${sharedReadingsWords.spokenPercent(chance(h.probability))}.`);
  return [
    spokenVolts,
    `${outcomeWords(answer)}.`,
    ...ranked,
    answer.earth?.words ?? '',
    sharedReadingsWords.caution,
    ...answer.cautions,
  ]
    .filter(Boolean)
    .join(' ');
}

/** The page's title in the browser's list of pages. */
export const titleOf = (question: ReadingQuestion | null, answer: Interpretation | null): string =>
  question && answer
    ? `${volts(question.voltageV)}: ${outcomeWords(answer).toLowerCase()}`
    : sharedReadingsWords.tryAReading;
