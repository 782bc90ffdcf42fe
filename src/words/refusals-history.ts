export const figureRefusals = {
  noDay: (day: string) => `${day} is no day`,
  otherCauses: 'Other causes',
  priceFromTaken: (day: string) =>
    `A price from ${day} is there already. Take it away first, or choose another day.`,
  priceTaken: 'A price from this day is there already.',
};

export const historyStreamRefusals = {
  othersImport: 'Other files are being imported at this moment. Try again in half a minute; nothing is lost.',
  inParts: 'Import it in parts, such as a year at a time.',
};

export const historyImportRefusals = {
  importedAlready: (file: string, day: string) =>
    `This file was imported already, as "${file}" on ${day}. Nothing is kept twice; take that import back first if it is to be read otherwise.`,
  inParts: 'Import it in parts, such as a year at a time.',
  tooManyRows: (most: number, remedy: string) => `The file has more than ${most} rows. ${remedy}`,
  tooManyReadings: (most: number, remedy: string) =>
    `There are more than ${most} readings in the file. ${remedy}`,
  noReading: 'No reading could be read from this file with these columns.',
  readsOtherwise: (
    readings: number,
    rows: number,
    leftOut: number,
    readingsShown: number,
    rowsShown: number,
    leftOutShown: number,
  ) =>
    `The server reads ${readings} readings from ${rows} rows and leaves ${leftOut} cells out; the page showed ${readingsShown}, ${rowsShown} and ${leftOutShown}. The as-built may have changed since: load the page again, and look at the file anew.`,
  takenBackAlready: 'This import was taken back already. Load the page again to see by whom.',
};

export const axisWords = {
  noSuchString: 'No such string. Check the link, or go back to the fleet.',
  unitsExchanged: (units: number) => `${units} units replaced or taken out`,
  unitReplaced: (position: number) => `Unit at ${position} replaced`,
  unitTakenOut: (position: number) => `Unit at ${position} taken out`,
  plannedWork: (reason: string) => `Planned work: ${reason}`,
};

export const explanationWords = {
  notJudgedYet: 'This string’s output was not judged yet: it is after the sunset of each day.',
};

export const historyWords = {
  noneAlike: (plane: string) => `No other string on the ${plane} is of its kind: compared with the model.`,
  noneAlikeNoSensor: (plane: string) =>
    `No other string on the ${plane} is of its kind: compared with the model, which needs an irradiance sensor in the plane for this.`,
  atSharedInput: (strings: number, quantity: string) =>
    `Measured at the input, which ${strings} strings share: their common ${quantity === 'voltage' ? 'voltage' : quantity === 'current' ? 'sum of currents' : 'sum of power'}.`,
  others: (plane: string) => `other strings on the ${plane}`,
  othersElse: (plane: string, model: string) =>
    `other strings on the ${plane}; where they tell nothing, ${model}`,
  wideBand: (model: string) => `${model}, so the band is wide`,
  datasheetUnderClearSky: 'the datasheet under a clear sky',
  sensorAndDatasheet: 'the irradiance sensor and the datasheet',
  atInput: 'Measured at the input: units of this type report nothing themselves.',
  meansOnly: 'Single reports are no longer kept for this day: means of 15 minutes are shown.',
  noSingleCurrent: 'A day has no single current: choose a day, a week or a month.',
  imported: 'Dashed grey: read from an imported file, not by Wakeline.',
  giveBothEnds: 'Give both ends of the part, the earlier one as "from".',
  giveBoth: 'give both, from before to',
};

export const loopWords = {
  noOutput: 'the units of this string do not measure their output',
};

export const momentWords = {
  others: (plane: string) => `the other strings on the ${plane}`,
  clearSkyAndDatasheet: 'a clear sky and the module’s datasheet',
  meansOnly: 'Single reports are no longer kept for this time: means of 15 minutes, states by their voltage.',
  meanOnly: 'Of this time only the string’s mean voltage over 15 minutes is kept.',
  nothingReported: 'Nothing was reported within three intervals before this moment.',
};

export const stringPageWords = {
  others: (plane: string) => `the other strings on the ${plane}`,
};
