import type { Card } from '../../components/ui/FigureSheet';
import { energy, money, percent } from '../../drawings/numbers';
import { longDate } from '../../drawings/times';
import type { CustomerSite } from '../../schemas/api/customer';
import { customerCards } from '../../words/customer';
import { LOCALE } from '../../words/language';

/** Words of the cards under the day's curve: month, life, working time, last shutdown test, who looks after it. */

const hours = (minutes: number): string =>
  minutes < 90 ? customerCards.minutesMin(Math.round(minutes)) : `${Math.round(minutes / 60)} h`;
/** A plain day, which belongs to no zone: 2026-03-12 → 12 March 2026. */
export const dayWords = (day: string): string => longDate(`${day}T12:00:00Z`, 'UTC');
const nameOfMonth = (day: string): string =>
  new Intl.DateTimeFormat(LOCALE, { month: 'long', timeZone: 'UTC' }).format(new Date(`${day}T12:00:00Z`));
/** 2026-11 → November 2026. */
export const monthWords = (month: string): string => `${nameOfMonth(`${month}-01`)} ${month.slice(0, 4)}`;

/** Within ±2.5 % of what the weather allowed counts as about the same: the model is no better than that. */
const ABOUT = 0.025;

export function monthCard(month: CustomerSite['month']): Card {
  const label = nameOfMonth(month.first);
  const figure = energy(month.energy);
  if (month.days === 0) return { label, figure, note: customerCards.noWholeDayYet };
  if (!month.expected || month.expected <= 0)
    return { label, figure, note: customerCards.withoutComparison(month.days) };
  const off = month.measured / month.expected - 1;
  if (Math.abs(off) <= ABOUT) return { label, figure, note: customerCards.aboutWhatItsWeather };
  return {
    label,
    figure,
    note: customerCards.whatItsWeatherAllowed(Math.abs(off), off),
  };
}

export function lifeCard(life: CustomerSite['life']): Card {
  if (!life) return { label: customerCards.sinceSwitchOn, figure: '–', note: customerCards.notSwitchedOnYet };
  const label = customerCards.sinceSwitchOn;
  if (!life.countedFrom) return { label, figure: energy(life.energy), note: dayWords(life.from) };
  return {
    label,
    figure: energy(life.energy),
    note: customerCards.countedFrom(dayWords(life.from), dayWords(life.countedFrom)),
  };
}

/** This calendar year so far; where the roof was switched on in it, since then. */
export function yearCard(year: CustomerSite['year'], life: CustomerSite['life']): Card {
  if (!year || !life)
    return { label: customerCards.thisYear, figure: '–', note: customerCards.notSwitchedOnYet };
  const since = life.countedFrom ?? life.from;
  return {
    label: year.first.slice(0, 4),
    figure: energy(year.energy),
    note: since > year.first ? customerCards.since(dayWords(since)) : customerCards.sinceJanuary,
  };
}

/** What the energy was worth, at the price that the organisation has entered for this roof. */
export function worthCard(worth: NonNullable<CustomerSite['worth']>): Card {
  const { currency, month, year, life, partly } = worth;
  const parts = [
    month === null ? '' : customerCards.thisMonth(month, currency),
    year === null ? '' : customerCards.worthThisYear(year, currency),
    partly ? customerCards.daysWithoutPrice : '',
  ];
  return {
    label: customerCards.worthSinceSwitchOn,
    figure: money(life, currency),
    note: parts.filter(Boolean).join(', '),
  };
}

export function workingTimeCard(life: CustomerSite['life']): Card {
  const label = customerCards.workingTimeSinceThen;
  if (!life || life.workingTime === null) return { label, figure: '–', note: customerCards.noFullDayYet };
  const { lostMinutes: lost, lostMinutesGrid: grid } = life;
  const gaps = life.completeness < 0.995 ? customerCards.readingsAreMissing(life.completeness) : '';
  // rounded up, 99.97 % would read as if nothing had been lost
  const shown = lost > 0 ? Math.min(life.workingTime, 0.999) : life.workingTime;
  const note =
    lost === 0
      ? customerCards.noHourOfDaylight
      : customerCards.lostOfItGrid(hours(lost), grid, lost, hours(grid));
  return { label, figure: percent(shown, 1), note: note + gaps };
}

const LIMITS: Partial<Record<CustomerSite['site']['ruleSet'], string>> = {
  rapid_shutdown_30s: customerCards.withinThirtySeconds,
  rapid_shutdown_10s: customerCards.withinTenSeconds,
};

/** What the last shutdown test showed, in words that promise no more than it did. */
export function testWords(
  test: CustomerSite['lastTest'],
  ruleSet: CustomerSite['site']['ruleSet'],
  timeZone: string,
): string {
  if (!test) return customerCards.noShutdownTest;
  const on = longDate(test.at, timeZone);
  const strings = customerCards.groupsOfModules(test.strings);
  switch (test.result) {
    case 'passed':
      return customerCards.lastTestedByMeasured(on, test.madeBy, test.strings, strings, LIMITS[ruleSet]);
    case 'failed':
      return customerCards.lastTestNotPassed(on, test.madeBy);
    case 'consistent':
      return customerCards.lastOperatedTheReadings(on);
    case 'not_witnessed':
      return customerCards.lastOperatedNothingShows(on);
  }
}

/** Where the switch is and what to do with that, for every roof that has one. */
export function switchWords(site: CustomerSite['site']): string {
  const where = site.shutdownSwitchPlace
    ? customerCards.whereTheSwitchIs(site.shutdownSwitchPlace)
    : customerCards.whereTheSwitchIsHas;
  return customerCards.evenShutDownModules(where);
}

/** Who looks after the roof; the person recorded at the site is the owner's own and is not named here. */
export const careWords = (care: CustomerSite['care']): string =>
  care.phone
    ? customerCards.looksAfterThisRoof(care.organisation)
    : customerCards.carerWithoutPhone(care.organisation);

/** What the dotted line is, so that nobody takes it for a promise. */
export const clearDayWords = (from: CustomerSite['today']['clearFrom']): string =>
  from === 'own_best' ? customerCards.dottedFromBestDays : customerCards.dottedFromDataSheet;
