export const knownMore = {
  doYouKnowMore: 'Do you know more?',
  addIt: 'Add it',
  otherStringsOfThe: 'Other strings of the same types, read under the same light',
  units: 'Units',
  unitsOfOtherString: (i: number) => `Units of other string ${i + 1}`,
  reading: 'Reading',
  readingOfOtherString: (i: number) => `Reading of other string ${i + 1}, volts`,
  takeOtherStringOut: (i: number) => `Take other string ${i + 1} out`,
  addAString: 'Add a string',
  measuredNow: 'Measured now',
  lightOnTheModules: 'Light on the modules',
  cellTemperature: 'Cell temperature',
};

export const stringPanel = {
  openCircuitVoltageAt: 'Open-circuit voltage at STC',
  itsChangeWithTemperature: 'Its change with temperature',
  cellsInSeries: 'Cells in series',
  bypassDiodes: 'Bypass diodes',
  change: 'Change',
  kindOfUnit: 'Kind of unit',
  unitsInTheString: 'Units in the string',
  module: 'Module',
  typicalKeyVocRefV: (key: string, vocRef: number) => `Typical, ${key} (${vocRef} V)`,
  ownValuesFromIts: 'Own values, from its datasheet',
  openCircuitVoltageAnd: 'Open-circuit voltage and cells decide; a like sheet is near enough.',
};

export const tryReading = {
  questionWakeline: (question: string) => `${question} · Wakeline`,
  whatDoesTheMeter: 'What does the meter say?',
  sayWhatItMeans: 'Say what it means',
};
