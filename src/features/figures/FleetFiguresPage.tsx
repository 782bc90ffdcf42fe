import { ButtonLink } from '../../components/ui/Button';
import { FigureSheet, type Card } from '../../components/ui/FigureSheet';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column } from '../../components/ui/Table';
import { energy, money, number, percent, quantity, UNKNOWN } from '../../drawings/numbers';
import { withQuery } from '../../lib/api';
import { useViewInUrl } from '../../lib/view-in-url';
import {
  fleetFiguresSorts,
  type FleetFigures,
  type FleetFiguresRow,
  type FleetFiguresSort,
  type FleetFiguresView,
} from '../../schemas/api/figures';
import { paths } from '../../schemas/paths';
import { PeriodPicker } from './PeriodPicker';
import { shownRows } from '../../schemas/api/figures-order';
import { YearOnYear } from './YearOnYear';

function cardsOf({ total, worth, currency }: FleetFigures): Card[] {
  if (!total) return [];
  return [
    {
      label: 'Specific yield',
      figure: quantity(total.specificYieldKWhKWp, 'kWh/kWp', 1),
      note: 'of all modules together',
    },
    {
      label: 'Performance ratio',
      figure: number(total.performanceRatio, 3),
      note:
        total.performanceRatio === null
          ? 'no sensor in any plane'
          : `at 25 °C ${number(total.performanceRatioStc, 3)}; light measured in ${percent(total.completenessLight)} of the time`,
    },
    {
      label: 'Availability',
      figure: total.availability === null ? UNKNOWN : percent(total.availability, 2),
      note: `${quantity(total.lostMinutes / 60, 'h', 1)} of light lost over all sites`,
    },
    {
      label: currency && worth ? 'Worth' : 'Data',
      figure: currency && worth ? money(worth.money, currency) : percent(total.completeness, 1),
      note:
        currency && worth
          ? worth.unpricedKWh > 0
            ? `${energy(worth.unpricedKWh * 1000)} without a price`
            : 'at each day’s price'
          : 'of the reports due in daylight',
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
      label: 'Site',
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
      label: 'Energy',
      numeric: true,
      sortable: true,
      cell: (r) => energy(r.now.energyKWh * 1000),
    },
    { key: 'change', label: 'Year before', numeric: true, sortable: true, from: 'sm', cell: change },
    {
      key: 'specific_yield',
      label: 'kWh/kWp',
      numeric: true,
      sortable: true,
      cell: (r) => number(r.now.specificYieldKWhKWp, 1),
    },
    {
      key: 'ratio',
      label: 'Ratio',
      numeric: true,
      sortable: true,
      cell: (r) => number(r.now.performanceRatio, 3),
    },
    {
      key: 'ratio_stc',
      label: 'At 25 °C',
      numeric: true,
      sortable: true,
      from: 'md',
      cell: (r) => number(r.now.performanceRatioStc, 3),
    },
    {
      key: 'availability',
      label: 'Available',
      numeric: true,
      sortable: true,
      from: 'md',
      cell: (r) => (r.now.availability === null ? UNKNOWN : percent(r.now.availability, 1)),
    },
    {
      key: 'completeness',
      label: 'Data',
      numeric: true,
      sortable: true,
      from: 'sm',
      cell: (r) => percent(r.now.completeness),
    },
    ...(f.currency
      ? [
          {
            key: 'worth',
            label: 'Worth',
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
          <Sheet id="sites" title="Sites" aside={`${rows.length} of ${f.rows.length}`} flush>
            <form className="no-print mb-3" onSubmit={(event) => event.preventDefault()}>
              <SearchInput
                name="q"
                label="Find a site by name or place"
                placeholder="Site or place"
                value={view.q}
                onChange={(q) => setView({ q }, 'typed')}
              />
            </form>
            <Table
              caption={`Figures of ${f.period.label} by site`}
              columns={columns}
              rows={rows}
              rowKey={(r) => r.site.id}
              sorting={{ key: view.sort, descending: view.order === 'down' }}
              onSort={({ key, descending }) => {
                const sort = fleetFiguresSorts.find((k) => k === key);
                if (sort) setView({ sort, order: descending ? 'down' : 'up' });
              }}
              empty="No site is called that."
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
