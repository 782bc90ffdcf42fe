import { capital } from './domain-counts';
/** What is wrong with a part's values, field by field, with the remedy. */
export const partFaultSaid = {
  span: (min: string, max: string, unit: string) => `from ${min} to ${max}${unit ? ` ${unit}` : ''}`,
  typeOne: (label: string) => `${label}: type one.`,
  tooLong: (label: string, characters: number, most: number) =>
    `${label}: ${characters} characters are too many. ${most} at most.`,
  typeAsOnLabel: (label: string) => `${label}: type it as on the label.`,
  serialFault: (label: string, message: string, remedy: string) => `${label}: ${message}. ${remedy}`,
  typeNumber: (label: string, span: string) => `${label}: type a number ${span}.`,
  notWhole: (label: string, value: string, span: string) =>
    `${label}: ${value} is no whole number. Type one ${span}.`,
  outside: (label: string, value: string, span: string) =>
    `${label}: ${value} is outside what is possible. Type a number ${span}.`,
  chooseOne: (label: string) => `${label}: choose one of the list.`,
  chooseZone: (label: string) => `${label}: choose one of the list, such as Europe/London.`,
  sayYesOrNo: (label: string) => `${label}: say yes or no.`,
  choosePart: (label: string) => `Choose the ${label.charAt(0).toLowerCase() + label.slice(1)}.`,
  chooseFromList: (label: string) => `${label}: choose from the list.`,
  notKnown: (key: string) => `"${key}" is not known here.`,
  hottestNotAbove: (hottest: string, coldest: string) =>
    `Hottest expected air: ${hottest} °C is not above the coldest, ${coldest} °C.`,
  sensorNeedsPlane: 'Plane: a sensor of irradiance in the plane needs the plane that it lies in.',
};

/** What is wrong with a change of units in slots. */
export const placementFaultSaid = {
  changedSince: (what: string) =>
    `${what} was changed after the time of this entry. Look at it as it stands now.`,
  /** `now`, `seen`: serials; null: none. */
  otherThanSeen: (slot: string, now: string | null, seen: string | null) =>
    `${slot} ${now === null ? 'has no unit now' : `has ${now} now`}; you saw ${seen ?? 'it empty'}.`,
  foreignType: (serial: string, onRecord: string, string: string, takes: string) =>
    `${serial} is on record as "${onRecord}"; ${string} takes "${takes}". Look at the label.`,
  elsewhere: (serial: string, place: string) =>
    `${serial} sits ${place}. Look at the label again; if the unit was moved, say so, and it is taken from there.`,
  elsewhereUnseen: (serial: string, place: string) => `${serial} sits ${place}. Ask a manager.`,
  noSlot: (position: number) => `There is no position ${position} in this string.`,
  slotTwice: (slot: string) => `${slot} is named twice. Leave one of them out.`,
  serialFault: (message: string, remedy: string) => capital(`${message}. ${remedy}`),
  serialTwice: (serial: string, slot: string) =>
    `${serial} is given for ${slot} too. A unit sits in one slot.`,
};

/** Where a unit sits, after "sits"; null: not known. */
export const unitPlaceSaid = {
  unseen: 'at another site that you do not see',
  here: (string: string, position: number | null) => `in ${string}, position ${position ?? '?'}`,
  elsewhere: (site: string | null, string: string, position: number | null) =>
    `at ${site ?? 'another site'}, in ${string}, position ${position ?? '?'}`,
};
