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
