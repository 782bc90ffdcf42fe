import { amperes, counted, number, power, quantity, volts } from '../drawings/numbers';

export const curveSheet = {
  lessLight: 'Less light',
  warmerCells: 'Warmer cells',
  fitsWell: 'Fits well',
  pointsFitCoefficientsDont: 'Points fit, coefficients don’t',
  fits: 'Fits',
  doesNotFit: 'Does not fit',
  theCurveOfThis: 'The curve of this sheet',
  theCurveAppearsWhen: 'The curve appears when its figures are there',
  ofToGoThe: (reading: number, curveKeys: number) =>
    `${reading} of ${curveKeys} to go: the four points, the three coefficients, cells, bypass groups and the operating temperature.`,
  thePointsCantBe: 'The points can’t be of one module: see the marked field.',
  conditions: 'Conditions',
  currentOverVoltageRings: (sweep: string) =>
    `Current over voltage, ${sweep === 'light' ? 'at 1000 to 200 W/m² and 25 °C' : 'at 0 to 75 °C and 1000 W/m²'}; rings are the datasheet’s points`,
  powerOverVoltageUnder: (pmp: string) => `Power over voltage under the same conditions${pmp}`,
  eachPrintedFigureBeside: 'Each printed figure beside the one that the curve has',
  figure: 'Figure',
  sheet: 'Sheet',
  curve: 'Curve',
  offBy: 'Off by',
  how: 'How',
  singleDiodeModelDe: (ideality: number, resistanceSeries: number, resistanceShuntRef: number) =>
    `Single-diode model (De Soto 2006) from the sheet alone: ideality ${number(ideality, 2)}, series resistance ${number(resistanceSeries, 2)} Ω, shunt ${number(resistanceShuntRef)} Ω. Rings: the sheet’s points.`,
  atStc: (pmp: number) => `; ${power(pmp)} at STC`,
};

export const equipmentListWords = {
  current: 'Current',
  archived: 'Archived',
  all: 'All',
  familiesOfEquipment: 'Families of equipment',
  enterFamily: (family: string, family2: string) => `Enter ${family === 'inverters' ? 'an' : 'a'} ${family2}`,
  importAFile: 'Import a file',
  rowsOfItems: (rows: number, items: number) => `${number(rows)} of ${number(items)}`,
  filterByName: (family: string) => `Filter ${family.toLowerCase()} by name`,
  filterByName2: 'Filter by name',
  archivedTypes: 'Archived types',
  ofTheCatalogueWith: (family: string) => `${family} of the catalogue with their main figures and use`,
  noYet: (family: string) => `No ${family} yet`,
  noMatches: (family: string) => `No ${family} matches`,
  showAll: 'Show all',
  enterTheFirstOr: 'Enter the first, or import a file.',
  anotherWordMayOr: 'Another word may, or look among the archived.',
};

export const formField = {
  minToMaxUnit: (min: number, max: number, unit: string) => `${min} to ${max}${unit ? ` ${unit}` : ''}`,
  savedBySomebodyElse: (theirs: string) => `Saved by somebody else: ${theirs || 'empty'}`,
  notEntered: 'Not entered',
  nameArchived: (name: string) => `${name} (archived)`,
};

export const pairForm = {
  choose: 'Choose',
  chooseAType: 'Choose a type.',
  oneHalf: 'One half',
  theOtherHalf: 'The other half',
  document: 'Document',
  itsTitleAndNumber: 'Its title and number, and who issued it. Both makers should stand by it.',
  editionOrDate: 'Edition or date',
  pageOrTable: 'Page or table',
  note: 'Note',
  conditionsThatItNames: 'Conditions that it names: cable, tool, temperature.',
  theDocumentItself: 'The document itself',
  aPdfOr: 'A PDF or a picture, at most 25 MB. Without it the record says only where to find it.',
  thePairIsRecorded: 'The pair is recorded, its document is not here yet',
  notRecorded: 'Not recorded',
  sendingTheDocument: (round: number) => `Sending the document: ${round} %`,
  theDocumentIsBeing: 'The document is being read…',
  recording: 'Recording…',
  sendTheDocumentAgain: 'Send the document again',
  recordThePair: 'Record the pair',
  leaveItWithout: 'Leave it without',
};

export const pairsSheet = {
  documentedPairsOfDifferent: 'Documented pairs of different connectors',
  whereAStringMates:
    'Where a string mates two different types and no pair stands here, its install check fails as a fire risk.',
  pairsOfConnectorTypes: 'Pairs of connector types that are documented as intermatable',
  pair: 'Pair',
  firstWithSecond: (first: string, second: string) => `${first} with ${second}`,
  evidence: 'Evidence',
  recordedBy: 'Recorded by',
  state: 'State',
  ended: 'Ended',
  inForce: 'In force',
  end: 'End',
  onlyIdenticalConnectorsMay: 'Only identical connectors may be mated.',
  noPairIsDocumented: 'No pair is documented',
  recordADocumentedPair: 'Record a documented pair',
  aManagerRecordsPairs: 'A manager records pairs and ends them.',
  endThisPair: 'End this pair',
  fromNowOnAnd: (first: string, second: string) =>
    `From now on ${first} and ${second} count as not documented: where they are mated, design and install checks name a fire risk. The record stays to be seen.`,
  notEnded: 'Not ended',
  endThePair: 'End the pair',
};

export const typePage = {
  equipment: 'Equipment',
  aNewFamily: (family: string) => `A new ${family}`,
  restore: 'Restore',
  archive: 'Archive',
  itCantBeChosen: 'It can’t be chosen for new strings. What rests on it keeps resting on it.',
  thisTypeIsArchived: 'This type is archived',
  typeWhatTheDatasheet:
    'Type what the datasheet says at STC. The curve that follows, and how well it fits, is drawn as you type.',
  chooseAKindIt:
    'Choose a kind: it fills the form with what is usual. Then change what the maker’s sheet says otherwise.',
  typeMakerAndType: 'Type maker and type as they are embossed on the connector.',
  typeTheDcSide:
    'Type the DC side of the sheet: limits of one input, and the window in which it finds the maximum power.',
  notUsedYet: 'Not used yet',
  usedBy: (item: string) => `Used by ${item}`,
  lastChangedBy: (changed: string) => ` Last changed by ${changed}.`,
  worthASecondLook: 'Worth a second look',
  toDecide: (open: number) => `${open} to decide`,
  theSheetSaysSo: 'The sheet says so: keep it',
  notSaved: 'Not saved',
  isSaved: (name: string) => `${name} is saved`,
  backToTheList: 'Back to the list',
  somebodyElseSavedThis: 'Somebody else saved this type first',
  takeTheirs: 'Take theirs',
  saveMineOverIt: 'Save mine over it',
  saving: 'Saving…',
  saveTheChange: 'Save the change',
  saveThe: (family: string) => `Save the ${family}`,
  notCompleteYet: (faults: number) =>
    `${faults} ${faults === 1 ? 'field is' : 'fields are'} not complete yet.`,
  decideWhatIsWorth: 'Decide what is worth a second look, then save.',
};

export const equipmentFit = {
  roles: { exact: 'met exactly', fitted: 'fitted', follows: 'follows' },
  /** What stands out, in the words of the table. */
  remark: (remark: string) => remark.replace('gammaPmp', 'pmp per K').replace('betaVoc', 'voc per K'),
  oneModuleCanHave: 'One module can have all of these values: the curve meets the sheet.',
  theCurveMeetsThe: 'The curve meets the points of the sheet, but what follows from it differs:',
  theCurveComesClose:
    'The curve comes close to the sheet; the small differences are usual for rounded figures.',
  noSingleModuleHas: 'No single module has all of these values: check the marked ones against the sheet.',
  vocPerK: 'voc per K',
  pmpPerK: 'pmp per K',
};

export const equipmentListColumns = {
  vocIsc: (row: number, row2: null | number, row3: null | number) =>
    `${power(row)}, voc ${volts(row2)}, isc ${amperes(row3)}`,
  inShutdown: (row: string, row2: null | number) => `${row}, ${quantity(row2, 'V', 2)} in shutdown`,
  power: 'Power',
  vocPerK: 'Voc per K',
  connector: 'Connector',
  notEntered: 'not entered',
  kind: 'Kind',
  inShutdown2: 'In shutdown',
  inputUpTo: 'Input up to',
  currentUpTo: 'Current up to',
  insulationTest: 'Insulation test',
  noneAllowed: 'none allowed',
  maker: 'Maker',
  type: 'Type',
  upTo: 'Up to',
  acPower: 'AC power',
  inputs: 'Inputs',
  dcUpTo: 'DC up to',
  mpptWindow: 'MPPT window',
  rowToRow: (row: null | number, row2: null | number) => `${number(row)} to ${volts(row2)}`,
  iscOfOneInput: 'Isc of one input',
  name: 'Name',
  archived: 'Archived',
  inUse: 'In use',
  countedTypesType: (types: number) => counted(types, 'type'),
  countedStringsString: (strings: number) => counted(strings, 'string'),
};
