import type { Card } from '../../components/ui/FigureSheet';
import { counted, energy, money, percent } from '../../drawings/numbers';
import { longDate } from '../../drawings/times';
import type { CustomerSite } from '../../schemas/api/customer';

/** Words of the cards under the day's curve: month, life, working time, last shutdown test, who looks after it. */

const hours = (minutes: number): string =>
  minutes < 90 ? `${Math.round(minutes)} min` : `${Math.round(minutes / 60)} h`;
/** A plain day, which belongs to no zone: 2026-03-12 → 12 March 2026. */
export const dayWords = (day: string): string => longDate(`${day}T12:00:00Z`, 'UTC');
const nameOfMonth = (day: string): string =>
  new Intl.DateTimeFormat('en-GB', { month: 'long', timeZone: 'UTC' }).format(new Date(`${day}T12:00:00Z`));
/** 2026-11 → November 2026. */
export const monthWords = (month: string): string => `${nameOfMonth(`${month}-01`)} ${month.slice(0, 4)}`;

/** Within ±2.5 % of what the weather allowed counts as about the same: the model is no better than that. */
const ABOUT = 0.025;

export function monthCard(month: CustomerSite['month']): Card {
  const label = nameOfMonth(month.first);
  const figure = energy(month.energy);
  if (month.days === 0) return { label, figure, note: 'no day of this month is complete yet' };
  if (!month.expected || month.expected <= 0)
    return { label, figure, note: `${counted(month.days, 'day')}, without a comparison` };
  const off = month.measured / month.expected - 1;
  if (Math.abs(off) <= ABOUT) return { label, figure, note: 'about what its weather allowed' };
  return {
    label,
    figure,
    note: `${percent(Math.abs(off))} ${off < 0 ? 'under' : 'over'} what its weather allowed`,
  };
}

export function lifeCard(life: CustomerSite['life']): Card {
  if (!life) return { label: 'Since switch-on', figure: '–', note: 'not switched on yet' };
  const label = 'Since switch-on';
  if (!life.countedFrom) return { label, figure: energy(life.energy), note: dayWords(life.from) };
  return {
    label,
    figure: energy(life.energy),
    note: `${dayWords(life.from)}; counted from ${dayWords(life.countedFrom)}`,
  };
}

/** This calendar year so far; where the roof was switched on in it, since then. */
export function yearCard(year: CustomerSite['year'], life: CustomerSite['life']): Card {
  if (!year || !life) return { label: 'This year', figure: '–', note: 'not switched on yet' };
  const since = life.countedFrom ?? life.from;
  return {
    label: year.first.slice(0, 4),
    figure: energy(year.energy),
    note: since > year.first ? `since ${dayWords(since)}` : 'since the first of January',
  };
}

/** What the energy was worth, at the price that the organisation has entered for this roof. */
export function worthCard(worth: NonNullable<CustomerSite['worth']>): Card {
  const { currency, month, year, life, partly } = worth;
  const parts = [
    month === null ? '' : `${money(month, currency)} this month`,
    year === null ? '' : `${money(year, currency)} this year`,
    partly ? 'days without a price left out' : '',
  ];
  return {
    label: 'Worth since switch-on',
    figure: money(life, currency),
    note: parts.filter(Boolean).join(', '),
  };
}

export function workingTimeCard(life: CustomerSite['life']): Card {
  const label = 'Working time since then';
  if (!life || life.workingTime === null) return { label, figure: '–', note: 'no full day yet' };
  const { lostMinutes: lost, lostMinutesGrid: grid } = life;
  const gaps =
    life.completeness < 0.995
      ? `; readings of ${percent(1 - life.completeness, 1)} of the time are missing`
      : '';
  // rounded up, 99.97 % would read as if nothing had been lost
  const shown = lost > 0 ? Math.min(life.workingTime, 0.999) : life.workingTime;
  const note =
    lost === 0
      ? 'no hour of daylight lost'
      : `${hours(lost)} lost${grid > 0 ? `, ${grid >= lost ? 'all' : hours(grid)} of it grid outage` : ''}`;
  return { label, figure: percent(shown, 1), note: note + gaps };
}

const LIMITS: Partial<Record<CustomerSite['site']['ruleSet'], string>> = {
  rapid_shutdown_30s: ' below 30 V within 30 seconds',
  rapid_shutdown_10s: ' below 30 V within 10 seconds',
};

/** What the last shutdown test showed, in words that promise no more than it did. */
export function testWords(
  test: CustomerSite['lastTest'],
  ruleSet: CustomerSite['site']['ruleSet'],
  timeZone: string,
): string {
  if (!test) return 'No shutdown test is on record for this roof.';
  const on = longDate(test.at, timeZone);
  const strings = counted(test.strings, 'group of modules', 'groups of modules');
  switch (test.result) {
    case 'passed':
      return `Last tested ${on} by ${test.madeBy}: ${test.strings === 1 ? '' : 'all '}${strings} measured${LIMITS[ruleSet] ?? ' as required'}, by meter.`;
    case 'failed':
      return `Last tested ${on} by ${test.madeBy}: not passed. Treat the roof as live, also with the switch operated.`;
    case 'consistent':
      return `Last operated ${on}: the readings agree with a shutdown, but nobody measured it with a meter. That is no test.`;
    case 'not_witnessed':
      return `Last operated ${on}: nothing shows whether it worked. That is no test.`;
  }
}

/** Where the switch is and what to do with that, for every roof that has one. */
export function switchWords(site: CustomerSite['site']): string {
  const where = site.shutdownSwitchPlace
    ? `Where the switch is: ${site.shutdownSwitchPlace}. In a fire, tell the crew it is there; never rely on this page.`
    : 'Where the switch is has not been recorded here. In a fire, tell the crew what you know; never rely on this page.';
  return `${where} Even shut down, modules and the cables at them stay live in light.`;
}

/** Who looks after the roof; the person recorded at the site is the owner's own and is not named here. */
export const careWords = (care: CustomerSite['care']): string =>
  care.phone
    ? `${care.organisation} looks after this roof.`
    : `${care.organisation} looks after this roof; no telephone number is recorded.`;

/** What the dotted line is, so that nobody takes it for a promise. */
export const clearDayWords = (from: CustomerSite['today']['clearFrom']): string =>
  from === 'own_best'
    ? 'dotted: a clear day of this date, as this roof does on its best days'
    : 'dotted: a clear day of this date, reckoned from the data sheet';
