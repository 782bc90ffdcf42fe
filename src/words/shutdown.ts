import { countAtStart, counted, number } from '../drawings/numbers';

export const heldSites = {
  initiatorOpen: 'Initiator open',
  keepAliveGone: 'Keep-alive gone',
  powerGone: 'Power gone',
  released: 'Released',
  site: 'Site',
  shutdownTests: 'Shutdown tests',
  ofSite: (site: string) => ` of ${site}`,
  inForce: 'In force',
  whereInForceSince: (where: string, inForce: string) => `${where}: ${inForce.toLowerCase()} since `,
  units: 'Units',
  sayTheyAreIn: 'Say they are in shutdown',
  lineOfUnits: (line: number, units: number) => `${number(line)} of ${number(units)}`,
};

export const shutdownBoard = {
  all: 'All',
  notShuttingDown: 'Not shutting down',
  stuck: 'Stuck',
  unconfirmed: 'Unconfirmed',
  silent: 'Silent',
  keptPassingAfterA: 'Kept passing after a command',
  stuckInShutdownAfter: 'Stuck in shutdown after a release',
  shutdownCommandedNotConfirmed: 'Shutdown commanded, not confirmed',
  silentWhetherTheyWould: "Silent: whether they would shut down can't be confirmed",
  oldestFirst: (reduce: number, causes: number) =>
    `${counted(reduce, 'unit')}, ${counted(causes, 'cause')} · oldest first`,
  eachModuleAndIts:
    'Each module and its leads to its unit stay at module voltage in light. Wakeline reads what units report and never switches. Isolate, lock out, prove dead with a rated meter. Licensed or qualified people; local code comes first.',
  shutdownIsNotIsolation: 'Shutdown is not isolation.',
  whatIsShownMay: 'What is shown may be old.',
  theStateOfShutdown: 'The state of shutdown could not be read anew',
  filterBySitePart: 'Filter by site, part, string or serial',
  whichUnits: 'Which units',
  anotherWordOrFilter: 'Another word or filter may.',
  nothingMatches: 'Nothing matches',
  showAll: 'Show all',
  keepAliveOrPower: 'Keep-alive or power gone',
  longestFirst: 'longest first',
  sitesWhoseKeepAlive: 'Sites whose keep-alive or power went',
  inShutdownOnPurpose: 'In shutdown on purpose',
  sitesInShutdownOn: 'Sites in shutdown on purpose',
  aSiteWhoseInitiator: 'A site whose initiator a person opens is listed here and not among the faults.',
  noInitiatorIsOpen: 'No initiator is open',
  causes: 'causes',
};

export const unitsTable = {
  string: 'String',
  position: 'Position',
  serial: 'Serial',
  since: 'Since',
  unitsCause: (cause: string) => `Units: ${cause}`,
  allByPosition: (units: number) => `All ${units} by position`,
};

export const shutdownColumns = {
  verdict: 'verdict',
  site: 'site',
  string: 'string',
  position: 'position',
  serial: 'serial',
  cause: 'cause',
  evidence: 'evidence',
  sinceUtc: 'since (UTC)',
  sharedPart: 'shared part',
  couldAlsoBe: 'could also be',
  confidence: 'confidence (%)',
  lossWhDay: 'loss (Wh/day)',
};

export const shutdownFindingWords = {
  inShutdownOnPurpose: (listedSaid: string, purpose: number) =>
    `${listedSaid} ${purpose === 1 ? 'is' : 'are'} in shutdown on purpose, wholly or in part.`,
  sitesAreInShutdown: (purpose: number) =>
    `${countAtStart(purpose)} sites are in shutdown on purpose, wholly or in part.`,
  atLost3ListedSaid: (lost: number, listedSaid: string, lost2: string) =>
    `At ${lost <= 3 ? listedSaid : `${lost2} sites`} the keep-alive or the power of a zone went.`,
  noUnitIsStuck: 'No unit is stuck, and none is known to pass against a command',
  noZoneIsIn: 'No zone is in shutdown. What a home run carries only a rated meter shows.',
  countedUnitsUnit: (units: number) => counted(units, 'unit'),
  besidesOthers: (others: string) => `Besides, ${others}.`,
  didNotShutDown: 'did not shut down',
  stuckInShutdown: (n: string) => `${n} stuck in shutdown`,
  cantBeConfirmed: "can't be confirmed",
  nSilent: (n: string) => `${n} silent`,
};
