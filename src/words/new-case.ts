export const newCase = {
  chooseTheSite: 'Choose the site.',
  cases: 'Cases',
  newCase: 'New case',
  openCase: (cause: string) => `Open a case: ${cause}`,
  openACase: 'Open a case',
  itKeepsTheFigures: 'It keeps the figures of this minute: voltages, states of units, energy and light.',
  caseIsOpenFor: (existing: number) => `Case ${existing} is open for this cause already`,
  goToCase: (existing: number) => `Go to case ${existing}`,
  site: 'Site',
  choose: 'Choose',
  title: 'Title',
  whatIsWrong: 'What is wrong',
  kind: 'Kind',
  itDecidesWhatThe: 'It decides what the checklist asks, and how Wakeline looks again after closing.',
  theStringsOfThis: 'The strings of this site could not be read',
  assignedTo: 'Assigned to',
  nobodyYet: 'Nobody yet',
  due: 'Due',
  openTheCase: 'Open the case',
  leaveIt: 'Leave it',
};

export const partsPicker = {
  whatItIsAbout: 'What it is about',
  thisSiteHasNo: 'This site has no strings on its as-built yet.',
  positionsOf: (name: string, some: boolean) =>
    `Positions of ${name}${some ? '' : ': none chosen, so the whole string'}`,
  positionOf: (position: number, name: string) => `Position ${position} of ${name}`,
};
