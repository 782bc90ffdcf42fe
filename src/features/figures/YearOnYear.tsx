import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { monthName } from '../../words/domain-periods';
import { energy, number } from '../../drawings/numbers';
import { yearChange } from '../../drawings/year-change';
import { YearBars } from '../../drawings/YearBars';
import { yearOnYear } from '../../words/figures';

interface Month {
  year: number;
  month: number;
  /** Days of which there is data. */
  days?: number;
  energyKWh: number;
  performanceRatio?: number | null;
}

/** Twelve months of a year beside those of the year before; the one that runs is not held against a whole one. */
export function YearOnYear({
  months,
  year,
  today,
}: {
  months: readonly Month[];
  year: number;
  today: string;
}) {
  const of = (y: number, month: number) => months.find((m) => m.year === y && m.month === month);
  const rows = Array.from({ length: 12 }, (_, i) => ({
    month: i + 1,
    now: of(year, i + 1),
    before: of(year - 1, i + 1),
  }));
  const ratios = months.some((m) => m.performanceRatio !== undefined);
  const known = rows.filter((r) => r.now);
  const best = known.reduce<(typeof known)[number] | null>(
    (b, r) => (b === null || (r.now?.energyKWh ?? 0) > (b.now?.energyKWh ?? 0) ? r : b),
    null,
  );
  return (
    <Sheet id="years" title={yearOnYear.yearBesideYear(year)} aside={yearOnYear.filledOutline(year)} flush>
      <YearBars
        label={yearOnYear.energyMonthByMonth(
          year,
          best?.now ? yearOnYear.mostIn(monthName(best.month), best.now.energyKWh) : '',
        )}
        monthLabel={monthName}
        months={rows.map((r) => ({
          month: r.month,
          now: r.now?.energyKWh ?? null,
          before: r.before?.energyKWh ?? null,
        }))}
      />
      <details className="-mb-2 mt-1">
        <summary className="target cursor-pointer leading-9 text-petrol">{yearOnYear.asATable}</summary>
        <Table
          caption={yearOnYear.energyByMonthAnd(year)}
          rows={rows}
          rowKey={(r) => String(r.month)}
          columns={[
            { key: 'month', label: yearOnYear.month, cell: (r) => monthName(r.month) },
            {
              key: 'now',
              label: String(year),
              numeric: true,
              cell: (r) => (r.now ? energy(r.now.energyKWh * 1000) : '–'),
            },
            {
              key: 'before',
              label: String(year - 1),
              numeric: true,
              cell: (r) => (r.before ? energy(r.before.energyKWh * 1000) : '–'),
            },
            {
              key: 'change',
              label: yearOnYear.change,
              numeric: true,
              cell: (r) => yearChange(`${year}-${String(r.month).padStart(2, '0')}`, r.now, r.before, today),
            },
            ...(ratios
              ? [
                  {
                    key: 'ratio',
                    label: yearOnYear.ratio,
                    numeric: true,
                    cell: (r: (typeof rows)[number]) => number(r.now?.performanceRatio, 3),
                  },
                ]
              : []),
          ]}
        />
      </details>
    </Sheet>
  );
}
