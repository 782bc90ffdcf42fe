import { counted } from '../drawings/numbers';

export const logoSheet = {
  logo: 'Logo',
  logoOf: (settings: string) => `Logo of ${settings}`,
  noneYetItStands: 'None yet. It stands on your customers’ pages and on month reports.',
  anotherPicture: 'Another picture',
  aPicture: 'A picture',
  takeItAway: 'Take it away',
  pngJpegOrWebP:
    'PNG, JPEG or WebP, at most 5 MB. The picture is made anew; nothing else in the file is kept.',
  roundSent: (round: number) => ` ${round} % sent.`,
};

export const organisationSheet = {
  organisation: 'Organisation',
  name: 'Name',
  telephone: 'Telephone',
  standsOnYourCustomers: 'Stands on your customers’ pages and letters.',
  timeZone: 'Time zone',
  forTimesThatBelong: 'For times that belong to no site. Each site keeps its own.',
  money: 'Money',
  noMoney: 'none: no money is shown',
  moneyHint: 'Prices a kWh are set on each site’s figures.',
  temperatures: 'Temperatures',
  inC: 'in °C',
  inF: 'in °F',
  whatIsReadData: 'What is read. Data sheets and files keep °C.',
  rawReadingsAreShown: 'Raw readings are shown for',
  retentionHint: 'Empty: as long as the installation keeps them, 90 days. Sums of quarters and days stay.',
  saving: 'Saving',
  save: 'Save',
};

export const saved = {
  itHoldsFromNow: 'It holds from now on.',
  kept: 'Kept',
  notSaved: 'Not saved: see the fields',
};

export const settingsBoard = {
  settingsOf: (settings: string) => `Settings of ${settings}`,
  theyHoldForSites: (sites: number, own: number) =>
    `They hold for ${counted(sites, 'site')}. ${own === 0 ? 'Every judgement uses its default figures.' : `${counted(own, 'threshold differs', 'thresholds differ')} from the default.`} `,
  everyChangeIs: 'Every change is ',
  onRecord: 'on record',
  managersChangeThem: 'Managers change them.',
};

export const thresholdsSheet = {
  thresholdsOfTheJudgements: 'Thresholds of the judgements',
  emptyTheDefault: 'empty: the default',
  theyHoldFromThe:
    'They hold from the next judgement on; what was judged before stays as it was. Limits of rapid shutdown (30 V, the rule set’s time) are no setting.',
  thresholds: 'Thresholds',
  changesDefaultAndSource: (changes: string, defaultWords: string, source: string) =>
    `${changes} Default: ${defaultWords} (${source}).`,
  saving: 'Saving',
  saveTheThresholds: 'Save the thresholds',
  allDefaults: 'All defaults',
};

export const settingsUseSaving = {
  notSaved: 'Not saved',
  notSent: 'It could not be sent. What you typed is still here; try again.',
};
