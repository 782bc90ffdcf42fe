import { number } from '../drawings/numbers';

export const designBoard = {
  open: 'Open',
  exceeded: 'Exceeded',
  cantTell: 'Can’t tell',
  within: 'Within',
  notRequired: 'Not required',
  all: 'All',
  commissioning: 'Commissioning',
  designChecks: 'Design checks',
  toTheAsBuilt: 'To the as-built',
  byWhatIsEntered:
    'By what is entered they may not shut down as the rule set asks. Shutdown is not isolation in any case: each module and its leads stay at module voltage.',
  treatAsLiveAfter: (live: string) => `Treat ${live} as live after a shutdown.`,
  theyHaveNoSlot: 'They have no slot yet.',
  notChecked: (stringsWithoutSlots: string) => `Not checked: ${stringsWithoutSlots}`,
  checks: 'Checks',
  rowsOfFindings: (rows: number, findings: number) => `${number(rows)} of ${number(findings)}`,
  filterChecksByString: 'Filter checks by string, clause or word',
  stringClauseOrWord: 'String, clause or word',
  whichOutcomes: 'Which outcomes',
  eachIsCheckedAs: 'Each is checked as soon as it has its slots.',
  noStringIsDrawn: 'No string is drawn yet',
  drawTheStrings: 'Draw the strings',
  nothingIsExceededAnd: 'Nothing is exceeded and nothing is left untold',
  showAllChecks: 'Show all checks',
  noCheckMatches: 'No check matches',
};

export const findingsTable = {
  outcome: 'Outcome',
  check: 'Check',
  againstLimit: (limit: string) => `against ${limit}`,
  strings: 'Strings',
  figure: 'Figure',
  limit: 'Limit',
  whatWasFoundAnd: 'What was found, and what to do',
  toDo: 'To do: ',
  orAlternatives: (alternatives: string) => `Or: ${alternatives}`,
  designChecksWithOutcome: 'Design checks with outcome, strings, figure, limit, clause and remedy',
};

export const inputsSheet = {
  estimated: 'Estimated',
  coldestExpectedAir: 'Coldest expected air',
  hottestExpectedAir: 'Hottest expected air',
  structure: 'Structure',
  ruleSet: 'Rule set',
  whatTheChecksWere: 'What the checks were made with',
  estimatedTemperaturesFollowFrom:
    'Estimated temperatures follow from latitude and altitude alone, on the wide side: with them a limit can be found kept, not exceeded. NEC 690.7 names ASHRAE’s extreme annual mean minimum as one source of the real figure. ',
  enterTheSitesOwn: 'Enter the site’s own in the as-built',
  datasheetsLimitsAndBehaviour:
    'Datasheets, limits and behaviour of modules, units, connectors and inverters are ',
  aCheckIsAs:
    ': a check is as right as its entry. Clauses are as quoted by others where no “from memory” stands beside them; the edition in force and the authority having jurisdiction decide.',
  thoseOfTheCatalogue: 'those of the catalogue',
};
