import { countAtStart, counted, energy, percent } from '../drawings/numbers';

export const noticeLetters = {
  helloPerson: (person: string) => `Hello ${person},`,
  andMore: (first: string, tellings: number) => `${first}, and ${tellings - 1} more`,
  foundAtTheSame: 'Found at the same moment:',
  each: 'Each',
  shutdownIsNotIsolation: 'Shutdown is not isolation.',
  eachModuleAndIts:
    'Each module and its leads to its unit stay at module voltage. Isolate, lock out, and prove dead with a rated meter; local code and the authority having jurisdiction come first.',
  atTheSite: 'At the site',
  shutdownSwitch: 'Shutdown switch',
  where: 'Where',
  site: 'Site',
  strings: 'Strings',
  since: 'Since',
  callTheSiteNow: (numberSaid: null | string) =>
    `Call the site now${numberSaid ? '' : ': its number is not entered in Wakeline'}. Nobody works on these strings until a licensed person has isolated them and proved them dead.`,
  callTheSite: 'Call the site',
  seeWhatHappened: 'See what happened',
  acknowledgeAndCall: 'Acknowledge and call the site',
  youGetThisLetter: (organisationName: string, fixed: undefined | string) =>
    `You get this letter because you look after sites for ${organisationName}. ${fixed ?? ''} It can’t be switched off.`,
  when: 'When',
  costsAbout: 'Costs about',
  lossADay: (lossWhDay: number) => `${energy(lossWhDay)} a day`,
  onTheLadder: (ladder: string) => `On the ladder: ${ladder}`,
  seeYourSite: 'See your site',
  lookAtIt: 'Look at it',
  youGetThisLetterBecause: (customer: boolean, site: string, organisationName: string, kind: string) =>
    `You get this letter because ${customer ? `you see ${site} in Wakeline` : `you look after sites for ${organisationName}`} and chose to be told of “${kind}” at once.`,
  noMoreLettersLike: 'No more letters like this one',
  whatYouAreTold: (publicUrl: string, paths: string) =>
    `What you are told of, and when: ${publicUrl}${paths}`,
  notShuttingDown: 'NOT SHUTTING DOWN: ',
};

export const accountLetters = {
  thisCantBeUsed: (what: string) =>
    `This ${what} can’t be used: it was used before, has run out, or was ended. Ask for a new one.`,
  helloPerson: (person: string) => `Hello ${person}`,
  askedForPassword: 'Somebody, most likely you, asked for a new password for Wakeline.',
  theLinkBelowWorks: (resetHours: number) =>
    `The link below works once, for ${resetHours} hours. Every device is signed out when the new password is set.`,
  setANewPassword: 'Set a new password',
  notYou: 'If it was not you, leave this letter: your password stays as it is.',
  newPasswordSubject: 'A new password for Wakeline',
};

export const noticeDigest = {
  youGetThisLetter: (organisationName: string, choicesLine: string) =>
    `You get this letter because you look after sites for ${organisationName}; it gathers what you are told of once a day or after quiet hours. ${choicesLine}`,
  noMoreOfThese: 'No more of these letters',
  itWentAndCame: (came: number) => ` It went and came back ${came === 1 ? 'once' : `${came} times`} since.`,
  toDo: (today: string, line: string) => `To do: ${today}${line}`,
  worthAboutDay: (lossWhDay: number, lossWhDay2: string) =>
    `Worth: about ${energy(lossWhDay)} a day${lossWhDay2}.`,
  worthWhatItCosts: 'Worth: what it costs is not known.',
  onTheLadder: (ladder: string) => `On the ladder: ${ladder}`,
  thingsToDo: (todo: number, lossWh: number, amount: string) =>
    `${countAtStart(todo)} ${todo === 1 ? 'thing' : 'things'} to do${lossWh > 0 ? `, worth about ${energy(lossWh)} a day${amount}` : ''}`,
  nothingToDo: (over: number) => `Nothing has to be done: ${counted(over, 'thing is', 'things are')} over`,
  nothingHasToBeDone: (kept: number) =>
    `Nothing has to be done at the roofs: ${counted(kept, 'thing', 'things')} to know`,
  dearestFirstEachSays:
    'Dearest first. Each says what to do, what it costs while it lasts, and what to tell the person on the ladder.',
  whatCameAndWent: 'What came and went since the last letter is below.',
  toDo2: 'To do',
  toKnow: 'To know',
  overByItself: 'Over by itself',
};

export const roofLetters = {
  noDataHeading: (siteName: string, period: string) => `No data came from ${siteName} in ${period}`,
  madeIn: (siteName: string, made: string, period: string) => `${siteName} made ${made} in ${period}`,
  helloPersonName: (personName: string) => `Hello ${personName},`,
  nothingKnown: (organisation: string) =>
    `Nothing is known of what your roof made. ${organisation} sees that too.`,
  yearBefore: (same: string, days: number, asked: number) =>
    `${same} a year before${days < asked ? ', days without data left out' : ''}.`,
  readingsMissing: (completeness: number) =>
    `${percent(1 - completeness)} of the readings are missing, so it may have been more.`,
  stoodStill: (lostMinutes: number, round: number, lostMinutesGrid: number) =>
    `It stood still for ${lostMinutes < 90 ? counted(lostMinutes, 'minute') : `${round} hours`} of daylight${lostMinutesGrid >= lostMinutes ? ', because the grid was gone' : ''}.`,
  nothingStoodOut: 'Nothing stood out.',
  energy: 'Energy',
  notKnown: 'not known',
  bestDay: 'Best day',
  worthAtYourPrice: 'Worth, at your price',
  readingsThatCame: 'Readings that came',
  lastShutdownTest: 'Last shutdown test',
  testNotPassed: 'not passed: treat the roof as live',
  testNotMeasured: 'not measured with a meter',
  noneOnRecord: 'none on record',
  modulesStayLiveIn: 'Modules stay live in light.',
  evenShutDownEvery:
    'Even shut down, every module and the cables right at it can give a dangerous shock. Leave the roof to qualified people.',
  lookAtYourRoof: 'Look at your roof',
  whyThisLetter: (organisation: string, phone: null | string, every: string) =>
    `${organisation} looks after this roof${phone ? `: ${phone}` : ''}. You asked for this letter each ${every}.`,
  chooseHowOftenIt: 'Choose how often it comes, or end it',
  aboutAsMuch: 'That is about as much as in the same days',
  comparedWith: (change: number, change2: number) =>
    `That is ${percent(change)} ${change2 < 0 ? 'less' : 'more'} than in the same days`,
};

export const letterPicture = {
  stringFirstWords: (first: string, words: string) => `String ${first}. ${words}`,
  andMore: (more: number) => `and ${more} more`,
  stringNameSlots: (name: string, slots: string) => `String ${name}: ${slots}`,
};

export const lettersSentLetter = {
  notShuttingDown: (finding: string) => `NOT SHUTTING DOWN: ${finding}`,
  drawingAlt: (alt: string) => `[Drawing: ${alt}]`,
};

export const lettersSentMakeHandover = {
  pointsOpen: (open: number) =>
    `${open === 1 ? 'One point still blocks' : `${open} points still block`} the handover. Settle each, or have a manager accept it by name.`,
  helloCustomer: (customer: string) => `Hello ${customer}`,
  handedOver: (site: string) =>
    `The solar system of ${site} has been handed over. Its papers are ready for you: how it is built, what was measured, and how to look after it.`,
  papersRenewed: (site: string, version: number) =>
    `The papers of ${site} have been renewed: this is version ${version}. The earlier versions stay available.`,
  keepPapers: 'Keep them where the people who work on the roof will find them.',
  seeYourSiteAnd: 'See your site and its papers',
  youGetThisLetter: (site: string) =>
    `You get this letter because you look after ${site}. It was sent by Wakeline for the people who built it.`,
  yourPapersAreReady: (site: string) => `${site}: your papers are ready`,
  newPapersVersion: (site: string, version: number) => `${site}: new papers, version ${version}`,
};
