import type { Figures } from '../../../domain/output/day-figures';
import type { FleetFigures, FleetFiguresView, SiteFigures } from '../../../schemas/api/figures';
import { shownRows } from '../../../schemas/api/figures-order';
import { csvResponse, type Column } from '../csv';

/** Figures as downloads: plain numbers, units in the headings. */

const round = (value: number | null, digits: number): number | null =>
  value === null ? null : Number(value.toFixed(digits));

const columnsOf = <Row>(of: (row: Row) => Figures): Column<Row>[] => [
  { header: 'energy AC (kWh)', value: (r) => round(of(r).energyKWh, 3) },
  { header: 'energy DC (kWh)', value: (r) => round(of(r).energyDcKWh, 3) },
  { header: 'specific yield (kWh/kWp)', value: (r) => round(of(r).specificYieldKWhKWp, 4) },
  { header: 'insolation in the plane (kWh/m²)', value: (r) => round(of(r).insolationKWhM2, 4) },
  { header: 'reference yield (h)', value: (r) => round(of(r).referenceYieldH, 4) },
  { header: 'array yield (h)', value: (r) => round(of(r).arrayYieldH, 4) },
  { header: 'final yield (h)', value: (r) => round(of(r).finalYieldH, 4) },
  { header: 'performance ratio', value: (r) => round(of(r).performanceRatio, 4) },
  { header: 'performance ratio at 25 °C', value: (r) => round(of(r).performanceRatioStc, 4) },
  {
    header: 'performance ratio at the temperature of the year',
    value: (r) => round(of(r).performanceRatioAnnual, 4),
  },
  {
    header: 'module temperature weighted by light (°C)',
    value: (r) => round(of(r).irradianceWeightedTemperature, 2),
  },
  { header: 'availability', value: (r) => round(of(r).availability, 4) },
  { header: 'availability without minutes of grid loss', value: (r) => round(of(r).availabilityOwn, 4) },
  { header: 'lost (min)', value: (r) => of(r).lostMinutes },
  { header: 'lost without grid (min)', value: (r) => of(r).lostMinutesGrid },
  { header: 'derated or curtailed (min)', value: (r) => of(r).limitedMinutes },
  { header: 'data of those due', value: (r) => round(of(r).completeness, 4) },
  { header: 'light measured', value: (r) => round(of(r).completenessLight, 4) },
  { header: 'module temperature measured', value: (r) => round(of(r).completenessTemperature, 4) },
];

/** One row a day. */
export const siteFiguresCsv = (f: SiteFigures): Response =>
  csvResponse(
    `${f.site.name} ${f.period.key}`,
    [{ header: 'day', value: (d) => d.day }, ...columnsOf<SiteFigures['days'][number]>((d) => d.figures)],
    f.days,
  );

/** One row a site, as the page shows them. */
export const fleetFiguresCsv = (f: FleetFigures, view: FleetFiguresView): Response =>
  csvResponse(
    `figures ${f.period.key}`,
    [
      { header: 'site', value: (r) => r.site.name },
      { header: 'place', value: (r) => r.site.place },
      ...columnsOf<FleetFigures['rows'][number]>((r) => r.now),
      {
        header: 'energy AC of the same whole days a year before (kWh)',
        value: (r) => round(r.compared?.beforeKWh ?? null, 3),
      },
      {
        header: `worth (${f.currency ?? 'no currency set'})`,
        value: (r) => round(r.worth?.money ?? null, 2),
      },
    ],
    shownRows(f.rows, view),
  );
