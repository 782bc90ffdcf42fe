import { counted, listedUpTo } from './domain-counts';
import { isOne } from './language';

export const acceptGapRefusals = {
  settledMeanwhile:
    'This point has been settled or has changed meanwhile. Reload the page to see how it stands.',
  acceptedAlready: 'Somebody has accepted this point already. Reload the page.',
};

export const asBuiltRequestRefusals = {
  tooFewInputs: (inputs: number, count: number) =>
    `Inverter input: from this one on there are ${inputs} inputs, not ${count}. Choose an earlier one, or put them all on one.`,
};

/** What hangs on a part of a site and keeps it, counted. */
export const hangingRecords = {
  reading: (n: number) => counted(n, 'reported reading'),
  input_reading: (n: number) => counted(n, 'reported reading of an input', 'reported readings of an input'),
  command: (n: number) => counted(n, 'reported command'),
  shutdown_test: (n: number) => counted(n, 'shutdown test'),
  roster: (n: number) => counted(n, 'roster that it was given', 'rosters that it was given'),
  unit_heard: (n: number) => counted(n, 'unit that it has heard', 'units that it has heard'),
  connection: (n: number) => counted(n, 'connection'),
  meter_reading: (n: number) => counted(n, 'meter reading'),
  install_check: (n: number) => counted(n, 'install check'),
  sign_off: (n: number) => counted(n, 'sign-off'),
  file: (n: number) => counted(n, 'file'),
  trace: (n: number) => counted(n, 'trace of a command', 'traces of a command'),
  event: (n: number) => counted(n, 'event'),
  day: (n: number) => counted(n, 'day of production', 'days of production'),
};
const named = (names: readonly string[], one: string, many: string): string =>
  `${isOne(names.length) ? one : many} ${listedUpTo(3, names)}`;
/** What hangs on a part of a site and goes first, by name. */
export const hangingParts = {
  string: (names: readonly string[]) => named(names, 'string', 'strings'),
  sensor: (names: readonly string[]) => named(names, 'sensor', 'sensors'),
  zone: (names: readonly string[]) => named(names, 'zone', 'zones'),
  transmitter: (names: readonly string[]) => named(names, 'transmitter', 'transmitters'),
};

export const asBuiltRefusals = {
  recordsHang: (table: string) =>
    `Records hang on this, or somebody changed it at this moment${table ? ` (${table})` : ''}. Reload the page and look again.`,
  /** @param one whether it is one record of one kind */
  partStays: (part: string, records: readonly string[], one: boolean) =>
    `${part} stays: ${records.join(', ')} ${one ? 'hangs' : 'hang'} on it. Rename it, or leave it as it is.`,
  partInUse: (part: string, users: readonly string[]) =>
    `${part} is in use by ${users.join(' and ')}. Change those first.`,
  siteNameTaken: 'Another site of yours has this name. Choose one that tells them apart.',
  planeNameTaken: 'Another plane here has this name.',
  inverterNameTaken: 'Another inverter here has this name.',
  initiatorNameTaken: 'Another initiator here has this name.',
  zoneNameTaken: 'Another zone here has this name.',
  transmitterNameTaken: 'Another transmitter here has this name.',
  stringNameTaken: 'Another string here has this name.',
  loggerOnRecord:
    'A logger with this serial is on record already. Look at the label; if it is right, ask whoever runs this installation.',
  sensorNumberTaken: 'This logger has a sensor with this number.',
  serialPlacedElsewhere:
    'One of these serials was placed elsewhere at this moment. Nothing was changed; look again.',
  slotFilled: 'One of these slots was filled at this moment. Nothing was changed; look again.',
  chooseLogger: 'Units that report need a logger. Choose one.',
  chooseTransmitter: 'Shutdown-only units need a transmitter. Choose at least one that the string hears.',
};

export const connectorPairRefusals = {
  chooseBoth: 'Choose both connector types from the list.',
  typeGone: 'Choose a type from the list; that one is gone.',
  sameType: 'These are one maker’s one type: they need no evidence.',
  chooseOther: 'Choose a type that differs from the first.',
  recordedAlready: (first: string, second: string) =>
    `${first} and ${second} are recorded already. End that record first if the document has changed.`,
};

export const newSiteNames = {
  mainInitiator: 'Main initiator',
  wholeSite: 'Whole site',
};

export const editStringsRefusals = {
  slotStays: (slot: string, serial: string | null) =>
    `${slot} can't go: ${serial === null ? 'a unit there has reported' : `${serial} sits there`}.`,
  nameTaken: (name: string) => `There is a string ${name} already.`,
  nameTwice: (name: string) => `Two new strings are called ${name}.`,
  chooseModuleType: 'Choose the module type.',
  partDeleted: 'A part was deleted at this moment. Reload, then try again.',
  noPosition: (position: number) => `There is no position ${position} in this string.`,
  moduleTypeGone: 'This module type is not in the catalogue any more.',
  giveMetres: 'Give metres from −2000 to 2000.',
  stringGone: 'This string is not there any more.',
  slotsRange: (name: string) => `${name}: a string has 1 to 63 slots.`,
};

export const editPartRefusals = {
  wasSet: (person: string, shown: string, clock: string) => `${person} set it to ${shown} at ${clock}`,
  choiceGone: (label: string) => `${label}: this one is not there any more. Choose from the list again.`,
  sayWhy: 'Say why: the site is operating, or units that are placed are concerned.',
  sayWhyShort: 'Say why, in a few words. It stays in the history.',
  changedMeanwhile: (part: string) =>
    `Somebody changed this ${part} while you were editing it. What you typed is kept: compare and save again.`,
  noSuchPart: (part: string) => `No such ${part} at this site.`,
  deletedMeanwhile: (person: string, part: string) =>
    `${person} has deleted this ${part} while you were editing it. What you typed is still here: add it anew, or close.`,
  isNow: (shown: string) => `it is ${shown} now`,
  partGone: (part: string) => `This ${part} is not there any more.`,
};

export const equipmentImportRefusals = {
  openQuote: (row: number) =>
    `Row ${row} has a quotation mark that is never closed, or one in the middle of a cell. Correct it, or write it twice.`,
  unpairedQuotes: (row: number) => `Row ${row}: quotation marks don’t pair up.`,
  tooManyRows: (rows: number, most: number) => `The file has ${rows} rows. Import at most ${most} at once.`,
  noRow: 'There is no row under the header. The first row names the columns, each further row is one type.',
  addRow: 'Add at least one row under the header.',
  sameName: (row: number) => `Row ${row} has the same name.`,
  keepOne: 'Keep one of the two, or give it another name.',
  correctValue: 'Correct this value, or the one that it is held against.',
  stringsRest: (strings: number) => `${strings} strings rest on this type’s kind.`,
  giveAnotherName: 'Give the row another name: a new type.',
  catalogueChanged:
    'The catalogue has changed since the preview was made. Look at the new preview, then import.',
  nothingImported: 'Nothing was imported: correct the marked cells first.',
  rowsHaveFaults: (rows: number) => `${rows} rows have faults.`,
};

export const equipmentSaveRefusals = {
  /** What stands in a field by now; empty: nothing. */
  standsNow: (value: string) => `now ${value || 'empty'}`,
  nameTaken: (name: string, archived: boolean) =>
    archived
      ? `Name: "${name}" is there already, archived. Choose another name, or restore that one.`
      : `Name: "${name}" is there already. Choose another name.`,
  choiceGone: (label: string) => `${label}: choose one from the list; that one is gone.`,
  archived: (label: string) => `${label}: that type is archived. Choose another.`,
  kindInUse: (strings: number) =>
    `Kind: ${strings} strings rest on it. Make a new type of the other kind and give it to them.`,
  changedMeanwhile: (who: string) =>
    `${who || 'Somebody'} changed this type while you were editing it. Nothing of yours is lost: look at the fields that differ, then save again or take theirs.`,
};

export const handoverTestWords = {
  instrument: 'Instrument',
  limitsHeld: 'Limits',
  instrumentIs: (name: string, serial: string, category: string, volts: string, calibratedOn: string) =>
    `${name}, serial ${serial}, ${category} ${volts} V, calibrated ${calibratedOn}`,
  slowest: (from: string, to: string) => `${from} to ${to} s`,
  operatedBy: 'Operated by, on site',
  lightAndWeather: 'Light and weather',
  nothingMeasured: 'none: nothing was measured by instrument',
  limits: (outside: string, inside: string, seconds: string, source: string) =>
    `${outside} V outside, ${inside} V inside the array within ${seconds} s. ${source}`,
};

export const importWriteRefusals = {
  partRemoved: 'Something that the file names was removed at this moment. Check the file again.',
};

export const importRefusals = {
  firstWrong: (row: number, column: string, why: string) => ` Row ${row}, ${column}: ${why}.`,
  cellsWrong: (cells: number, first: string) =>
    `Nothing was imported: ${cells === 1 ? 'one cell is' : `${cells} cells are`} wrong.${first}`,
  changedNothingImported:
    'The as-built has changed since you looked, so that this file would change something else now. Nothing was imported: check the file again, and look at what would change.',
  changed: 'The as-built has changed since you looked.',
};

export const placeHeardRefusals = {
  slots: {
    place: 'A place changes one slot.',
    replace: 'A replace changes one slot.',
    swap: 'A swap changes two slots.',
    move: 'A move changes two slots.',
  },
  /** A person's reason, and what they saw. */
  reasonAndSeen: (reason: string, seen: string) =>
    `${reason.replace(/[.\s]*$/, '.')} Seen on the roof: ${seen}`,
  slotTaken: 'There is a unit in this slot. Replace it, or choose an empty slot.',
  giveOldSerial: 'Give the serial of the unit that takes the place of the old one.',
  chooseTwo: 'Choose two different slots.',
  swapNeeds: 'A swap puts each unit into the other’s slot. Read both labels again.',
  moveNeeds: 'A move takes a unit from one slot to an empty one.',
};

export const placeUnitsRefusals = {
  changedBy: (person: string) => ` ${person} changed it.`,
  timeAhead: (at: string) => `The time ${at} has not come yet. Set the clock of the phone, then try again.`,
  timeNotCome: 'This time has not come yet.',
  nothingChanged: (first: string, more: number) =>
    `Nothing was changed. ${first}${more > 0 ? ` And ${more} more.` : ''}`,
  sayWhy: 'Say why: a unit that was placed leaves its slot, or the site is operating.',
  sayWhyShort: 'Say why, in a few words. It stays in the history.',
};

export const recordCheckRefusals = {
  checkOf: (check: string, string: string) => `“${check}” of ${string}`,
  stringHere: 'string at this site',
  sayWhy: 'Say why the check does not apply here.',
};

export const recordReadingRefusals = {
  readingOf: (kind: string, string: string) => `${kind} of ${string}`,
  stringHere: 'string at this site',
  noSlots: (string: string) =>
    `${string} has no slots on the as-built: what a reading means can’t be told. Enter its slots first.`,
};

export const recordRefusals = {
  timeAhead: (at: string, now: string) =>
    `The time is ${at}, ahead of the server’s clock (${now}). Set the clock of the phone or computer that recorded it, then send it again.`,
  timeLongAgo: (at: string, now: string) =>
    `The time is ${at}, more than a year ago; the server’s clock says ${now}. Set the clock of the phone or computer that recorded it, then send it again.`,
  identifierTaken:
    'Another record carries this identifier already, with other content. Nothing was changed; record it again.',
  makeNewIdentifier: 'Make a new identifier for a new record.',
  notSeen: (person: string, what: string, at: string) =>
    `${person} recorded ${what} at ${at}, which you have not seen. Nothing is lost: compare both, then keep theirs or send yours again in place of theirs.`,
  sendEarlierFirst: (what: string) =>
    `The record of ${what} that this one takes the place of is not here. Send that one first.`,
};

export const roofRefusals = {
  outlineChanged: 'The outline has been changed since you opened it.',
  stringGone: 'A string is not there any more.',
  laidAnew: (string: string) => `${string} has been laid anew since you opened it.`,
  nothingSaved: (faults: string) =>
    `Nothing was saved. ${faults} Look at how it is now, then keep yours or theirs.`,
};

export const signOffRefusals = {
  stringWithSlots: 'string with slots',
  recordedSince: (string: string) =>
    `Checks of ${string} were recorded since you looked. Look at them again, then sign.`,
  notTheseRecords: 'Not of the records that are here now.',
  blocked: (string: string, blocks: string) => `${string} can’t be signed off: ${blocks}`,
};

export const attachmentRefusals = {
  pdf: (name: string) =>
    `${name}: This is a PDF. Documents are taken as evidence for connector pairs only; here send a JPEG, PNG or WebP picture.`,
  roleRecordsNone: (role: string) =>
    `The role ${role} does not record evidence for connectors. Ask a manager.`,
  stringHere: 'string at this site',
};

export const walkLights = {
  bright: 'in bright light',
  dull: 'in dull light',
  snow: 'under snow',
  night: 'at night',
};

export const writePartRefusals = {
  stringsOnIt: (names: readonly string[]) =>
    names.length === 1 ? `string ${names.join()} is on it` : `strings ${names.join(', ')} are on it`,
  reported: 'it has reported readings',
  inputStays: (input: number, why: string) => `Input ${input} can't go: ${why}.`,
  strandedStrings: (strings: string) =>
    `Strings that it serves: ${strings} would hear no transmitter, and shutdown-only units need one. Give them another first.`,
  needsLogger: (type: string) => `"${type}" units report, so the string needs a logger. Choose one.`,
  needsTransmitter: (type: string) =>
    `"${type}" units tell nothing and hear a keep-alive, so the string needs a transmitter. Choose at least one.`,
  slotReported: 'a unit there has reported',
  slotTaken: (serial: string) => `${serial} sits there. Take it out first, or move it`,
  slotStays: (position: number, why: string) => `Slots: position ${position} can't go: ${why}.`,
  chooseModuleType: 'Choose the module type of the new slots.',
};
