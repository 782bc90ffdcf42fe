import { counted, energy, number, percent, quantity } from '../drawings/numbers';

export const papersFiguresMonthReport = {
  asOfFingerprintOf: (date: string, fingerprint: string) =>
    `As of ${date} · fingerprint of the data (SHA-256) ${fingerprint}`,
  monthReport: (organisation: string) => `${organisation} · month report`,
  theMonthIsNot: (date: string) => `The month is not over: the figures stand as of ${date}.`,
  figures: 'Figures',
  whereTheLightWent: 'Where the light went',
  dayByDay: 'Day by day',
  rustEdgeMarksDay: (ofDays: string) => `${ofDays} A rust edge marks a day with missing data or lost light.`,
  yearBesideYear: (year: number) => `${year} beside ${year - 1}`,
  month: 'Month',
  change: 'Change',
  ratioYear: (year: number) => `Ratio ${year}`,
  whatWasWrong: 'What was wrong',
  cause: 'Cause',
  since: 'Since',
  until: 'Until',
  lossInTheMonth: 'Loss in the month',
  stillThere: 'still there',
  notKnown: 'not known',
  noCauseWasFound: 'No cause was found in this month.',
  theDays: 'The days',
  day: 'Day',
  energy: 'Energy',
  ratio: 'Ratio',
  at25C: 'At 25 °C',
  lost: 'Lost',
  data: 'Data',
  howItIsReckoned: 'How it is reckoned',
  yieldsAndRatiosFollow:
    'Yields and ratios follow IEC 61724-1. Each counts only quarters of an hour that have all it needs; how much that was stands beside it. Light is what the sensor in the plane measures: strings in other planes are measured by it too. Losses of causes are estimates and may overlap with dirt and shade. Wakeline watches and never switches; no figure here says that anything may be touched.',
};

export const papersFiguresWords = {
  aboutAsMuchAs: (than: string) => `about as much as ${than}`,
  changeChangeThanThan: (change: number, change2: number, than: string) =>
    `${percent(change)} ${change2 < 0 ? 'less' : 'more'} than ${than}`,
  theSameDaysOf: (label: string) => `the same days of ${label}, those without data left out`,
  theSameWholeDays: (label: string) => `the same whole days of ${label}`,
  nothingIsOnRecord: (period: string) => `Nothing is on record for ${period}`,
  hasNotMadeAny: (site: string) => `${site} has not made any energy that Wakeline knows of.`,
  itLiesAhead: 'It lies ahead.',
  theRecordOfBegins: (site: string, firstDay: string) => `The record of ${site} begins on ${firstDay}.`,
  noDayOfBrought: (period: string) => `No day of ${period} brought data`,
  shouldHaveLookAt: (days: number) => `${counted(days, 'day')} should have. Look at the site’s loggers.`,
  upToYesterday: (change: string) => `Up to yesterday ${change}.`,
  thatIs: (change: string) => `That is ${change}.`,
  noSensorMeasuredThe: 'No sensor measured the light in the plane, so there is no performance ratio.',
  thePerformanceRatioIs: (performanceRatio: number) =>
    `The performance ratio is ${number(performanceRatio, 2)}.`,
  ofTheDataDue: (completeness: number) =>
    `${percent(completeness)} of the data due have come: what is missing is in none of the figures.`,
  hasMadeUntilNow: (site: string, made: string, period: string) =>
    `${site} has made ${made} so far in ${period}`,
  madeIn: (site: string, made: string, period: string) => `${site} made ${made} in ${period}`,
  lightMeasuredInOf: (completenessLight: number) =>
    `light measured in ${percent(completenessLight)} of the time`,
  energyAC: 'Energy, AC',
  noYearBeforeTo: 'no year before to compare',
  specificYield: 'Specific yield',
  noLightMeasuredIn: 'no light measured in the plane',
  fellIntoThePlane: (insolationKWhM: number) =>
    `${quantity(insolationKWhM, 'kWh/m²', 1)} fell into the plane`,
  performanceRatio: 'Performance ratio',
  needsASensorIn: 'needs a sensor in the plane',
  at25CPerformanceRatioStc: (
    performanceRatioStc: null | number,
    performanceRatioAnnual: null | number,
    light: string,
  ) =>
    `at 25 °C ${number(performanceRatioStc, 3)}${performanceRatioAnnual === null ? '' : `, at the year’s temperature ${number(performanceRatioAnnual, 3)}`}; ${light}`,
  availability: 'Availability',
  noMinuteOfLight: 'no minute of light was lost',
  lostMinutesOfLightLost: (
    lostMinutes: string,
    lostMinutesGrid: number,
    lostMinutesGrid2: string,
    availabilityOwn: string,
  ) =>
    `${lostMinutes} of light lost${lostMinutesGrid > 0 ? `, ${lostMinutesGrid2} of them without grid: ${availabilityOwn} without those` : ''}`,
  data: 'Data',
  ofTheReportsDue: (days: number, days2: undefined | number) =>
    `of the reports due in daylight; ${counted(days, 'day')} of ${number(days2 ?? 0)}`,
  worth: 'Worth',
  noCurrencyIsSet: 'no currency is set for your organisation',
  noPriceAKWh: 'no price a kWh is set',
  ofItWithoutPrice: (unpricedKWh: number) => `${energy(unpricedKWh * 1000)} of it without a price`,
  atThePriceOf: 'at the price of each day',
  noRecord: (key: string) => `${key}: no record`,
  ofTheData: (completeness: number) => `${percent(completeness)} of the data`,
  ofLightLost: (lostMinutes: string) => `${lostMinutes} of light lost`,
  performanceRatio2: (performanceRatio: number) => `performance ratio ${number(performanceRatio, 2)}`,
  bestBest: (best: string) => `Best: ${best}.`,
  daysAreMarked: (marked: number) => `${marked} days are marked.`,
  markedMarked: (marked: string) => `Marked: ${marked}.`,
  noOperatingSiteHas: 'No operating site has a day in it.',
  theSameWholeDaysA: 'the same whole days a year before',
  madeIn2: (rows: number, made: string, period: string, f: boolean) =>
    `${counted(rows, 'site')} ${rows === 1 ? 'has' : 'have'} made ${made} in ${period}${f ? ' so far' : ''}`,
  underOfTheData: (low: number, low2: string) =>
    `Under 90 % of the data came from ${low > 3 ? counted(low, 'site') : low2}: their figures are low by what is missing.`,
  noDataAtAll: (without: number, without2: string) =>
    `No data at all from ${without > 3 ? counted(without, 'site') : without2}.`,
};
