import { counted, energy, listed, percent } from '../drawings/numbers';

export const sharedCausesAcknowledge = {
  puttingYourNameTo: 'Putting your name to it …',
  acknowledgeAndCallThe: 'Acknowledge and call the site',
  hasItSince: ' has it since ',
  callPhone: (phone: string) => `Call ${phone}`,
  noTelephoneNumberIs: (siteName: string) => `No telephone number is on record for ${siteName}.`,
  itsShutdownSwitch: (shutdownSwitchPlace: string) => `Its shutdown switch: ${shutdownSwitchPlace}.`,
};

export const causeSheet = {
  silent: 'Silent',
  string: 'String',
  string2: 'string',
  losingDay: (lossWhPerDay: number) => `losing ${energy(lossWhPerDay)} a day`,
  confidenceSure: (confidence: number) => `${percent(confidence)} sure`,
  since: 'since ',
  itCouldAlsoBe: (alternatives: string) => `It could also be: ${alternatives}.`,
  evidenceHistoryWhatTo: 'Evidence, history, what to check first',
};

export const sharedCausesFinding = {
  /** Which: all that are few, of many the first three. */
  atNamed: (names: readonly string[]) =>
    `at ${listed(names.length <= 3 ? names : [...names.slice(0, 3), counted(names.length - 3, 'more site')])}`,
  atX: (x: undefined | string) => `at ${x}`,
  atSites: (names: string) => `at ${names} sites`,
  didNotShutDown: (who: string) => `${who} did not shut down`,
  unitsStuckInShutdown: (who: string, single: boolean) =>
    `${who} ${single ? 'has' : 'have'} units stuck in shutdown`,
  stuckInShutdown: (who: string, single: boolean) => `${who} ${single ? 'is' : 'are'} stuck in shutdown`,
  theShutdownOfCant: (lowerFirst: string, causes: string) =>
    `The shutdown of ${lowerFirst} ${causes} can't be confirmed`,
  whoSingleSilent: (who: string, single: boolean) => `${who} ${single ? 'is' : 'are'} silent`,
  treatEveryStringAs: (at: string) => `Treat every string ${at} as live and call the site.`,
  theyHoldBackPower: (at: string) => `Power is held back ${at}; the causes below say which part is shared.`,
  treatTheirStringsAs: (at: string) =>
    `Treat their strings ${at} as live until a rated meter shows otherwise.`,
  whetherTheyFollowShutdown: (at: string) =>
    `Whether they follow a shutdown ${at} can't be confirmed until they are heard again.`,
};

export const sharedCausesPlaces = {
  positionsUnknown: 'positions unknown',
  countedPositionsUnit: (positions: number) => counted(positions, 'unit'),
  position: 'position',
  positions: 'positions',
  stringNamePositions: (stringName: string, positions: string) => `string ${stringName}, ${positions}`,
  stringsListedSaid: (listedSaid: string) => `strings ${listedSaid}`,
  countedPlacesString: (places: number) => counted(places, 'string'),
  countedKnownUnit: (known: number) => counted(known, 'unit'),
};

export const sharedCausesWords = {
  treatEveryStringThere:
    'Treat every string there as live until a rated meter at the home run shows otherwise.',
  nothingShowsThatThese: 'Nothing shows that these units followed the command. Treat their strings as live.',
  whetherTheseUnitsFollow:
    "Whether these units follow a shutdown can't be confirmed until they are heard again.",
  insideOrLast: (inside: string, last: string) => `${inside} or ${last}`,
};
