import { counted } from '../drawings/numbers';

export const auditList = {
  fromAddress: (address: string) => `from ${address}`,
  moreFields: (changes: number, shownChanges: number) => counted(changes - shownChanges, 'more field'),
  findAPersonSite: 'Find a person, site, serial or reason',
  personSiteSerialOr: 'Person, site, serial or reason',
  about: 'About',
  everything: 'everything',
  find: 'Find',
  nothingFits: 'Nothing fits',
  nothingIsOnRecord: 'Nothing is on record yet',
  useFewerWordsOr: 'Use fewer words, or look at everything.',
  onRecord: 'On record',
  older: 'Older',
};
