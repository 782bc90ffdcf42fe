import { counted, energy, money, percent } from '../drawings/numbers';
import { clockOrDate, longDate, zoneName } from '../drawings/times';

export const letterSheet = {
  noLetter: 'No letter',
  eachWeek: 'Each week',
  eachMonth: 'Each month',
  noLetterIsSent: 'No letter is sent to you about this roof.',
  weeklyComes: 'A letter comes on Mondays, about the week before.',
  monthlyComes: 'A letter comes on the first of the month, about the month before.',
  notChanged: (message: string) => `Not changed: ${message}`,
  notChangedTryAgain: 'Not changed. Try again.',
  title: 'A letter about this roof',
  howOften: 'How often',
};

export const reportSheet = {
  beingLookedAt: 'being looked at',
  beingLookedAtWaiting: 'being looked at; waiting for a part or a visit',
  done: 'done',
  lookedAtNoFault: 'looked at: no fault was found',
  notSent: 'It could not be sent. What you wrote is still here; try again.',
  somethingLooksWrong: 'Something looks wrong?',
  sayWhatYouSee: (organisation: string) =>
    `Say what you see. ${organisation} gets it at once, with what your roof is doing at this minute. In an emergency call the emergency services, and keep away from modules and cables.`,
  whatLooksWrong: 'What looks wrong',
  sending: 'Sending',
  sendTo: (organisation: string) => `Send to ${organisation}`,
  shownBelow: 'How it stands is shown below.',
  sent: (organisation: string) => `Sent: ${organisation} has it`,
  whatYouReported: 'What you reported',
  reportLine: (at: string, timeZone: string, n: number, state: string, closedAt: null | string) =>
    `${longDate(at, timeZone)}, number ${n}: ${state}${closedAt ? ` since ${longDate(closedAt, timeZone)}` : ''}`,
};

export const roofList = {
  askForAccess: (organisation: string) => `Ask ${organisation} to give you access to yours.`,
  noRoofYet: 'No roof has been given to you yet',
};

export const roofPage = {
  papers: 'Papers',
  monthPdf: (month: string) => `${month}, PDF`,
  whatYourRoofMade: 'What your roof made, month by month:',
  earlierMonths: 'Earlier months',
  handoverSays: (newest: string) =>
    `How your system is built, what was measured, and how to look after it, as of ${newest}. Keep a copy where the people who work on the roof will find it.`,
  handoverPapersPdf: 'Handover papers, PDF',
  earlierVersions: 'Earlier versions',
  versionOfPaper: (version: number, paper: string) => `Version ${version}, ${paper}`,
  asOf: (at: string, now: string, timeZone: string, readerZone: null | string, at2: boolean) =>
    `As of ${clockOrDate(at, now, timeZone)}${readerZone && at2 ? ` ${zoneName(at, timeZone)}, the time at the roof` : ''}.`,
  notReadSince: ' It could not be read again since; the next try follows by itself.',
  rapidShutdown: 'Rapid shutdown',
  whoLooksAfterIt: 'Who looks after it',
  emergency: 'In an emergency call the emergency services first.',
};

export const todaySheet = {
  nothingKnown: 'Nothing is known of today yet; the dotted line is a clear day of this date.',
  powerMadeTodayN: (n: number, clearEnergyUntilNow: number) =>
    `Power made today, ${energy(n)} so far, beside a clear day of this date${clearEnergyUntilNow > 0 ? `: ${percent(n / clearEnergyUntilNow)} of it by now` : ''}.`,
  today: 'Today',
  solidMade: (clearFrom: string) => `solid: made · ${clearFrom}`,
  nothingIsKnownOfToday: 'Nothing is known of today yet.',
  sameAsTable: 'The same as a table',
  todayAsATable: 'Today as a table',
  meanPowerOfEach: 'Mean power of each quarter of an hour',
  from: 'From',
  madeKw: 'Made (kW)',
  clearDayKw: 'Clear day (kW)',
};

export const customerCards = {
  minutesMin: (minutes: number) => `${minutes} min`,
  noWholeDayYet: 'no day of this month is complete yet',
  withoutComparison: (days: number) => `${counted(days, 'day')}, without a comparison`,
  aboutWhatItsWeather: 'about what its weather allowed',
  whatItsWeatherAllowed: (off: number, off2: number) =>
    `${percent(off)} ${off2 < 0 ? 'under' : 'over'} what its weather allowed`,
  sinceSwitchOn: 'Since switch-on',
  notSwitchedOnYet: 'not switched on yet',
  countedFrom: (from: string, countedFrom: string) => `${from}; counted from ${countedFrom}`,
  thisYear: 'This year',
  since: (since: string) => `since ${since}`,
  sinceJanuary: 'since the first of January',
  thisMonth: (month: number, currency: string) => `${money(month, currency)} this month`,
  worthThisYear: (year: number, currency: string) => `${money(year, currency)} this year`,
  daysWithoutPrice: 'days without a price left out',
  worthSinceSwitchOn: 'Worth since switch-on',
  workingTimeSinceThen: 'Working time since then',
  noFullDayYet: 'no full day yet',
  readingsAreMissing: (completeness: number) =>
    `; readings of ${percent(1 - completeness, 1)} of the time are missing`,
  noHourOfDaylight: 'no hour of daylight lost',
  lostOfItGrid: (lost: string, grid: number, lost2: number, grid2: string) =>
    `${lost} lost${grid > 0 ? `, ${grid >= lost2 ? 'all' : grid2} of it grid outage` : ''}`,
  withinThirtySeconds: ' below 30 V within 30 seconds',
  withinTenSeconds: ' below 30 V within 10 seconds',
  noShutdownTest: 'No shutdown test is on record for this roof.',
  groupsOfModules: (strings: number) => counted(strings, 'group of modules', 'groups of modules'),
  lastTestedByMeasured: (
    on: string,
    madeBy: string,
    strings: number,
    strings2: string,
    ruleSet: undefined | string,
  ) =>
    `Last tested ${on} by ${madeBy}: ${strings === 1 ? '' : 'all '}${strings2} measured${ruleSet ?? ' as required'}, by meter.`,
  lastTestNotPassed: (on: string, madeBy: string) =>
    `Last tested ${on} by ${madeBy}: not passed. Treat the roof as live, also with the switch operated.`,
  lastOperatedTheReadings: (on: string) =>
    `Last operated ${on}: the readings agree with a shutdown, but nobody measured it with a meter. That is no test.`,
  lastOperatedNothingShows: (on: string) =>
    `Last operated ${on}: nothing shows whether it worked. That is no test.`,
  whereTheSwitchIs: (shutdownSwitchPlace: string) =>
    `Where the switch is: ${shutdownSwitchPlace}. In a fire, tell the crew it is there; never rely on this page.`,
  whereTheSwitchIsHas:
    'Where the switch is has not been recorded here. In a fire, tell the crew what you know; never rely on this page.',
  evenShutDownModules: (where: string) =>
    `${where} Even shut down, modules and the cables at them stay live in light.`,
  looksAfterThisRoof: (organisation: string) => `${organisation} looks after this roof.`,
  carerWithoutPhone: (organisation: string) =>
    `${organisation} looks after this roof; no telephone number is recorded.`,
  dottedFromBestDays: 'dotted: a clear day of this date, as this roof does on its best days',
  dottedFromDataSheet: 'dotted: a clear day of this date, reckoned from the data sheet',
};
