import { ButtonLink } from '../../components/ui/Button';
import { FigureSheet, type Card } from '../../components/ui/FigureSheet';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { monthName } from '../../words/domain-periods';
import { DayCalendar, YearCalendar, type CalendarDay } from '../../drawings/DayCalendar';
import { type LossBar } from '../../drawings/loss-bars';
import { LossBars } from '../../drawings/LossBars';
import { energy, number, percent, quantity } from '../../drawings/numbers';
import { withQuery } from '../../lib/api';
import type { SiteFigures } from '../../schemas/api/figures';
import { paths } from '../../schemas/paths';
import { ImportedSheet } from './ImportedSheet';
import { PeriodPicker } from './PeriodPicker';
import { YearOnYear } from './YearOnYear';
import { siteFiguresPage } from '../../words/figures';

interface Props {
  f: SiteFigures;
  words: {
    finding: string;
    sentence: string;
    cards: Card[];
    bars: LossBar[];
    days: CalendarDay[];
    ofDays: string;
  };
}

/** A site's month or year: what it made, where the rest went, day by day and against the year before. */
export function SiteFiguresPage({ f, words }: Props) {
  const { finding, sentence, days, bars, ofDays } = words;
  const month = f.period.kind === 'month';
  return (
    <>
      <Heading
        crumbs={[
          { label: siteFiguresPage.figures, href: withQuery(paths.figures(), { period: f.period.key }) },
          { label: f.site.name, href: paths.site(f.site.id) },
          { label: f.period.label },
        ]}
        finding={finding}
        sentence={sentence}
        actions={
          f.elapsed && (
            <>
              {month && (
                <ButtonLink href={withQuery(paths.api.siteReport(f.site.id), { month: f.period.key })}>
                  {siteFiguresPage.monthReportPDF}
                </ButtonLink>
              )}
              <ButtonLink href={withQuery(paths.api.siteFiguresCsv(f.site.id), { period: f.period.key })}>
                {siteFiguresPage.daysCSV}
              </ButtonLink>
            </>
          )
        }
      />
      <PeriodPicker path={paths.siteFigures(f.site.id)} period={f.period} today={f.today} />
      {f.now && f.now.days > 0 ? (
        <div className="grid gap-5">
          <div className="grid gap-5 sm:grid-cols-2 lg:grid-cols-3">
            {words.cards.map((card) => (
              <FigureSheet key={card.label} card={card} />
            ))}
          </div>
          <Sheet
            id="losses"
            title={siteFiguresPage.whereTheLightWent}
            aside={siteFiguresPage.estimatesQuartersOfAn}
          >
            {bars.length > 0 ? (
              <LossBars bars={bars} />
            ) : (
              <p className="text-ink-2">{siteFiguresPage.noSensorMeasuredThe}</p>
            )}
            <Losses f={f} />
          </Sheet>
          <Sheet id="calendar" title={siteFiguresPage.dayByDay} aside={siteFiguresPage.kWhKWpTheDeeper} flush>
            {month ? (
              <DayCalendar days={days} caption={siteFiguresPage.daysOf(f.period.label)} />
            ) : (
              <YearCalendar
                days={days}
                label={siteFiguresPage.daysOf2(f.period.label, ofDays)}
                monthLabel={monthName}
              />
            )}
            <p className="mt-3 text-sm text-ink-2">{siteFiguresPage.rustEdgeMarksDay(ofDays)}</p>
            <DayTable f={f} />
          </Sheet>
          <YearOnYear months={f.months} year={Number(f.period.key.slice(0, 4))} today={f.today} />
          <p className="max-w-[76ch] text-sm text-ink-2">{siteFiguresPage.yieldsAndRatiosFollow}</p>
        </div>
      ) : (
        <Notice kind="empty" title={finding}>
          {sentence}
        </Notice>
      )}
      {f.imported.length > 0 && <ImportedSheet days={f.imported} label={f.period.label} />}
    </>
  );
}

function Losses({ f }: { f: SiteFigures }) {
  if (f.losses.length === 0) return null;
  return (
    <ul className="mt-5 divide-y divide-rule-faint border-t border-rule-faint">
      {f.losses.slice(0, 12).map((l) => (
        <li key={l.cause} className="flex flex-wrap items-center justify-between gap-x-4">
          <a
            href={paths.cause(l.cause)}
            className="inline-flex min-h-[44px] items-center text-petrol hover:underline"
          >
            {l.headline}
          </a>
          <span className="tabular-nums text-ink-2">
            {l.kWh > 0 ? `−${energy(l.kWh * 1000)}` : siteFiguresPage.lossNotKnown}
            {l.closedAt ? siteFiguresPage.over : siteFiguresPage.stillThere}
          </span>
        </li>
      ))}
    </ul>
  );
}

function DayTable({ f }: { f: SiteFigures }) {
  return (
    <details id="days" className="-mb-2 mt-1">
      <summary className="target cursor-pointer leading-9 text-petrol">
        {siteFiguresPage.daysDays(f.days.length)}
      </summary>
      <Table
        caption={siteFiguresPage.daysOf(f.period.label)}
        rows={f.days}
        rowKey={(d) => d.day}
        columns={[
          { key: 'day', label: siteFiguresPage.day, cell: (d) => d.day },
          {
            key: 'energy',
            label: siteFiguresPage.energy,
            numeric: true,
            cell: (d) => energy(d.figures.energyKWh * 1000),
          },
          {
            key: 'yield',
            label: siteFiguresPage.kWhKWp,
            numeric: true,
            cell: (d) => number(d.figures.specificYieldKWhKWp, 2),
          },
          {
            key: 'ratio',
            label: siteFiguresPage.ratio,
            numeric: true,
            cell: (d) => number(d.figures.performanceRatio, 3),
          },
          {
            key: 'stc',
            label: siteFiguresPage.at25C,
            numeric: true,
            from: 'md',
            cell: (d) => number(d.figures.performanceRatioStc, 3),
          },
          {
            key: 'light',
            label: siteFiguresPage.kWhM,
            numeric: true,
            from: 'sm',
            cell: (d) => number(d.figures.insolationKWhM2, 2),
          },
          {
            key: 'lost',
            label: siteFiguresPage.lost,
            numeric: true,
            from: 'md',
            cell: (d) => quantity(d.figures.lostMinutes, 'min'),
          },
          {
            key: 'data',
            label: siteFiguresPage.data,
            numeric: true,
            from: 'sm',
            cell: (d) => percent(d.figures.completeness),
          },
        ]}
      />
    </details>
  );
}
