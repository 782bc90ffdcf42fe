import { ButtonLink } from '../../components/ui/Button';
import { FigureSheet, type Card } from '../../components/ui/FigureSheet';
import { Heading } from '../../components/ui/Heading';
import { LongTable } from '../../components/ui/LongTable';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Sheet } from '../../components/ui/Sheet';
import type { Column } from '../../components/ui/Table';
import { energy, money, number, percent, quantity, UNKNOWN } from '../../drawings/numbers';
import { withQuery } from '../../lib/api';
import { useViewInUrl } from '../../lib/view-in-url';
import type {
  FleetFigures,
  FleetFiguresRow,
  FleetFiguresSort,
  FleetFiguresView,
} from '../../schemas/api/figures';
import { fleetFiguresSorts } from '../../schemas/lists-and-limits';
import { paths } from '../../schemas/paths';
import { PeriodPicker } from './PeriodPicker';
import { shownRows } from '../../schemas/api/figures-order';
import { YearOnYear } from './YearOnYear';
import { fleetFiguresPage } from '../../words/figures';

function cardsOf({ total, worth, currency }: FleetFigures): Card[] {
  if (!total) return [];
  return [
    {
      label: fleetFiguresPage.specificYield,
      figure: quantity(total.specificYieldKWhKWp, 'kWh/kWp', 1),
      note: fleetFiguresPage.ofAllModulesTogether,
    },
    {
      label: fleetFiguresPage.performanceRatio,
      figure: number(total.performanceRatio, 3),
      note:
        total.performanceRatio === null
          ? fleetFiguresPage.noSensorInAny
          : fleetFiguresPage.atLightMeasuredIn(total.performanceRatioStc, total.completenessLight),
    },
    {
      label: fleetFiguresPage.availability,
      figure: total.availability === null ? UNKNOWN : percent(total.availability, 2),
      note: fleetFiguresPage.ofLightLostOver(total.lostMinutes),
    },
    {
      label: currency && worth ? fleetFiguresPage.worth : fleetFiguresPage.data,
      figure: currency && worth ? money(worth.money, currency) : percent(total.completeness, 1),
      note:
        currency && worth
          ? worth.unpricedKWh > 0
            ? fleetFiguresPage.withoutPrice(worth.unpricedKWh)
            : fleetFiguresPage.atEachDaysPrice
          : fleetFiguresPage.ofTheReportsDue,
    },
  ];
}

const change = (r: FleetFiguresRow): string => {
  if (!r.compared || !(r.compared.beforeKWh > 0)) return UNKNOWN;
  const by = r.compared.nowKWh / r.compared.beforeKWh - 1;
  return `${by >= 0 ? '+' : '−'}${percent(Math.abs(by))}`;
};

interface Props {
  f: FleetFigures;
  finding: string;
  sentence: string;
  view: FleetFiguresView;
  defaults: FleetFiguresView;
}

/** Every site's month or year in one table. */
export function FleetFiguresPage({ f, finding, sentence, view: asked, defaults }: Props) {
  const [view, setView] = useViewInUrl(stated(asked), stated(defaults));
  const rows = shownRows(f.rows, view);
  const columns: Column<FleetFiguresRow>[] = [
    {
      key: 'site',
      label: fleetFiguresPage.site,
      sortable: true,
      cell: (r) => (
        <a
          href={withQuery(paths.siteFigures(r.site.id), { period: f.period.key })}
          className="inline-flex min-h-[44px] items-center font-medium text-petrol hover:underline"
        >
          {r.site.name}
        </a>
      ),
    },
    {
      key: 'energy',
      label: fleetFiguresPage.energy,
      numeric: true,
      sortable: true,
      cell: (r) => energy(r.now.energyKWh * 1000),
    },
    {
      key: 'change',
      label: fleetFiguresPage.yearBefore,
      numeric: true,
      sortable: true,
      from: 'sm',
      cell: change,
    },
    {
      key: 'specific_yield',
      label: fleetFiguresPage.kWhKWp,
      numeric: true,
      sortable: true,
      cell: (r) => number(r.now.specificYieldKWhKWp, 1),
    },
    {
      key: 'ratio',
      label: fleetFiguresPage.ratio,
      numeric: true,
      sortable: true,
      cell: (r) => number(r.now.performanceRatio, 3),
    },
    {
      key: 'ratio_stc',
      label: fleetFiguresPage.at25C,
      numeric: true,
      sortable: true,
      from: 'md',
      cell: (r) => number(r.now.performanceRatioStc, 3),
    },
    {
      key: 'availability',
      label: fleetFiguresPage.available,
      numeric: true,
      sortable: true,
      from: 'md',
      cell: (r) => (r.now.availability === null ? UNKNOWN : percent(r.now.availability, 1)),
    },
    {
      key: 'completeness',
      label: fleetFiguresPage.data,
      numeric: true,
      sortable: true,
      from: 'sm',
      cell: (r) => percent(r.now.completeness),
    },
    ...(f.currency
      ? [
          {
            key: 'worth',
            label: fleetFiguresPage.worth,
            numeric: true,
            sortable: true,
            from: 'lg' as const,
            cell: (r: FleetFiguresRow) => money(r.worth?.money ?? null, f.currency ?? 'EUR'),
          },
        ]
      : []),
  ];
  return (
    <>
      <Heading
        finding={finding}
        sentence={sentence}
        actions={
          <ButtonLink
            href={withQuery(paths.api.figuresCsv(), {
              period: f.period.key,
              sort: view.sort,
              order: view.order,
              q: view.q,
            })}
          >
            CSV
          </ButtonLink>
        }
      />
      <PeriodPicker path={paths.figures()} period={f.period} today={f.today} />
      {f.rows.length === 0 ? (
        <Notice kind="empty" title={finding}>
          {sentence}
        </Notice>
      ) : (
        <div className="grid gap-5">
          <div className="grid gap-5 sm:grid-cols-2 lg:grid-cols-4">
            {cardsOf(f).map((card) => (
              <FigureSheet key={card.label} card={card} />
            ))}
          </div>
          <Sheet
            id="sites"
            title={fleetFiguresPage.sites}
            aside={fleetFiguresPage.rowsOfRows(rows.length, f.rows.length)}
            flush
          >
            <form className="no-print mb-3" onSubmit={(event) => event.preventDefault()}>
              <SearchInput
                name="q"
                label={fleetFiguresPage.findASiteBy}
                placeholder={fleetFiguresPage.siteOrPlace}
                value={view.q}
                onChange={(q) => setView({ q }, 'typed')}
              />
            </form>
            <LongTable
              caption={fleetFiguresPage.figuresOfBySite(f.period.label)}
              columns={columns}
              rows={rows}
              what={fleetFiguresPage.sites2}
              rowKey={(r) => r.site.id}
              sorting={{ key: view.sort, descending: view.order === 'down' }}
              onSort={({ key, descending }) => {
                const sort = fleetFiguresSorts.find((k) => k === key);
                if (sort) setView({ sort, order: descending ? 'down' : 'up' });
              }}
              empty={fleetFiguresPage.noSiteIsCalled}
            />
          </Sheet>
          <YearOnYear months={f.months} year={Number(f.period.key.slice(0, 4))} today={f.today} />
        </div>
      )}
    </>
  );
}

/** What stands in the address; the period only where it was asked for. */
const stated = ({
  period,
  sort,
  order,
  q,
}: FleetFiguresView): { period: string; sort: FleetFiguresSort; order: 'up' | 'down'; q: string } => ({
  period: period ?? '',
  sort,
  order,
  q,
});
