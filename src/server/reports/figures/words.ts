import { isRunning } from '../../../domain/output/period';
import type { CalendarDay } from '../../../drawings/DayCalendar';
import type { LossBar } from '../../../drawings/loss-bars';
import { energy, listed, money, number, percent, quantity, UNKNOWN } from '../../../drawings/numbers';
import { longDate } from '../../../drawings/times';
import type { Compared, FleetFigures, SiteFigures } from '../../../schemas/api/figures';
import { periodLabels } from '../../../words/domain-periods';
import { papersFiguresWords } from '../../../words/papers-figures';

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
  if (Math.abs(change) < ABOUT) return papersFiguresWords.aboutAsMuchAs(than);
  return papersFiguresWords.changeChangeThanThan(Math.abs(change), change, than);
}

/** What the same period of another year is called. */
const labelIn = (year: number, { kind, key }: Pick<SiteFigures['period'], 'kind' | 'key'>): string =>
  kind === 'year' ? String(year) : periodLabels.month(Number(key.slice(5)), year);

const yearBeforeLabel = ({
  period,
  elapsed,
  compared,
}: SiteFigures | (FleetFigures & { elapsed?: null })): string => {
  const year = Number(period.key.slice(0, 4)) - 1;
  const label = labelIn(year, period);
  if (compared && compared.missing > 0) return papersFiguresWords.theSameDaysOf(label);
  return elapsed?.running ? papersFiguresWords.theSameWholeDays(label) : label;
};

/** Whether the period is not over. */
const running = (f: { today: string; period: SiteFigures['period'] }): boolean =>
  isRunning(f.period, f.today);

export function siteFinding(f: SiteFigures): { finding: string; sentence: string } {
  const { now, period, elapsed, site } = f;
  if (!elapsed || !now)
    return {
      finding: papersFiguresWords.nothingIsOnRecord(period.label),
      sentence:
        site.firstDay === null
          ? papersFiguresWords.hasNotMadeAny(site.name)
          : period.from > f.today
            ? papersFiguresWords.itLiesAhead
            : papersFiguresWords.theRecordOfBegins(site.name, day(site.firstDay)),
    };
  if (now.days === 0)
    return {
      finding: papersFiguresWords.noDayOfBrought(period.label),
      sentence: papersFiguresWords.shouldHaveLookAt(elapsed.days),
    };
  const made = energy(now.energyKWh * 1000);
  const change = changeWords(f.compared, yearBeforeLabel(f));
  const parts = [
    change === null
      ? ''
      : running(f)
        ? papersFiguresWords.upToYesterday(change)
        : papersFiguresWords.thatIs(change),
    now.performanceRatio === null
      ? papersFiguresWords.noSensorMeasuredThe
      : papersFiguresWords.thePerformanceRatioIs(now.performanceRatio),
    now.completeness < 0.98 ? papersFiguresWords.ofTheDataDue(now.completeness) : '',
  ];
  return {
    finding: elapsed.running
      ? papersFiguresWords.hasMadeUntilNow(site.name, made, period.label)
      : papersFiguresWords.madeIn(site.name, made, period.label),
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
  const light = papersFiguresWords.lightMeasuredInOf(now.completenessLight);
  return [
    {
      label: papersFiguresWords.energyAC,
      figure: energy(now.energyKWh * 1000),
      note: changeWords(f.compared, yearBeforeLabel(f)) ?? papersFiguresWords.noYearBeforeTo,
    },
    {
      label: papersFiguresWords.specificYield,
      figure: quantity(now.specificYieldKWhKWp, 'kWh/kWp', 1),
      note:
        now.insolationKWhM2 === null
          ? papersFiguresWords.noLightMeasuredIn
          : papersFiguresWords.fellIntoThePlane(now.insolationKWhM2),
    },
    {
      label: papersFiguresWords.performanceRatio,
      figure: number(now.performanceRatio, 3),
      note:
        now.performanceRatio === null
          ? papersFiguresWords.needsASensorIn
          : papersFiguresWords.at25CPerformanceRatioStc(
              now.performanceRatioStc,
              now.performanceRatioAnnual,
              light,
            ),
    },
    {
      label: papersFiguresWords.availability,
      figure: share(now.availability, 2),
      note:
        now.availability === null
          ? papersFiguresWords.needsASensorIn
          : now.lostMinutes === 0
            ? papersFiguresWords.noMinuteOfLight
            : papersFiguresWords.lostMinutesOfLightLost(
                hoursWords(now.lostMinutes),
                now.lostMinutesGrid,
                hoursWords(now.lostMinutesGrid),
                share(now.availabilityOwn, 2),
              ),
    },
    {
      label: papersFiguresWords.data,
      figure: share(now.completeness),
      note: papersFiguresWords.ofTheReportsDue(now.days, f.elapsed?.days),
    },
    currency === null
      ? { label: papersFiguresWords.worth, figure: UNKNOWN, note: papersFiguresWords.noCurrencyIsSet }
      : {
          label: papersFiguresWords.worth,
          figure: money(worth?.money ?? null, currency),
          note:
            worth === null
              ? papersFiguresWords.noPriceAKWh
              : worth.unpricedKWh > 0
                ? papersFiguresWords.ofItWithoutPrice(worth.unpricedKWh)
                : papersFiguresWords.atThePriceOf,
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
      out.push({
        day: key,
        share: null,
        text: '',
        words: papersFiguresWords.noRecord(day(key)),
        marked: true,
      });
      continue;
    }
    const odd = [
      d.completeness < f.incompleteBelow && key !== f.today
        ? papersFiguresWords.ofTheData(d.completeness)
        : '',
      d.lostMinutes > 0 ? papersFiguresWords.ofLightLost(hoursWords(d.lostMinutes)) : '',
    ].filter(Boolean);
    const words = [
      energy(d.energyKWh * 1000),
      d.specificYieldKWhKWp === null ? '' : quantity(d.specificYieldKWhKWp, 'kWh/kWp', 2),
      d.performanceRatio === null ? '' : papersFiguresWords.performanceRatio2(d.performanceRatio),
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
    best ? papersFiguresWords.bestBest(best.words) : '',
    marked.length === 0
      ? ''
      : marked.length > 8
        ? papersFiguresWords.daysAreMarked(marked.length)
        : papersFiguresWords.markedMarked(listed(marked)),
  ]
    .filter(Boolean)
    .join(' ');
}

export function fleetFinding(f: FleetFigures): { finding: string; sentence: string } {
  if (f.rows.length === 0 || !f.total)
    return {
      finding: papersFiguresWords.nothingIsOnRecord(f.period.label),
      sentence:
        f.period.from > f.today ? papersFiguresWords.itLiesAhead : papersFiguresWords.noOperatingSiteHas,
    };
  const year = Number(f.period.key.slice(0, 4)) - 1;
  const than = running(f) ? papersFiguresWords.theSameWholeDaysA : labelIn(year, f.period);
  const change = changeWords(f.compared, than);
  const made = energy(f.total.energyKWh * 1000);
  const low = f.rows.filter((r) => r.now.completeness < 0.9).map((r) => r.site.name);
  return {
    finding: papersFiguresWords.madeIn2(f.rows.length, made, f.period.label, running(f)),
    sentence: [
      change === null
        ? ''
        : running(f)
          ? papersFiguresWords.upToYesterday(change)
          : papersFiguresWords.thatIs(change),
      low.length > 0 ? papersFiguresWords.underOfTheData(low.length, listed(low)) : '',
      f.without.length > 0 ? papersFiguresWords.noDataAtAll(f.without.length, listed(f.without)) : '',
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
