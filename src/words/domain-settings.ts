import type { ThresholdKey } from '../domain/settings/thresholds';

interface ThresholdTexts {
  name: string;
  changes: string;
  defaultWords: string;
  source: string;
}
/** What an organisation may set of the judgements: its name, what a higher or lower figure does, where it comes from. */
export const thresholdTexts: Record<ThresholdKey, ThresholdTexts> = {
  stuckGraceS: {
    name: 'Grace before a unit is called stuck',
    changes:
      'Longer: slow wake-ups are no longer called stuck, and true ones are named later. Whether a unit does not shut down is never touched by this.',
    defaultWords: 'two report intervals, 30 s at least',
    source: 'from experience',
  },
  lowOutputLoss: {
    name: 'Loss from which a string is low',
    changes: 'Higher: fewer strings on the list, small losses stay unnamed. Lower: more of them are chance.',
    defaultWords: '5 %',
    source:
      'from experience; the limit of chance (modified z of 3.5, Iglewicz and Hoaglin 1993) always holds beside it',
  },
  lowOutputDays: {
    name: 'Low days out of five that make a string low',
    changes: 'More: later and surer. Fewer: sooner, and passing shade counts.',
    defaultWords: '3',
    source: 'from experience',
  },
  weakUnitLoss: {
    name: 'Loss from which one module is weak',
    changes: 'Higher: only dead sub-strings and the like are named.',
    defaultWords: '6 %',
    source: 'from experience',
  },
  loopExcessOhm: {
    name: 'Resistance in a string that is worth a look',
    changes:
      'Higher: long cables raise no finding; a warm connector is found later. At 10 A, 0.1 Ω makes 10 W in one place.',
    defaultWords: '0.1 Ω',
    source: 'P = I²R; from experience',
  },
  incompleteBelow: {
    name: 'Data below which a day is marked as incomplete',
    changes: 'Higher: more days are marked in the calendars. No figure changes.',
    defaultWords: '90 %',
    source: 'common practice',
  },
};
export const thresholdUnits = { days: 'days' };
