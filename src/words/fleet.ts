import { countAtStart, number } from '../drawings/numbers';

export const fleetBoard = {
  whatIsShownMay: 'What is shown may be old.',
  theFleetCouldNot: 'The fleet could not be read anew',
  causesToActOn: 'Causes to act on',
  aManagerEntersThe: 'A manager enters the first plant; its units, strings and states then stand here.',
  noSiteYet: 'No site yet',
  sites: 'Sites',
  viewLinesOfSites: (view: string, lines: number, sites: number) =>
    `${view} · ${number(lines)} of ${number(sites)}`,
  causes: 'causes',
  sites2: 'sites',
};

export const fleetFilters = {
  filterSitesByName: 'Filter sites by name or place',
  filterByNameOr: 'Filter by name or place',
  whichSites: 'Which sites',
  stage: 'Stage',
};

export const fleetTable = {
  commissioning: 'Commissioning',
  operating: 'Operating',
  site: 'Site',
  stageUnits: (stage: string, units: number) => `${stage}, ${number(units)} units`,
  stage: 'Stage',
  units: 'Units',
  open: 'Open',
  performanceRatio30D: 'Performance ratio, 30 d',
  now: 'Now',
  sitesWithTheirUnits: 'Sites with their units by state, what is open, performance ratio and power now',
  anotherWordStageOr: 'Another word, stage or filter may.',
  noSiteMatches: 'No site matches',
  showAllSites: 'Show all sites',
};

export const sinceLastLook = {
  sinceYouLastLooked: 'Since you last looked, ',
  seen: 'Seen',
  itemAt: (item: string) => `${item} at `,
  andMoreEachSite: (more: number) => `and ${more} more; each site tells its own.`,
};

export const fleetColumnsWords = {
  site: 'site',
  place: 'place',
  stage: 'stage',
  strings: 'strings',
  units: 'units',
  passing: 'passing',
  unheard: 'unheard',
  silent: 'silent',
  dark: 'dark',
  stuck: 'stuck',
  unconfirmed: 'unconfirmed',
  open: 'open',
  timeZone: 'time zone',
  inShutdown: 'in shutdown',
  notShuttingDown: 'not shutting down',
  inShutdownSinceUtc: 'in shutdown since (UTC)',
  performanceRatio30D: 'performance ratio 30 d (%)',
  powerW: 'power (W)',
  acCapacityW: 'AC capacity (W)',
  newestReportUtc: 'newest report (UTC)',
};

export const fleetFindingWords = {
  allUnitsPass: (all: number) => `all ${number(all)} units pass`,
  ofUnitsPass: (passing: number, all: number) => `${number(passing)} of ${number(all)} units pass`,
  stuckInShutdownAt: (stuck: number, stuckAt: number, stuckAt2: undefined | string, stuckAt3: string) =>
    `${number(stuck)} ${stuck === 1 ? 'is' : 'are'} stuck in shutdown at ${stuckAt === 1 ? stuckAt2 : `${stuckAt3} sites`}`,
  cantBeConfirmed: (unconfirmed: number) => `${number(unconfirmed)} can't be confirmed`,
  areSilent: (silent: number) => `${number(silent)} ${silent === 1 ? 'is' : 'are'} silent`,
  unheard: (unheard: number) => `${number(unheard)} unheard`,
  inTheDark: (dark: number) => `${number(dark)} in the dark`,
  nothingThemselves: (mute: number) => `${number(mute)} ${mute === 1 ? 'tells' : 'tell'} nothing themselves`,
  inShutdownOnPurpose: (listedSaid: string, held: number) =>
    `${listedSaid} ${held === 1 ? 'is' : 'are'} in shutdown on purpose`,
  sitesAreInShutdown: (held: string) => `${held} sites are in shutdown on purpose`,
  and: ', and ',
  noSiteIsSet: 'No site is set up yet',
  sitesAppearHereAs: 'Sites appear here as soon as their plant is entered.',
  thereElsewhereSites: (there: string, sites: string) => `${there} Elsewhere ${sites}.`,
  doesNotReport: (away: undefined | string) => `${away} does not report`,
  ofSitesDoNot: (away: number, sites: number) =>
    `${countAtStart(away)} of ${number(sites)} sites do not report`,
  nothingNewerIsKnown: (away: number, sites: string) =>
    `Nothing newer is known of ${away === 1 ? 'it' : 'them'}. By the last reports ${sites}.`,
  nothingNeedsAttention: 'Nothing needs attention',
};

export const fleetMissed = {
  twice: ', twice',
  nTimes: (n: number) => `, ${countAtStart(n).toLowerCase()} times`,
  didNotShutDown: (n: string) => `${n} did not shut down`,
  gotStuckInShutdown: (n: string) => `${n} got stuck in shutdown`,
  theShutdownOfCould: (n: string) => `The shutdown of ${n.toLowerCase()} could not be confirmed`,
  fellSilent: (n: string) => `${n} fell silent`,
  nRecovered: (n: string) => `${n} recovered`,
  eventsBegan: (events: string) => `${events} began`,
  eventsEnded: (events: string) => `${events} ended`,
  theLoggerStoppedReporting: (events: string) => `The logger stopped reporting${events}`,
  gatewayFellSilent: (events: string) => `A gateway fell silent${events}`,
  aCommandCameIn: 'A command came in force',
  commandsCameInForce: (events: number) => `${countAtStart(events)} commands came in force`,
  rollCallWasStarted: (events: string) => `A roll call was started${events}`,
  rollCallWasStopped: (events: string) => `A roll call was stopped${events}`,
  takenOn: (events: string) => `${events} taken on`,
  cameIn: (events: string) => `${events} came in`,
  unit: 'unit',
  stringFinding: 'string finding',
  hazardWas: 'hazard was',
  hazardsWere: 'hazards were',
  event: 'event',
};

export const fleetNeed = {
  oneKind: (kind: string) => `, one ${kind}`,
  oneCause: ', one cause',
  didNotShutDown: (notShuttingDown: number) => `${number(notShuttingDown)} did not shut down`,
  stringsLive11String: (stringsLive: number) =>
    `${stringsLive === 1 ? '1 string' : `${number(stringsLive)} strings`} did not shut down`,
  stuckCauses: (stuck: number, causes: string) => `${number(stuck)} stuck${causes}`,
  stringsStuck11String: (stringsStuck: number) =>
    `${stringsStuck === 1 ? '1 string has' : `${number(stringsStuck)} strings have`} stuck units`,
  unconfirmed: (unconfirmed: number) => `${number(unconfirmed)} unconfirmed`,
  silentCauses: (silent: number, causes: string) => `${number(silent)} silent${causes}`,
  unheard: (unheard: number) => `${number(unheard)} unheard`,
  noReportSince: (reportedAt: string) => `no report since ${reportedAt}`,
  hasNotReportedYet: 'has not reported yet',
  inShutdownSince: (inShutdownSince: string) => `in shutdown since ${inShutdownSince}`,
  inShutdown: (where: string) => `${where} in shutdown`,
};

export const fleetView = {
  allStages: 'All stages',
  commissioning: 'Commissioning',
  operating: 'Operating',
  allSites: 'All sites',
  needsAttention: 'Needs attention',
  inShutdown: 'In shutdown',
  needsAttentionFirst: 'Needs attention first',
  needsAttentionLast: 'Needs attention last',
  byName: 'By name',
  byNameFromThe: 'By name, from the end',
  commissioningFirst: 'Commissioning first',
  operatingFirst: 'Operating first',
  mostUnitsFirst: 'Most units first',
  fewestUnitsFirst: 'Fewest units first',
  highestPerformanceRatioFirst: 'Highest performance ratio first',
  lowestPerformanceRatioFirst: 'Lowest performance ratio first',
  mostPowerFirst: 'Most power first',
  leastPowerFirst: 'Least power first',
};
