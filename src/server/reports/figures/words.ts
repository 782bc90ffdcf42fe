import type { CalendarDay } from '../../../drawings/DayCalendar';
import type { LossBar } from '../../../drawings/LossBars';
import {
  counted,
  energy,
  listed,
  money,
  number,
  percent,
  quantity,
  UNKNOWN,
} from '../../../drawings/numbers';
import { longDate } from '../../../drawings/times';
import type { Compared, FleetFigures, SiteFigures } from '../../../schemas/api/figures';

/** What figures say in words; pages and the report on paper use the same. */

export interface FigureCard {
  label: string;
  figure: string;
  note: string;
}
const day = (key: string): string => longDate(`${key}T12:00:00Z`, 'UTC');
/** Smaller differences between two years are weather and chance. */
const ABOUT = 0.01;

/** "4 % less than November 2025"; null where there is nothing to compare with. */
export function changeWords(compared: Compared | null, than: string): string | null {
  if (compared === null || !(compared.beforeKWh > 0)) return null;
  const change = compared.nowKWh / compared.beforeKWh - 1;
  if (Math.abs(change) < ABOUT) return `about as much as ${than}`;
  return `${percent(Math.abs(change))} ${change < 0 ? 'less' : 'more'} than ${than}`;
}

const yearBeforeLabel = ({ period, elapsed }: SiteFigures | (FleetFigures & { elapsed?: null })): string => {
  const year = Number(period.key.slice(0, 4)) - 1;
  const label = period.kind === 'year' ? String(year) : `${period.label.split(' ')[0] ?? ''} ${year}`;
  return elapsed?.running ? `the same whole days of ${label}` : label;
};

/** Whether the period is not over. */
const running = (f: { today: string; period: SiteFigures['period'] }): boolean =>
  f.today < f.period.before && f.today >= f.period.from;

export function siteFinding(f: SiteFigures): { finding: string; sentence: string } {
  const { now, period, elapsed, site } = f;
  if (!elapsed || !now)
    return {
      finding: `Nothing is on record for ${period.label}`,
      sentence:
        site.firstDay === null
          ? `${site.name} has not made any energy that Wakeline knows of.`
          : period.from > f.today
            ? 'It lies ahead.'
            : `The record of ${site.name} begins on ${day(site.firstDay)}.`,
    };
  if (now.days === 0)
    return {
      finding: `No day of ${period.label} brought data`,
      sentence: `${counted(elapsed.days, 'day')} should have. Look at the site’s loggers.`,
    };
  const made = energy(now.energyKWh * 1000);
  const change = changeWords(f.compared, yearBeforeLabel(f));
  const parts = [
    change === null ? '' : running(f) ? `Up to yesterday ${change}.` : `That is ${change}.`,
    now.performanceRatio === null
      ? 'No sensor measured the light in the plane, so there is no performance ratio.'
      : `The performance ratio is ${number(now.performanceRatio, 2)}.`,
    now.completeness < 0.98
      ? `${percent(now.completeness)} of the data due have come: what is missing is in none of the figures.`
      : '',
  ];
  return {
    finding: elapsed.running
      ? `${site.name} has made ${made} so far in ${period.label}`
      : `${site.name} made ${made} in ${period.label}`,
    sentence: parts.filter(Boolean).join(' '),
  };
}

const share = (value: number | null, digits = 1): string =>
  value === null ? UNKNOWN : percent(value, digits);
const hoursWords = (minutes: number): string =>
  minutes < 90 ? quantity(minutes, 'min') : quantity(minutes / 60, 'h', 1);

export function siteCards(f: SiteFigures): FigureCard[] {
  const { now, currency, worth } = f;
  if (!now) return [];
  const light = `light measured in ${percent(now.completenessLight)} of the time`;
  return [
    {
      label: 'Energy, AC',
      figure: energy(now.energyKWh * 1000),
      note: changeWords(f.compared, yearBeforeLabel(f)) ?? 'no year before to compare',
    },
    {
      label: 'Specific yield',
      figure: quantity(now.specificYieldKWhKWp, 'kWh/kWp', 1),
      note:
        now.insolationKWhM2 === null
          ? 'no light measured in the plane'
          : `${quantity(now.insolationKWhM2, 'kWh/m²', 1)} fell into the plane`,
    },
    {
      label: 'Performance ratio',
      figure: number(now.performanceRatio, 3),
      note:
        now.performanceRatio === null
          ? 'needs a sensor in the plane'
          : `at 25 °C ${number(now.performanceRatioStc, 3)}${
              now.performanceRatioAnnual === null
                ? ''
                : `, at the year’s temperature ${number(now.performanceRatioAnnual, 3)}`
            }; ${light}`,
    },
    {
      label: 'Availability',
      figure: share(now.availability, 2),
      note:
        now.availability === null
          ? 'needs a sensor in the plane'
          : now.lostMinutes === 0
            ? 'no minute of light was lost'
            : `${hoursWords(now.lostMinutes)} of light lost${
                now.lostMinutesGrid > 0
                  ? `, ${hoursWords(now.lostMinutesGrid)} of them without grid: ${share(now.availabilityOwn, 2)} without those`
                  : ''
              }`,
    },
    {
      label: 'Data',
      figure: share(now.completeness),
      note: `of the reports due in daylight; ${counted(now.days, 'day')} of ${number(f.elapsed?.days ?? 0)}`,
    },
    currency === null
      ? { label: 'Worth', figure: UNKNOWN, note: 'no currency is set for your organisation' }
      : {
          label: 'Worth',
          figure: money(worth?.money ?? null, currency),
          note:
            worth === null
              ? 'no price a kWh is set'
              : worth.unpricedKWh > 0
                ? `${energy(worth.unpricedKWh * 1000)} of it without a price`
                : 'at the price of each day',
        },
  ];
}

/** The steps from light to energy as bars; what is nil is left out. */
export function lossBars(f: Pick<SiteFigures, 'steps'>): LossBar[] {
  const whole = f.steps?.[0]?.kWh ?? 0;
  return (f.steps ?? [])
    .filter(
      (s) => s.key === 'light' || s.key === 'made' || s.key === 'rest' || Math.abs(s.kWh) > whole * 5e-4,
    )
    .map((s) => ({
      label: s.label,
      kWh: s.kWh,
      total: s.key === 'light' || s.key === 'made',
      tone:
        s.key === 'made'
          ? 'petrol'
          : s.key === 'light'
            ? 'ink'
            : s.key === 'rest' || s.key === 'temperature'
              ? 'slate'
              : 'rust',
    }));
}

/** Each day of the part that has been, those without a record too. */
export function calendarDays(f: SiteFigures): CalendarDay[] {
  if (!f.elapsed) return [];
  const known = new Map(f.days.map((d) => [d.day, d.figures]));
  const yieldOf = (d: { specificYieldKWhKWp: number | null; energyKWh: number }): number =>
    d.specificYieldKWhKWp ?? d.energyKWh;
  const best = Math.max(1e-9, ...f.days.map((d) => yieldOf(d.figures)));
  const out: CalendarDay[] = [];
  const end = Date.parse(`${f.elapsed.before}T00:00:00Z`);
  for (let at = Date.parse(`${f.elapsed.from}T00:00:00Z`); at < end; at += 86_400_000) {
    const key = new Date(at).toISOString().slice(0, 10);
    const d = known.get(key);
    if (!d) {
      out.push({ day: key, share: null, text: '', words: `${day(key)}: no record`, marked: true });
      continue;
    }
    const odd = [
      d.completeness < f.incompleteBelow && key !== f.today ? `${percent(d.completeness)} of the data` : '',
      d.lostMinutes > 0 ? `${hoursWords(d.lostMinutes)} of light lost` : '',
    ].filter(Boolean);
    const words = [
      energy(d.energyKWh * 1000),
      d.specificYieldKWhKWp === null ? '' : quantity(d.specificYieldKWhKWp, 'kWh/kWp', 2),
      d.performanceRatio === null ? '' : `performance ratio ${number(d.performanceRatio, 2)}`,
      ...odd,
    ].filter(Boolean);
    out.push({
      day: key,
      share: yieldOf(d) / best,
      text: number(yieldOf(d), 1),
      words: `${day(key)}: ${words.join(', ')}`,
      marked: odd.length > 0,
    });
  }
  return out;
}

/** What a month's days say together: the best, and what to look at. */
export function calendarWords(days: readonly CalendarDay[]): string {
  const known = days.filter((d) => d.share !== null);
  const best = known.reduce<CalendarDay | null>(
    (b, d) => (b === null || (d.share ?? 0) > (b.share ?? 0) ? d : b),
    null,
  );
  const marked = days.filter((d) => d.marked).map((d) => Number(d.day.slice(8)));
  return [
    best ? `Best: ${best.words}.` : '',
    marked.length === 0
      ? ''
      : marked.length > 8
        ? `${marked.length} days are marked.`
        : `Marked: ${listed(marked)}.`,
  ]
    .filter(Boolean)
    .join(' ');
}

export function fleetFinding(f: FleetFigures): { finding: string; sentence: string } {
  if (f.rows.length === 0 || !f.total)
    return {
      finding: `Nothing is on record for ${f.period.label}`,
      sentence: f.period.from > f.today ? 'It lies ahead.' : 'No operating site has a day in it.',
    };
  const year = Number(f.period.key.slice(0, 4)) - 1;
  const than = running(f)
    ? 'the same whole days a year before'
    : f.period.kind === 'year'
      ? String(year)
      : `${f.period.label.split(' ')[0] ?? ''} ${year}`;
  const change = changeWords(f.compared, than);
  const made = energy(f.total.energyKWh * 1000);
  const low = f.rows.filter((r) => r.now.completeness < 0.9).map((r) => r.site.name);
  return {
    finding: `${counted(f.rows.length, 'site')} ${f.rows.length === 1 ? 'has' : 'have'} made ${made} in ${f.period.label}${running(f) ? ' so far' : ''}`,
    sentence: [
      change === null ? '' : running(f) ? `Up to yesterday ${change}.` : `That is ${change}.`,
      low.length > 0
        ? `Under 90 % of the data came from ${low.length > 3 ? counted(low.length, 'site') : listed(low)}: their figures are low by what is missing.`
        : '',
      f.without.length > 0
        ? `No data at all from ${f.without.length > 3 ? counted(f.without.length, 'site') : listed(f.without)}.`
        : '',
    ]
      .filter(Boolean)
      .join(' '),
  };
}

/** All that a site's page says, ready to be set. */
export const siteWords = (f: SiteFigures) => {
  const days = calendarDays(f);
  return { ...siteFinding(f), cards: siteCards(f), bars: lossBars(f), days, ofDays: calendarWords(days) };
};
export type SiteWords = ReturnType<typeof siteWords>;
