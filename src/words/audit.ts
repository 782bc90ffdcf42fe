import { counted } from '../drawings/numbers';

export const auditList = {
  fromAddress: (address: string) => `from ${address}`,
  moreFields: (changes: number, shownChanges: number) => counted(changes - shownChanges, 'more field'),
  findLabel: 'Find a person, site, serial or reason',
  findPlaceholder: 'Person, site, serial or reason',
  about: 'About',
  everything: 'everything',
  find: 'Find',
  nothingFits: 'Nothing fits',
  nothingYet: 'Nothing is on record yet',
  nothingFitsHint: 'Use fewer words, or look at everything.',
  onRecord: 'On record',
  older: 'Older',
};
