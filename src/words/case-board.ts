import { countAtStart, counted } from '../drawings/numbers';

export const casesBoard = {
  caseIsNowUnder: (item: number, to: string) => `Case ${item} is now under “${to}”.`,
  openACase: 'Open a case',
  whatIsShownMay: 'What is shown may be old.',
  theCasesCouldNot: 'The cases could not be read anew',
  countedShownCase: (shown: number) => counted(shown, 'case'),
  ofCases: (cases: number) => ` of ${cases}. `,
  showAll: 'Show all',
  aCaseIsOpened:
    'A case is opened from a cause, from a string, or by hand. It keeps the figures of that minute and looks again after it was closed.',
  thereIsNoCase: 'There is no case yet',
  dragACardOr: 'Drag a card, or focus it and press ',
  or: ' or ',
  toMoveIt: ' to move it; ',
  listsAllKeys: ' lists all keys.',
};

export const caseBoardBoard = {
  caseItem: (item: number) => `Case ${item}`,
  nothingHere: 'Nothing here.',
  nobodyYet: 'nobody yet',
  moveCaseTo: (item: number) => `Move case ${item} to`,
};

export const caseTable = {
  no: 'No.',
  case: 'Case',
  noString: 'no string',
  site: 'Site',
  state: 'State',
  assignedTo: 'Assigned to',
  nobody: 'nobody',
  due: 'Due',
  noDay: 'no day',
  changed: 'Changed',
  cases: 'Cases',
  noCaseFitsThese: 'No case fits these filters',
};

export const filters = {
  look: 'Look',
  board: 'Board',
  list: 'List',
  fewerFilters: 'Fewer filters',
  moreFilters: 'More filters',
  searchByTitleString: 'Search by title, string, person or number',
  searchCases: 'Search cases',
  whose: 'Whose',
  everybodys: 'Everybody’s',
  mine: 'Mine',
  nobodys: 'Nobody’s',
  overdue: 'Overdue',
  site: 'Site',
  allSites: 'All sites',
  kind: 'Kind',
  allKinds: 'All kinds',
  closed: 'Closed',
  of30Days: 'of 30 days',
  none: 'none',
  all: 'all',
};

export const caseBoardList = {
  noCaseIsOpen: 'No case is open',
  openOneFromA: 'Open one from a cause, from a string, or by hand; it keeps the figures of that minute.',
  areOverdue: (overdue: number) => `${overdue} ${overdue === 1 ? 'is' : 'are'} overdue`,
  noneIsOverdue: 'none is overdue',
  areYours: (mine: number) => `${mine} ${mine === 1 ? 'is' : 'are'} yours`,
  nobodyYet: (nobodys: number) => `${nobodys} ${nobodys === 1 ? 'has' : 'have'} nobody yet`,
  oneCaseIsOpen: 'One case is open',
  casesAreOpen: (open: number) => `${countAtStart(open)} cases are open`,
};
