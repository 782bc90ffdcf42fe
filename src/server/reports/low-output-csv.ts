import { lowRows, type LowOutput, type LowOutputView } from '../../schemas/api/low-output-rows';
import { csvResponse } from './csv';

const round = (value: number | null, digits: number): number | null =>
  value === null ? null : Number(value.toFixed(digits));

/** The strings as the page shows them, one a row. */
export const lowOutputCsv = (low: LowOutput, view: LowOutputView): Response =>
  csvResponse(
    `low strings ${low.at.slice(0, 10)}`,
    [
      { header: 'site', value: (r) => r.site.name },
      { header: 'string', value: (r) => r.string.name },
      { header: 'plane', value: (r) => r.plane },
      { header: 'since (local day)', value: (r) => r.since },
      { header: 'judged (local day)', value: (r) => r.day },
      { header: 'missing share', value: (r) => round(r.share, 4) },
      { header: 'loss a day (kWh)', value: (r) => round(r.lossKWhDay, 3) },
      { header: 'loss a day, at least (kWh)', value: (r) => round(r.lossKWhDayLow, 3) },
      { header: 'loss a day, at most (kWh)', value: (r) => round(r.lossKWhDayHigh, 3) },
      { header: `loss a day (${low.currency ?? 'no currency set'})`, value: (r) => round(r.moneyDay, 2) },
      { header: 'lost since found (kWh)', value: (r) => round(r.lossKWh, 3) },
      { header: 'signature', value: (r) => r.signature },
      { header: 'what it looks like', value: (r) => r.words },
      { header: 'held against', value: (r) => r.method },
      { header: 'figures of', value: (r) => r.scope },
      { header: 'confidence', value: (r) => round(r.confidence, 2) },
      { header: 'open case', value: (r) => r.openCase?.number ?? null },
    ],
    lowRows(low.rows, view),
  );
