import { kindWords } from '../../features/causes/words';
import { causesView } from '../../schemas/api/causes';
import { endpoint } from '../../server/http/endpoint';
import { currencyOf, listCauses } from '../../server/queries/causes-list';
import { csvResponse } from '../../server/reports/csv';

const MOST_ROWS = 20_000;

export const GET = endpoint({ permission: 'cause.read', query: causesView }, async ({ tx, query }) => {
  const currency = await currencyOf(tx);
  return csvResponse(
    'causes',
    [
      { header: 'site', value: (c) => c.siteName },
      { header: 'kind', value: (c) => kindWords(c.kind) },
      { header: 'what', value: (c) => c.headline },
      { header: 'strings', value: (c) => [...new Set(c.units.map((u) => u.stringName))].join(' ') },
      { header: 'units', value: (c) => c.units.filter((u) => u.position !== null).length },
      { header: 'since (UTC)', value: (c) => new Date(c.since) },
      { header: 'found (UTC)', value: (c) => new Date(c.openedAt) },
      { header: 'over (UTC)', value: (c) => (c.closedAt === null ? null : new Date(c.closedAt)) },
      { header: 'came back', value: (c) => c.reopened },
      { header: 'confidence', value: (c) => Math.round(c.confidence * 100) / 100 },
      { header: 'loss a day (kWh)', value: (c) => (c.lossWhDay === null ? null : c.lossWhDay / 1000) },
      { header: 'loss so far (kWh)', value: (c) => c.lossWh / 1000 },
      { header: `loss so far (${currency ?? 'no currency'})`, value: (c) => c.lossMoney },
      { header: 'acknowledged by', value: (c) => c.acknowledged?.person },
      { header: 'case', value: (c) => c.openCase?.number },
    ],
    await listCauses(tx, query, currency, MOST_ROWS),
  );
});
