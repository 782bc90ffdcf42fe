import type { Figures } from '../../../domain/output/day-figures';
import type { FleetFigures, FleetFiguresView, SiteFigures } from '../../../schemas/api/figures';
import { shownRows } from '../../../schemas/api/figures-order';
import { csvResponse, type Column } from '../csv';
import { figureHeads } from '../../../words/csv-heads';

/** Figures as downloads: plain numbers, units in the headings. */

const round = (value: number | null, digits: number): number | null =>
  value === null ? null : Number(value.toFixed(digits));

const columnsOf = <Row>(of: (row: Row) => Figures): Column<Row>[] => [
  { header: figureHeads.energyAcKWh, value: (r) => round(of(r).energyKWh, 3) },
  { header: figureHeads.energyDcKWh, value: (r) => round(of(r).energyDcKWh, 3) },
  { header: figureHeads.specificYieldKWhKWp, value: (r) => round(of(r).specificYieldKWhKWp, 4) },
  { header: figureHeads.insolationInThePlaneKWhM, value: (r) => round(of(r).insolationKWhM2, 4) },
  { header: figureHeads.referenceYieldH, value: (r) => round(of(r).referenceYieldH, 4) },
  { header: figureHeads.arrayYieldH, value: (r) => round(of(r).arrayYieldH, 4) },
  { header: figureHeads.finalYieldH, value: (r) => round(of(r).finalYieldH, 4) },
  { header: figureHeads.performanceRatio, value: (r) => round(of(r).performanceRatio, 4) },
  { header: figureHeads.performanceRatioAt25C, value: (r) => round(of(r).performanceRatioStc, 4) },
  {
    header: figureHeads.performanceRatioAnnual,
    value: (r) => round(of(r).performanceRatioAnnual, 4),
  },
  {
    header: figureHeads.moduleTemperatureByLightC,
    value: (r) => round(of(r).irradianceWeightedTemperature, 2),
  },
  { header: figureHeads.availability, value: (r) => round(of(r).availability, 4) },
  { header: figureHeads.availabilityOwn, value: (r) => round(of(r).availabilityOwn, 4) },
  { header: figureHeads.lostMin, value: (r) => of(r).lostMinutes },
  { header: figureHeads.lostWithoutGridMin, value: (r) => of(r).lostMinutesGrid },
  { header: figureHeads.deratedOrCurtailedMin, value: (r) => of(r).limitedMinutes },
  { header: figureHeads.dataOfThoseDue, value: (r) => round(of(r).completeness, 4) },
  { header: figureHeads.lightMeasured, value: (r) => round(of(r).completenessLight, 4) },
  { header: figureHeads.moduleTemperatureMeasured, value: (r) => round(of(r).completenessTemperature, 4) },
];

/** One row a day. */
export const siteFiguresCsv = (f: SiteFigures): Response =>
  csvResponse(
    `${f.site.name} ${f.period.key}`,
    [
      { header: figureHeads.day, value: (d) => d.day },
      ...columnsOf<SiteFigures['days'][number]>((d) => d.figures),
    ],
    f.days,
  );

/** One row a site, as the page shows them. */
export const fleetFiguresCsv = (f: FleetFigures, view: FleetFiguresView): Response =>
  csvResponse(
    `figures ${f.period.key}`,
    [
      { header: figureHeads.site, value: (r) => r.site.name },
      { header: figureHeads.place, value: (r) => r.site.place },
      ...columnsOf<FleetFigures['rows'][number]>((r) => r.now),
      {
        header: figureHeads.yearBeforeKWh,
        value: (r) => round(r.compared?.beforeKWh ?? null, 3),
      },
      {
        header: figureHeads.worth(f.currency),
        value: (r) => round(r.worth?.money ?? null, 2),
      },
    ],
    shownRows(f.rows, view),
  );
