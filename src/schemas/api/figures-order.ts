import type { FleetFiguresRow, FleetFiguresSort } from './figures';

const VALUE: Record<Exclude<FleetFiguresSort, 'site'>, (r: FleetFiguresRow) => number | null> = {
  energy: (r) => r.now.energyKWh,
  change: (r) => (r.compared && r.compared.beforeKWh > 0 ? r.compared.nowKWh / r.compared.beforeKWh : null),
  specific_yield: (r) => r.now.specificYieldKWhKWp,
  ratio: (r) => r.now.performanceRatio,
  ratio_stc: (r) => r.now.performanceRatioStc,
  availability: (r) => r.now.availability,
  completeness: (r) => r.now.completeness,
  worth: (r) => r.worth?.money ?? null,
};

/** The rows that a search leaves, in order; what is not known stands last either way. */
export function shownRows(
  rows: readonly FleetFiguresRow[],
  view: { sort: FleetFiguresSort; order: 'up' | 'down'; q: string },
): FleetFiguresRow[] {
  const words = view.q.toLowerCase();
  const found = rows.filter((r) => `${r.site.name} ${r.site.place}`.toLowerCase().includes(words));
  const sign = view.order === 'down' ? -1 : 1;
  const { sort } = view;
  if (sort === 'site') return found.sort((a, b) => sign * a.site.name.localeCompare(b.site.name));
  const of = VALUE[sort];
  return found.sort((a, b) => {
    const [x, y] = [of(a), of(b)];
    if (x === null || y === null) return Number(x === null) - Number(y === null);
    return sign * (x - y) || a.site.name.localeCompare(b.site.name);
  });
}
