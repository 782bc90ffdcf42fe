import { countAtStart, counted, energy, number, percent, quantity } from '../drawings/numbers';

export const causeCard = {
  whatToTreatAs: 'What to treat as live',
  isolateLockOutProve:
    'Isolate, lock out, prove dead with a rated meter at each home run before anybody touches a conductor. Shutdown is not isolation: each module and its leads to its unit stay at module voltage. Local code and qualified people come first. Wakeline watches; it can’t switch anything off.',
  treatEveryStringOf: 'Treat every string of this site as live.',
  callContact: (contact: undefined | string, siteName: string) => `Call ${contact || siteName}`,
  whoIsOnSite:
    'Who is on site must not rely on the shutdown. A hazard can’t be muted, only taken on with a name.',
  string: 'String ',
  theStringAsA: 'the string as a whole; positions unknown',
  aDay: ' a day',
  whatShowsIt: 'What shows it',
  confidenceSure: (confidence: number) => `${percent(confidence)} sure`,
  itCouldAlsoBe: (alternatives: string) => `It could also be: ${alternatives}.`,
  whatToCheckFirst: 'What to check first',
  beforeAnybodyActs: 'Before anybody acts:',
  whatTheyShare: (sharedPart: string) => `What they share: ${sharedPart}`,
  where: 'Where',
  whatItCosts: 'What it costs',
  about: 'About',
  untilNow: 'So far',
  itIsNoMatter: 'It is no matter of energy.',
  notKnown: 'Not known.',
  noMoneyIsShown: (currency: null | string) =>
    `No money is shown: ${currency === null ? 'the organisation has no currency set' : 'the site has no price of a kWh'}.`,
  whatHappened: 'What happened',
  itBeganAsFar: 'It began, as far as reports show',
};

export const causesList = {
  open: 'open',
  over: 'over',
  openAndOver: 'open and over',
  gravestFirst: 'gravest first',
  newestFirst: 'newest first',
  oldestFirst: 'oldest first',
  costliestFirst: 'costliest first',
  aDay: ' a day',
  untilNow: ' so far',
  over2: 'Over',
  cameBackReopened1: (reopened: number) => `came back ${reopened === 1 ? 'once' : `${reopened} times`}`,
  since: 'since ',
  over3: 'over ',
  hasIt: (person: string) => `${person} has it`,
  caseOpenCase: (openCase: number) => `Case ${openCase}`,
  findACauseBy: 'Find a cause by words, site, string or serial',
  wordsSiteStringOr: 'Words, site, string or serial',
  show: 'Show',
  kind: 'Kind',
  any: 'any',
  site: 'Site',
  order: 'Order',
  nothingFits: 'Nothing fits',
  noCause: 'No cause',
  lookAtAllKinds: 'Look at all kinds and sites, or use fewer words.',
  whatEndedLatelyIs: 'What ended lately is under "over".',
  nothingWasFoundIn: 'Nothing was found in the last 90 days.',
  causes: 'Causes',
  causesMore: (causes: number, more: boolean) => `${causes}${more ? ' and more: narrow the list' : ''}`,
  stringsThatMakeLess: 'Strings that make less than they should',
};

export const causesFigures = {
  lowToHigh: (low: string, high: string) => `${low} to ${high}`,
  ratioOfExpectedZ: (ratio: number, z: null | number, low: boolean) =>
    `${percent(ratio)} of expected${z === null ? '' : `, z ${number(z, 1)}`}${low ? '' : ' (not low)'}`,
  lowBelow: 'Low below',
  missingNineTimesIn: 'Missing, nine times in ten',
  voltageOverTheOthers: 'Voltage over the others’',
  currentOverTheOthers: 'Current over the others’',
  voltageMissingInModules: 'Voltage missing, in modules',
  heldAgainst: 'Held against',
  theStringsOfIts: 'the strings of its plane',
  theModelTooFew: 'the model: too few strings to compare',
  moreThan: (comparedWith: string) => `More than ${comparedWith}`,
  n95Sure: '95 % sure',
  wholeLoop: 'Whole loop',
  lookedAtAbove: 'Looked at above',
  heatAt: (highestA: number) => `Heat at ${quantity(highestA, 'A', 1)}`,
  samples: 'Samples',
  voltageOverItsNeighbours: 'Voltage over its neighbours’',
  shareOfTheQuarters: 'Share of the quarters under load',
  weakBelow: 'Weak below',
  positionOffItsOwn: (which: string, position: number) => `${which} position ${position}, off its own string`,
  notKnown: 'not known',
  positionOff: (which: string, position: number, otherString: null | string) =>
    `${which} position ${position}, off ${otherString ?? 'the other'}`,
};

export const causesWords = {
  treatEveryStringOf:
    'Treat every string of this site as live and call the site. Nobody may rely on its shutdown until a rated meter shows otherwise.',
  theseUnitsHoldBack: 'These units hold back their modules’ power though nothing commands shutdown.',
  shutdownIsCommandedAnd:
    'Shutdown is commanded and nothing shows that these units followed. Treat their strings as live.',
  whetherTheseUnitsFollow:
    'Whether these units follow a shutdown can’t be confirmed until they are heard again.',
  itMakesLessThan: 'It makes less than it should, on most days with enough sun.',
  somethingBetweenTheUnits:
    'Something between the units and the inverter’s input takes up voltage and turns it into heat: most often a connector.',
  theDrawingMayBe: 'The drawing may be wrong: who isolates a string by it could open the wrong one.',
  itsNeighboursUnderThe:
    'Its neighbours under the same light give more. The module, its cells or what lies on it.',
  atNames: (names: undefined | string) => `at ${names ?? ''}`,
  atNames2: (names: number) => `at ${counted(names, 'site')}`,
  endedInTheLast: (causes: number) =>
    `${causes === 0 ? 'No' : countAtStart(causes)} ${causes === 1 ? 'cause' : 'causes'} ended in the last 90 days`,
  whatWasFoundWhat: 'What was found, what it cost, and when it was over.',
  treatEveryStringThere: 'Treat every string there as live and call the site before anything else.',
  nothingFits: 'Nothing fits',
  lookAtAllKinds: 'Look at all kinds and sites, or use fewer words.',
  nothingNeedsAttention: 'Nothing needs attention',
  noCauseIsOpen: 'No cause is open. Night, dark weather, commanded shutdown and planned works are none.',
  causesAreOpen: (open: number, open2: string) =>
    `${countAtStart(open)} ${open === 1 ? 'cause is' : 'causes are'} open ${open2}`,
  togetherTheyCostAbout: (perDay: number) =>
    `Together they cost about ${energy(perDay)} a day. The gravest come first.`,
  theGravestComeFirst: 'The gravest come first.',
  doNotShutDown: (n: number, one: string) =>
    `${countAtStart(n)} ${n === 1 ? `${one} does` : `${one}s do`} not shut down`,
  countedStringsString: (strings: number) => counted(strings, 'string'),
  stringPosition: (stringName: string, position: null | number) =>
    `${stringName}, position ${position ?? ''}`,
  unitsOfWhere: (units: number, where: string) => `${counted(units, 'unit')} of ${where}`,
};
