import { amperes, percent } from '../drawings/numbers';

export const confirm = {
  sayWhatYouRead: 'Say what you read or saw on the module: its label, its place.',
  sayWhyThisChanges: 'Say why this changes. It stays in the history.',
  confirmThatTheLabels: 'Confirm that the labels were read on the roof.',
  whatYouReadOn: 'What you read on the module',
  theLabelAsIt:
    'The label as it stands there, and where: “label reads …78B, upper row, second from the gable”.',
  why: 'Why',
  itStaysInThe: 'It stays in the history.',
  itDidNotWork: 'It did not work',
  writing: 'Writing …',
  cancel: 'Cancel',
};

export const placeDialog = {
  nothingSaysWhereIt:
    'Nothing says where it sits: no string of its gateway lacks a unit, and no serial here is near to it. It may be a spare, or a neighbour’s.',
  whatSpeaksForA: 'What speaks for a place',
  positionPosition: (position: number) => `, position ${position}`,
  positionNotKnown: ' (position not known)',
  takeStringName: (stringName: string) => `Take ${stringName}`,
  chooseTheStringAnd: 'Choose the string and the position where the module lies.',
  typeTheSerialOf: 'Type the serial of the new unit as its label has it.',
  placeSerial: (serial: string) => `Place ${serial}`,
  replaceAUnit: 'Replace a unit',
  heardBy: (gateway: string) => `Heard by ${gateway}`,
  whereItLiesOnly: '. Where it lies only its label on the roof says.',
  serialOfTheNew: 'Serial of the new unit',
  asItsLabelHas: 'As its label has it. The old unit’s life stays in the history.',
  whereItLies: 'Where it lies',
  hasNoUnitOn: (seat: string, roofPlace: string) => `${seat} has no unit on the as-built. ${roofPlace}`,
  hasWhichAnswersFrom: (seat: string, old: string) =>
    `${seat} has ${old}, which answers from somewhere on this roof. If it lies elsewhere, exchange the two instead.`,
  hasWhichNobodyHas: (seat: string, old: string, roofPlace: string) =>
    `${seat} has ${old}, which nobody has heard. It is taken out of the slot, and stays in the history. ${roofPlace}`,
  haveReadOnThe: (serial: string) => `I have read ${serial} on the label of the module at this place.`,
  iHaveReadThis: 'I have read this serial on the label of the module at this place.',
  placeIt: (seat: string) => `Place it${seat}`,
  replaceOldSeat: (old: string, seat: string) => `Replace ${old}${seat}`,
  atSeat: (seat: string) => ` at ${seat}`,
};

export const slotPicker = {
  labelString: (label: string) => `${label}: string`,
  string: 'String',
  labelPosition: (label: string) => `${label}: position`,
  positionFrom: 'Position, from −',
  withoutAUnitThat: 'Without a unit that is heard',
  replacingAUnitThat: 'Replacing a unit that is heard',
};

export const swapDialog = {
  noCurrentToCompare: 'no current to compare',
  fromItsString: (share: number) => `${percent(share, 1)} from its string`,
  noUnit: 'no unit',
  roofPlaceWhichCarriesTypical: (roofPlace: string, which: string, typical: null | number) =>
    `${roofPlace || 'place not recorded'}; ${which} carries ${amperes(typical)}`,
  nowOnTheAs: 'Now on the as-built',
  afterTheChange: 'After the change',
  chooseAStringAnd: 'Choose a string and a position for both.',
  chooseTwoDifferentSlots: 'Choose two different slots.',
  neitherSlotHasA: 'Neither slot has a unit.',
  exchangeTwoUnitsOn: 'Exchange two units on the as-built',
  thisChangesTheDrawing:
    'This changes the drawing, not the roof. Go there first: read both labels where the modules lie.',
  oneSlot: 'One slot',
  theOtherSlot: 'The other slot',
  iHaveReadBoth: 'I have read both labels on the roof, and they stand as this change says.',
  moveTheUnit: 'Move the unit',
  exchangeTheTwoUnits: 'Exchange the two units',
};

export const placementsEvidence = {
  noUnit: (position: number) => `${position} · no unit`,
  unheard: ', unheard',
  silent: ', silent',
};

export const placementsSuspects = {
  carriesTheCurrentOf: (a: string, apartOwn: null | number, steps: number) =>
    `${a} carries the current of no string here (${percent(apartOwn, 1)} from its own over ${steps} reports). Its measurement may be wrong.`,
  apartOverReportsAgainst: (apartOther: null | number, steps: number, apartOwn: null | number) =>
    `${percent(apartOther, 1)} apart over ${steps} reports, against ${percent(apartOwn, 1)} from its own`,
  otherStringsFitAlike: ' Other strings fit alike: only isolating one decides.',
  andExchangedEachCarries: (a: string, b: string, certain: boolean, a2: string, b2: string, alike: string) =>
    `${a} and ${b} ${certain ? 'look' : 'may be'} exchanged: each carries a current like the other string’s (${a2}; ${b2}).${alike}`,
  carriesTheCurrentOfWhich: (a: string, otherString: null | string, a2: string) =>
    `${a} carries the current of ${otherString} (${a2}). Which unit belongs there the currents don’t say.`,
  doesNotCarryThe: (
    a: string,
    which: string,
    apartOwn: null | number,
    steps: number,
    undecidedWith: string,
  ) =>
    `${a} does not carry the current of ${which} (${percent(apartOwn, 1)} apart over ${steps} reports). ${undecidedWith} and maybe others fit alike: only isolating a string decides.`,
};
