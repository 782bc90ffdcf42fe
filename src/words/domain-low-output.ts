import { isOne } from './language';

/** What is said of a string's output, of what a low one looks like, and what else that could be. */

export const lowOutputSaid = {
  sourceSiblings: (lossMin: number, byStandard: boolean, daysLow: number) =>
    `modified z-score of −3.5 (Iglewicz & Hoaglin 1993) and ${Math.round(lossMin * 100)} % (${byStandard ? 'IEC 62446-1' : 'set by the organisation'}), on ${daysLow} of 5 days`,
  sourceModel: (daysLow: number) =>
    `model: 3.5 standard deviations of what is usual, on ${daysLow} of 5 days`,
  tooFewDays: (string: string, days: number, needed: number) =>
    `${string}: ${days} days with enough sun left to compare, ${needed} are needed`,
  makesWhatItShould: (string: string) => `${string} makes what it should`,
  lowOnTooFew: (string: string, low: number, looked: number, needed: number) =>
    `${string} was low on ${low} of ${looked} days; ${needed} make a finding`,
  /** @param looks one of `signatureSaid` */
  makesLess: (string: string, share: number, bySiblings: boolean, looks: string) =>
    `${string} makes ${Math.round(100 * share)} % less than ${bySiblings ? 'the strings of its plane' : 'its modules should'}: ${looks}`,
};

/** After a colon: what a low string looks like. */
export const signatureSaid = {
  noCurrent: 'it carries no current at all',
  shade: (fromDegrees: number, toDegrees: number) =>
    `it is low whenever the sun stands between ${fromDegrees}° and ${toDegrees}°: shade`,
  unitsMissing: (missing: number, units: number) =>
    `the voltage of ${missing} of ${units} modules is missing and the current is right: ${isOne(missing) ? 'a unit' : 'units'} in shutdown or not mated`,
  /** @param parts sub-strings bypassed, of the `groups` of a module */
  bypassed: (parts: number, groups: number) => {
    const part = isOne(parts) ? 'a' : String(parts);
    const what = isOne(parts) ? (groups === 3 ? 'third' : 'part') : groups === 3 ? 'thirds' : 'parts';
    return `${part} ${what}${groups === 3 ? '' : ` in ${groups}`} of one module's voltage is missing and the current is right: bypassed cells`;
  },
  soiling: 'it fell day by day and came back with the rain: dirt',
  currentLow: 'its current is low and its voltage right',
  unclear: 'voltage and current fit no single cause',
};

export const signatureCouldBe = {
  noCurrent: [
    'its load-break device is open',
    'a fuse has blown',
    'a connector or a lead is open',
    'its inverter input is switched off',
  ],
  shade: ['dirt or snow that covers some modules in that light'],
  unitsMissing: [
    'a unit stuck in shutdown',
    'a module not mated to its unit',
    'fewer modules than the as-built says',
  ],
  bypassed: ['a failed bypass diode', 'cracked cells', 'shade on one row of cells all day'],
  soiling: ['pollen', 'bird droppings'],
  currentLow: ['even dirt on its modules', 'modules of another kind or age'],
  currentLowOfInput: [
    'even dirt on its modules',
    'modules of another kind or age',
    'one of the strings on this input is disconnected or held down by units in shutdown',
  ],
  unclear: [
    'several causes at once',
    'a unit that works on and off',
    'a tracking fault of the inverter input',
  ],
};
