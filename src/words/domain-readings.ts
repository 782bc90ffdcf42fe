import type { Hypothesis } from '../domain/readings/reading';

const units = (n: number): string => (n === 1 ? '1 unit' : `${n} units`);

/** What a reading can mean, as subject and verb: "3 of 14 units pass, the others are in shutdown". */
export const hypothesisTexts: Record<Hypothesis['kind'], (count: number, ofUnits: number) => string> = {
  all_in_shutdown: (_, n) => `All ${n} units are in shutdown`,
  all_passing: (_, n) => `All ${n} units pass their module's voltage`,
  some_passing: (count, n) =>
    `${count} of ${n} units ${count === 1 ? 'passes' : 'pass'}, the others are in shutdown`,
  unmated: (count) =>
    `${units(count)} without ${count === 1 ? 'its' : 'their'} module: not mated, or the module is dead`,
  wired_past_its_unit: () =>
    'A module is wired straight in, past its unit: this string can not shut down fully',
  reversed: () => 'The string is reversed at the meter or at its leads: do not connect it',
  one_reversed: () => 'One module is reversed within the string',
  substring_bypassed: (count) =>
    `${count === 1 ? 'A third' : 'Two thirds'} of one module's voltage is missing: bypassed cells`,
  open: () => 'A lead is open: the meter floats',
  two_in_series: () => 'Two strings are in series: do not connect them',
  unpowered: () => 'Too little light to power the units: this proves nothing, the string is live at sunrise',
  unexplained: () => 'Nothing that is considered here explains this reading',
};

export const interpretationSaid = {
  cantTell: (first: string, second: string) =>
    `Can't tell: ${first.toLowerCase()}, or ${second.toLowerCase()}`,
};

const noneHeard = 'the units were not heard yet: every one passes full voltage';

/** What to expect before the meter is put on. */
export const expectedStateSaid = {
  keepAlive: 'keep-alive is present: every unit passes',
  outOfTheBox: 'out of the box every unit passes',
  noKeepAlive: 'without keep-alive every unit is in shutdown',
  someUnheardInShutdown: (heard: number, unheard: number) =>
    heard === 0
      ? noneHeard
      : `${units(heard)} ${heard === 1 ? 'was heard and is' : 'were heard and are'} in shutdown; ${unheard} ${unheard === 1 ? 'was not heard and passes' : 'were not heard and pass'} full voltage`,
  allInShutdown: 'every unit was heard and is in shutdown',
  someUnheard: (heard: number, unheard: number) =>
    heard === 0
      ? noneHeard
      : `${units(heard)} heard and ${unheard} not heard yet: all ${heard + unheard} pass full voltage`,
  allReleased: 'every unit is released and passes',
  night: 'no voltage, for at night nothing powers the units',
};

/** What stands beside every reading that someone might act on. */
export const readingCautions = {
  reading:
    'Shutdown is not isolation: each module and its leads to its unit stay at module voltage. Isolate, lock out and prove dead with a rated meter before you touch anything; local code and the authority having jurisdiction come first; qualified people only.',
  litAtNight:
    'A voltage, though the light is entered as night: is that right? Enter the light that is there and judge again; until then treat the string as live.',
  rollCall: 'Units that have not answered the roll call do not obey the initiator: treat the string as live.',
};

/** The place of a fault to earth, after `from` modules of `units` from the negative end. */
const placeOf = (from: number, units: number): string =>
  from === 0
    ? 'at the negative end, before position 1'
    : from === units
      ? `at the positive end, after position ${units}`
      : `between positions ${from} and ${from + 1}`;

export const earthSaid = {
  tooLittle: 'The string shows too little voltage to tell anything about earth.',
  floats: 'To earth the string floats: no fault seen. That is no insulation test.',
  neither:
    'The readings to earth fit neither a sound string nor a clear fault: take both again, and wait until they settle.',
  takeBoth: 'One reading to earth is not enough: take both, + to earth and − to earth.',
  faultAt: (from: number, units: number) =>
    `A conductor touches earth ${placeOf(from, units)}. Do not connect the string.`,
  fault: 'A conductor of the string touches earth; the place can not be told. Do not connect the string.',
  faultUnlike:
    'A conductor of the string touches earth; the place can not be told, for its modules do not all give the same voltage. Do not connect the string.',
};
