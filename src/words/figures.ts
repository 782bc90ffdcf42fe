import { counted, energy, number, percent, quantity } from '../drawings/numbers';
import { longDate } from '../drawings/times';

export const fleetFiguresPage = {
  specificYield: 'Specific yield',
  ofAllModulesTogether: 'of all modules together',
  performanceRatio: 'Performance ratio',
  noSensorInAny: 'no sensor in any plane',
  atLightMeasuredIn: (performanceRatioStc: null | number, completenessLight: number) =>
    `at 25 °C ${number(performanceRatioStc, 3)}; light measured in ${percent(completenessLight)} of the time`,
  availability: 'Availability',
  ofLightLostOver: (lostMinutes: number) =>
    `${quantity(lostMinutes / 60, 'h', 1)} of light lost over all sites`,
  worth: 'Worth',
  data: 'Data',
  withoutPrice: (unpricedKWh: number) => `${energy(unpricedKWh * 1000)} without a price`,
  atEachDaysPrice: 'at each day’s price',
  ofTheReportsDue: 'of the reports due in daylight',
  site: 'Site',
  energy: 'Energy',
  yearBefore: 'Year before',
  kWhKWp: 'kWh/kWp',
  ratio: 'Ratio',
  at25C: 'At 25 °C',
  available: 'Available',
  sites: 'Sites',
  sites2: 'sites',
  rowsOfRows: (rows: number, rows2: number) => `${number(rows)} of ${number(rows2)}`,
  findASiteBy: 'Find a site by name or place',
  siteOrPlace: 'Site or place',
  figuresOfBySite: (period: string) => `Figures of ${period} by site`,
  noSiteIsCalled: 'No site is called that.',
};

export const importedSheet = {
  importedOn: (sum: number, days: number) => `Imported: ${energy(sum * 1000)} on ${counted(days, 'day')}`,
  dcFromTheStrings: 'DC, from the strings',
  fromAFile: 'from a file',
  wakelineMeasuredNothingOn: (label: string) =>
    `Wakeline measured nothing on these days of ${label}: they come from an imported file, unchecked, and count in no figure or ratio of this page.`,
  asATable: 'As a table',
  importedDaysOf: (label: string) => `Imported days of ${label}`,
  day: 'Day',
  energy: 'Energy',
  where: 'Where',
  invertersAc: 'inverters, AC',
  stringsDc: 'strings, DC',
};

export const periodPicker = {
  period: 'Period',
  beforePrevious: (previous: undefined | string) => `Before: ${previous ?? ''}`,
  afterNext: (next: string) => `After: ${next}`,
  theYear: (other: string) => `The year ${other}`,
  thisMonth: 'This month',
};

export const pricesSheet = {
  notSent: 'Not sent',
  itDidNotWork: 'It did not work. Try again.',
  priceOfAkWh: 'Price of a kWh',
  noCurrencySet: 'no currency set',
  aManagerSetsThe:
    'A manager sets the currency in the settings; prices are kept until then and shown afterwards.',
  noneIsSetSo: 'None is set, so energy is not priced.',
  fromWords: (from: string) => `From ${longDate(from, 'UTC')}: `,
  setBy: (currency: null | string, by: string) => ` ${currency ?? ''}, set by ${by}`,
  takeAway: 'Take away',
  takeAwayThePrice: (from: string) => `Take away the price from ${from}`,
  from: 'From',
  price: 'Price',
  setThisPrice: 'Set this price',
};

export const siteFiguresPage = {
  figures: 'Figures',
  monthReportPDF: 'Month report, PDF',
  daysCSV: 'Days, CSV',
  whereTheLightWent: 'Where the light went',
  estimatesQuartersOfAn: 'estimates; quarters of an hour with light and power',
  noSensorMeasuredThe:
    'No sensor measured the light in the plane, so nothing can be said of what the plant could have made.',
  dayByDay: 'Day by day',
  kWhKWpTheDeeper: 'kWh/kWp; the deeper, the more of the best day',
  daysOf: (period: string) => `Days of ${period}`,
  daysOf2: (period: string, ofDays: string) => `Days of ${period}. ${ofDays}`,
  rustEdgeMarksDay: (ofDays: string) => `${ofDays} A rust edge marks a day with missing data or lost light.`,
  yieldsAndRatiosFollow:
    'Yields and ratios follow IEC 61724-1. Each counts only quarters of an hour that have all it needs; how much that was stands beside it. Light is what the sensor in the plane measures: strings in other planes are measured by it too. Losses of causes are estimates and may overlap with dirt and shade.',
  lossNotKnown: 'loss not known',
  over: ', over',
  stillThere: ', still there',
  daysDays: (days: number) => `${counted(days, 'day')} as a table`,
  day: 'Day',
  energy: 'Energy',
  kWhKWp: 'kWh/kWp',
  ratio: 'Ratio',
  at25C: 'At 25 °C',
  kWhM: 'kWh/m²',
  lost: 'Lost',
  data: 'Data',
};

export const yearOnYear = {
  yearBesideYear: (year: number) => `${year} beside ${year - 1}`,
  filledOutline: (year: number) => `filled ${year}, outline ${year - 1}`,
  energyMonthByMonth: (year: number, month: string) =>
    `Energy month by month, ${year} beside ${year - 1}.${month}`,
  asATable: 'As a table',
  energyByMonthAnd: (year: number) => `Energy by month, ${year} and ${year - 1}`,
  month: 'Month',
  change: 'Change',
  ratio: 'Ratio',
  mostIn: (month: string, energyKWh: number) => ` Most in ${month}: ${energy(energyKWh * 1000)}.`,
};
