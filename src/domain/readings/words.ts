import type { Hypothesis, ReadingQuestion } from './reading';

/** Plain English for what a reading can mean. */

const units = (n: number): string => (n === 1 ? '1 unit' : `${n} units`);

/** A hypothesis as a sentence's subject and verb: "3 of 14 units pass, the others are in shutdown". */
export function hypothesisWords(h: Hypothesis, question: ReadingQuestion): string {
  const n = question.units;
  switch (h.kind) {
    case 'all_in_shutdown':
      return `All ${n} units are in shutdown`;
    case 'all_passing':
      return `All ${n} units pass their module's voltage`;
    case 'some_passing':
      return `${h.count} of ${n} units ${h.count === 1 ? 'passes' : 'pass'}, the others are in shutdown`;
    case 'unmated':
      return `${units(h.count)} without ${h.count === 1 ? 'its' : 'their'} module: not mated, or the module is dead`;
    case 'wired_past_its_unit':
      return 'A module is wired straight in, past its unit: this string can not shut down fully';
    case 'reversed':
      return 'The string is reversed at the meter or at its leads: do not connect it';
    case 'one_reversed':
      return 'One module is reversed within the string';
    case 'substring_bypassed':
      return `${h.count === 1 ? 'A third' : 'Two thirds'} of one module's voltage is missing: bypassed cells`;
    case 'open':
      return 'A lead is open: the meter floats';
    case 'two_in_series':
      return 'Two strings are in series: do not connect them';
    case 'unpowered':
      return 'Too little light to power the units: this proves nothing, the string is live at sunrise';
    case 'unexplained':
      return 'Nothing that is considered here explains this reading';
  }
}

/** What stands beside every reading that someone might act on. */
export const READING_CAUTION =
  'Shutdown is not isolation: each module and its leads to its unit stay at module voltage. Isolate, lock out and prove dead with a rated meter before you touch anything; local code and the authority having jurisdiction come first; qualified people only.';
export const ROLL_CALL_CAUTION =
  'Units that have not answered the roll call do not obey the initiator: treat the string as live.';
