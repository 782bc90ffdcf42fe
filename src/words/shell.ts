export const noticeCount = {
  notices: 'Notices',
  unread: 'unread',
  allRead: 'all read',
  newNotice: (where: string, came: string) => `New notice. ${where}${came}`,
  notShuttingDown: 'Not shutting down',
  notShuttingDown2: ' Not shutting down',
  seeWhatToTreat: 'See what to treat as live',
  notNow: 'Not now',
};

export const shellSearch = {
  site: 'Site',
  string: 'String',
  unit: 'Unit',
  resultsFound: (results: number) => `${results} found`,
  nothingHereIsCalled: (q: string) => `Nothing here is called “${q}”`,
  everything: 'Everything',
  findASiteString: 'Find a site, string or serial',
  found: 'Found',
};

export const accountMenu = {
  shownHereBut: 'Shown here, but not kept: no answer from the server.',
  manager: 'Manager',
  technician: 'Technician',
  analyst: 'Analyst',
  customer: 'Customer',
  asTheDevice: 'As the device',
  light: 'Light',
  dark: 'Dark',
  accountOf: (initials: string, actor: string) => `${initials}: account of ${actor}`,
  colours: 'Colours',
  tryAReading: 'Try a reading',
  yourAccount: 'Your account',
  whatYouAreTold: 'What you are told of',
  howWakelineJudges: 'How Wakeline judges',
  programmingInterface: 'Programming interface',
  settings: 'Settings',
  backgroundJobs: 'Background jobs',
  stateOfThisInstallation: 'State of this installation',
  letters: 'Letters',
  webhooks: 'Webhooks',
  whoDidWhat: 'Who did what',
  signOut: 'Sign out',
};

export const keysHelp = {
  findASiteString: 'Find a site, string or serial',
  fromRowToRow: 'From row to row in a table; Home and End to its ends',
  aChartsFiguresAs: 'A chart’s figures as a table, while the chart has the focus',
  closeWhatIsOpen: 'Close what is open',
  thisList: 'This list',
  keys: 'Keys',
  close: 'Close',
};

export const baseLayout = {
  wakeline: (title: string) => `${title} · Wakeline`,
  skipToThePages: "Skip to the page's content",
};

export const customerLayout = {
  lookedAfterBy: (lookedAfterBy: string) => `Looked after by ${lookedAfterBy}`,
  howWakelineJudges: 'How Wakeline judges',
};

export const problemLayout = {
  backToTheFleet: 'Back to the fleet',
  backToYourSite: 'Back to your site',
  signIn: 'Sign in',
};

export const staffLayout = {
  fleet: 'Fleet',
  causes: 'Causes',
  cases: 'Cases',
  figures: 'Figures',
  commissioning: 'Commissioning',
  shutdown: 'Shutdown',
  equipment: 'Equipment',
  people: 'People',
  wakelineToTheFleet: 'Wakeline, to the fleet',
  main: 'Main',
};

/** What a search found: what it is called, and where it is. */
export const searchHits = {
  string: (name: string | null) => `String ${name ?? ''}`,
  unitAt: (site: string, string: string | null, position: number | null) =>
    `${site}, ${string ?? ''} position ${position ?? '–'}`,
};
