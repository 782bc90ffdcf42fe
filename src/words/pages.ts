import { clockSeconds, zoneName } from '../drawings/times';
export const jobsPageWords = {
  backgroundJobs: 'Background jobs',
};

export const methodsPage = {
  howWakelineJudges: 'How Wakeline judges',
  judgementsEachWithIts: (notes: number) =>
    `${notes} judgements, each with its formula, its source and its limits`,
  everyExampleOnThis:
    'Every example on this page runs the same function that judges the sites. Change a figure and see what it says.',
  aReadingInYour: 'A reading in your hand?',
  tryIt: 'Try it',
  judgementsOnThisPage: 'Judgements on this page',
  wakelineWatchesItNever: 'Wakeline watches; it never switches.',
};

export const figuresPage = {
  figuresOf: (period: string) => `Figures of ${period}`,
};

export const casesNewPage = {
  newCase: 'New case',
};

export const casesCasePage = {
  case: (n: number) => `Case ${n}`,
};

export const casesPageWords = {
  cases: 'Cases',
};

export const noticesPageWords = {
  notices: 'Notices',
};

export const accountPageWords = {
  yourAccount: 'Your account',
};

export const mailPage = {
  letters: 'Letters',
};

export const accountNoticesPage = {
  whatYouAreTold: 'What you are told of',
};

export const sitesSiteLoggersPage = {
  loggers: (site: string) => `Loggers, ${site}`,
};

export const sitesSitePlannedWorksPage = {
  worksAreGoingOn: (site: string) => `Works are going on at ${site}`,
  worksArePlannedAt: (site: string) => `Works are planned at ${site}`,
  noWorksArePlanned: (site: string) => `No works are planned at ${site}`,
  plannedWorks: (site: string) => `Planned works, ${site}`,
  fleet: 'Fleet',
  whatHappensDuringPlanned:
    'What happens during planned works is no alarm, and counts for nothing in what strings should make. Units that do not shut down are told all the same.',
};

export const sitesSiteHistoryImportPage = {
  earlierReadings: (site: string) => `Earlier readings, ${site}`,
};

export const statusPage = {
  lookAgain: 'Look again',
  asOf: (at: string, timeZone: string) => `As of ${clockSeconds(at, timeZone)} ${zoneName(at, timeZone)}. `,
  notRead: 'It could not be read again since then: what has happened meanwhile is not known.',
};

export const mySitePage = {
  noRoofIsYours: 'No roof is yours here yet',
  yourRoofs: (sites: number) => `Your ${sites} roofs`,
  whatTheOwnersOf: (sites: number) => `What the owners of ${sites} roofs see`,
  yourRoofs2: 'Your roofs',
};

export const developersPageWords = {
  programmingInterface: 'Programming interface',
  thingsThatAProgram: (data: number) => `${data} things that a program of yours can ask for`,
  makeATokenOn: 'Make a token on',
  putItIntoThe: ', put it into the environment of your shell as',
  andTryTheExamples: ', and try the examples: they name your own sites. The same as',
  forTools: ', for tools.',
  yourAccountPage: 'your account page',
  openApi31: 'OpenAPI 3.1',
  send: 'Send',
  ofAnAnswerAs: 'of an answer as',
  ofTheNextRequest:
    'of the next request, with the same filters. A parameter that is not known is refused by its name.',
  pages: 'Pages.',
  sendAnAnswersETag:
    'Send an answer’s ETag as If-None-Match and get 304 while nothing has changed. RateLimit says how many requests are left; past it comes 429 with Retry-After.',
  askingAgain: 'Asking again.',
  sendAnIdempotencyKey:
    'Send an Idempotency-Key of your own: the same request again within a day gets the first reply, and nothing is done twice.',
  writing: 'Writing.',
  isAProblemDocument:
    'is a problem document (RFC 9457) with each field, what is wrong with it and what to do, and the number to name when you report it.',
  whatWentWrong: 'What went wrong',
  nothingHereReleasesOr:
    'Nothing here releases or shuts down anything. A state is what a unit says of itself: it is no proof that a conductor is dead. Isolate, lock out, and prove it with a rated meter; local code and qualified people come first.',
  wakelineWatchesItNever: 'Wakeline watches; it never switches.',
};

export const auditPageWords = {
  whoDidWhat: 'Who did what',
  everyChangeOfPeople:
    'Every change of people, access, as-built, equipment, tests, cases and settings, with what stood before. Entries are only ever added.',
};

export const captureSitePage = {
  readingsAndChecks: (site: string) => `Readings and checks, ${site}`,
};

export const capturePage = {
  onThisPhone: 'On this phone',
};

export const causesCausePage = {
  causes: 'Causes',
  itIsOverWhat: 'It is over. What it was and what it cost stays on record.',
  case: (openCase: number) => `Case ${openCase}`,
  openACase: 'Open a case',
  over: 'Over',
  cameBack: (times: number) => `came back ${times === 1 ? 'once' : `${times} times`}`,
};

export const webhooksWebhookPage = {
  webhook: (webhook: string) => `Webhook ${webhook}`,
};

export const webhooksPageWords = {
  webhooks: 'Webhooks',
};

export const peoplePageWords = {
  people: 'People',
};

export const settingsPage = {
  settings: 'Settings',
};

export const tryAReadingPage = {
  tryAReading: 'Try a reading',
};

export const commissioningNewPage = {
  newSite: 'New site',
  commissioning: 'Commissioning',
  aNewSiteBegins: 'A new site begins with where it is and what rules hold there',
  planesInvertersLoggersAnd: 'Planes, inverters, loggers and strings come next, on its as-built page.',
};

export const commissioningPage = {
  commissioning: 'Commissioning',
  untilItsRollCall: 'Until its roll call is complete, treat every string of a site as live.',
  aSiteThatIs: 'A site that is being put into service shows here until it is handed over.',
};

export const commissioningSiteRollCallPage = {
  rollCall: (site: string) => `Roll call, ${site}`,
};

export const commissioningSiteMembershipPage = {
  membership: (site: string) => `Membership, ${site}`,
};

export const commissioningSiteSerialsPage = {
  serials: (site: string) => `Serials, ${site}`,
};

export const commissioningSiteRoofPage = {
  roof: (site: string) => `Roof, ${site}`,
};

export const commissioningSiteHistoryPage = {
  history: (site: string) => `History, ${site}`,
};

export const commissioningSiteChecksPage = {
  installChecks: (site: string) => `Install checks, ${site}`,
};

export const commissioningSiteImportPage = {
  import: (site: string) => `Import, ${site}`,
};

export const commissioningSiteHandoverPage = {
  handover: (site: string) => `Handover, ${site}`,
};

export const commissioningSitePage = {
  commissioning: (data: string) => `Commissioning, ${data}`,
};

export const commissioningSiteAsBuiltPage = {
  asBuilt: (site: string) => `As-built, ${site}`,
};

export const commissioningSiteWalkPage = {
  ladderCard: (site: string) => `Ladder card, ${site}`,
  wakelineToTheFleet: 'Wakeline, to the fleet:',
  ladderCard2: 'Ladder card',
  walk: (site: string) => `Walk, ${site}`,
};

export const commissioningSiteReadingsPage = {
  meterReadings: (site: string) => `Meter readings, ${site}`,
};

export const equipmentFamilyImportPage = {
  importS: (family: string) => `Import ${family}s`,
};

export const causesPageWords = {
  causes: 'Causes',
};

export const equipmentFamilyTypePage = {
  aNew: (family: string) => `A new ${family}`,
};

export const oneShutdownTestPage = {
  shutdownTest: (signed: boolean, site: string) => `Shutdown test${signed ? ', signed' : ''}, ${site}`,
};
