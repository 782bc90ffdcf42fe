import { counted, number, percent } from '../drawings/numbers';

export const answerSheet = {
  typeWhatTheMeter: 'Type what the meter shows between + and −',
  somethingHasToBe: 'Something has to be put right first',
  whatItCanMean:
    'What it can mean is worked out at once, here in the browser. A negative reading is a finding, not a mistake.',
  whatItMeans: 'What it means: ',
  expectedWas: 'Expected was:',
  theBarsStandFor: 'The bars stand for the units: how many, not which. A meter tells no positions.',
  readingsToEarth: 'Readings to earth',
  chanceOfFaultTo: (probability: string) => `Chance of a fault to earth: ${probability}.`,
  doesItFollowThe: 'Does it follow the initiator?',
  whatEachThingKnown: 'What each thing known brought',
};

export const meterPanel = {
  nextPlace: (place: string) => `Next: ${place}`,
  done: 'Done',
  kindOfReading: 'Kind of reading',
  whatIsCommanded: 'What is commanded',
  keepAlive: 'Keep-alive',
  lightOnTheModules: 'Light on the modules',
  unitsThatHaveAnswered: 'Units that have answered the roll call',
  aUnitThatNothing: "A unit that nothing has spoken to yet passes its module's full voltage.",
  changeTheSign: 'Change the sign',
  numberPad: 'Number pad',
  readingVolts: (place: string) => `Reading ${place}, volts`,
  meterInput: 'Meter input',
};

export const numberPad = {
  done: 'Done',
  numberPad: 'Number pad',
  decimalPoint: 'Decimal point',
  deleteTheLastDigit: 'Delete the last digit',
  clear: 'Clear',
};

export const readAloud = {
  thisDeviceHasNo: 'This device has no voice for it.',
  theLinkIsCopied: 'The link is copied.',
  theBrowserDoesNot: 'The browser does not let us copy: take the address from its bar.',
  stopReading: 'Stop reading',
  readItAloud: 'Read it aloud',
  copyTheLink: 'Copy the link',
};

export const readingScale = {
  expected: (expected: string) => `expected: ${expected}`,
};

export const sharedReadingsForm = {
  unitsInTheString: 'Units in the string',
  unitsThatHaveAnswered: 'Units that have answered',
  readingTo: 'Reading + to −',
  readingToEarth: 'Reading + to earth',
  readingToEarth2: 'Reading − to earth',
  unitsOfTheOther: 'Units of the other string',
  readingOfTheOther: 'Reading of the other string',
  openCircuitVoltage: 'Open-circuit voltage',
  temperatureCoefficient: 'Temperature coefficient',
  cellsInSeries: 'Cells in series',
  bypassDiodes: 'Bypass diodes',
  ownValues: 'own values',
  lightOnTheModules: 'Light on the modules',
  cellTemperature: 'Cell temperature',
  lightAndCellTemperature: (missing: string) =>
    `Light and cell temperature count together: type ${missing === 'poa' ? 'the light' : 'the temperature'} too, or empty the other.`,
};

export const sharedReadingsScale = {
  oneUnitInShutdown: 'one unit in shutdown',
  aboutOneModuleIn: 'about one module in bright light',
  stepIs: (meaning: string, step: number) =>
    `a step is ${meaning}, ${number(step, step < 10 ? 1 : 0)}\u00a0V`,
};

export const sharedReadingsSheets = {
  n60CellsAbout330: '60 cells, about 330 W',
  n108HalfCellsAbout: '108 half cells, about 410 W',
  n144HalfCellsAbout: '144 half cells, about 550 W',
};

export const sharedReadingsKinds = {
  shutdownOnly: 'Shutdown-only',
  monitored: 'Monitored',
  optimizing: 'Optimizing',
};

export const sharedReadingsWords = {
  spokenPercent: (percent: string) => percent.replace('\u00a0%', ' per cent'),
  spokenMinus: (figure: string) => figure.replace('−', 'minus '),
  bright: 'bright',
  dull: 'dull',
  snow: 'snow',
  night: 'night',
  ordinaryInput: 'ordinary input',
  lowImpedance: 'low impedance',
  to: '+ to −',
  toEarth: '+ to earth',
  toEarth2: '− to earth',
  keepAliveOff: 'keep-alive off',
  on: 'on',
  notKnown: 'not known',
  inShutdown: 'in shutdown',
  released: 'released',
  nobodyHasSaid: 'nobody has said',
  countedUnitsUnit: (units: number) => counted(units, 'unit'),
  units: (units: string) => `${units || '?'} units`,
  moduleOf: (count: string, kind: string, sheet: string | undefined) =>
    `${count}, ${kind}; module of ${sheet ?? 'own values'}`,
  openCircuitStringIsolated: 'Open circuit, string isolated, positive to negative.',
  openCircuitStringIsolatedPositive:
    'Open circuit, string isolated, positive to earth. Wait until it settles.',
  openCircuitStringIsolatedNegative:
    'Open circuit, string isolated, negative to earth. Wait until it settles.',
  asExpected: 'As expected',
  provesNothing: 'Proves nothing',
  notAsExpected: 'Not as expected',
  cantTellTwoExplanations: "Can't tell: two explanations fit",
  cantTellSeveralExplanations: "Can't tell: several explanations fit",
  over: `over ${percent(0.99)}`,
  under: `under ${percent(0.01)}`,
  fromToDigitsV: (from: number, digits: number, to: number) =>
    `${number(from, digits)} to ${number(to, digits)} V`,
  expected: (expected: string) => `Expected: ${expected}.`,
  thatWouldRead: (band: string) => `That would read ${band}.`,
  oneUnitInShutdown: (nominal: string, min: string, max: string) =>
    `One unit in shutdown is worth ${nominal}, ${min} to ${max} by its type.`,
  measureAStringOf:
    'Measure a string of the same types beside it, now: it shows what one unit gives in this light.',
  checkTypeAndRollCall:
    'Units that nothing has spoken to yet should pass by the type entered, and these seem to be in shutdown: check the unit type and the roll call, then measure again.',
  measureAgainBeforeAnything: 'Measure again before anything is changed.',
  aLowImpedanceInput:
    'A low-impedance input pulls units in shutdown down: measure again with an ordinary one.',
  theReadingIsNegative:
    'The reading is negative: check the leads at the meter first, then the marking of the home run.',
  theReadingSpeaksAgainst:
    'The reading speaks against it: units seem to pass though shutdown is commanded. Treat the string as live.',
  noNoneOfIts:
    'No. None of its units has spoken to anything yet, so none follows the initiator. Treat the string as live.',
  onlySomeUnitsThat:
    'Only some: units that have not answered do not follow the initiator. Treat the string as live.',
  byTheTypeEntered:
    'By the type entered its units follow the initiator. One reading does not show that they do: that takes a shutdown test.',
  readingsOfOtherStrings: 'Readings of other strings',
  measuredLightAndTemperature: 'Measured light and temperature',
  theRollCall: 'The roll call',
  anOrdinaryMeterInput: 'An ordinary meter input, not a low-impedance one',
  changedNothingWorthNaming: 'changed nothing worth naming',
  theFirstExplanationStands: (withSaid: string, without: string, bits: number) =>
    `the first explanation stands at ${withSaid} with it, ${without} without (${number(bits, 1)} bit)`,
  replaceVolts: (replace: string) => `${replace} volts.`,
  caution: 'Caution.',
  tryAReading: 'Try a reading',
};
