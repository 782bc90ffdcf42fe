import { lowRows, type LowOutput, type LowOutputView } from '../../schemas/api/low-output-rows';
import { csvResponse } from './csv';
import { lowOutputHeads } from '../../words/csv-heads';

const round = (value: number | null, digits: number): number | null =>
  value === null ? null : Number(value.toFixed(digits));

/** The strings as the page shows them, one a row. */
export const lowOutputCsv = (low: LowOutput, view: LowOutputView): Response =>
  csvResponse(
    `low strings ${low.at.slice(0, 10)}`,
    [
      { header: lowOutputHeads.site, value: (r) => r.site.name },
      { header: lowOutputHeads.string, value: (r) => r.string.name },
      { header: lowOutputHeads.plane, value: (r) => r.plane },
      { header: lowOutputHeads.sinceLocalDay, value: (r) => r.since },
      { header: lowOutputHeads.judgedLocalDay, value: (r) => r.day },
      { header: lowOutputHeads.missingShare, value: (r) => round(r.share, 4) },
      { header: lowOutputHeads.lossADayKWh, value: (r) => round(r.lossKWhDay, 3) },
      { header: lowOutputHeads.lossADayAtLeastKWh, value: (r) => round(r.lossKWhDayLow, 3) },
      { header: lowOutputHeads.lossADayAtMostKWh, value: (r) => round(r.lossKWhDayHigh, 3) },
      { header: lowOutputHeads.lossADayMoney(low.currency), value: (r) => round(r.moneyDay, 2) },
      { header: lowOutputHeads.lostSinceFoundKWh, value: (r) => round(r.lossKWh, 3) },
      { header: lowOutputHeads.signature, value: (r) => r.signature },
      { header: lowOutputHeads.whatItLooksLike, value: (r) => r.words },
      { header: lowOutputHeads.heldAgainst, value: (r) => r.method },
      { header: lowOutputHeads.figuresOf, value: (r) => r.scope },
      { header: lowOutputHeads.confidence, value: (r) => round(r.confidence, 2) },
      { header: lowOutputHeads.openCase, value: (r) => r.openCase?.number ?? null },
    ],
    lowRows(low.rows, view),
  );
