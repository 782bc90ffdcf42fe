import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { monthName } from '../../domain/output/period';
import { energy, number, percent } from '../../drawings/numbers';
import { YearBars } from '../../drawings/YearBars';
import { yearOnYear } from '../../words/figures';

interface Month {
  year: number;
  month: number;
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
  const running = (month: number): boolean => today.startsWith(`${year}-${String(month).padStart(2, '0')}`);
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
          best?.now ? ` Most in ${monthName(best.month)}: ${energy(best.now.energyKWh * 1000)}.` : '',
        )}
        monthLabel={monthName}
        months={rows.map((r) => ({
          month: r.month,
          now: r.now?.energyKWh ?? null,
          before: r.before?.energyKWh ?? null,
        }))}
      />
      <details className="mt-3">
        <summary className="target cursor-pointer text-petrol">{yearOnYear.asATable}</summary>
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
              cell: (r) =>
                r.now && r.before && r.before.energyKWh > 0 && !running(r.month)
                  ? `${r.now.energyKWh >= r.before.energyKWh ? '+' : '−'}${percent(Math.abs(r.now.energyKWh / r.before.energyKWh - 1))}`
                  : '–',
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
