import { kindWords } from '../../features/causes/words';
import { causesView } from '../../schemas/api/causes';
import { endpoint } from '../../server/http/endpoint';
import { causesInOrder, causesOf, currencyOf } from '../../server/queries/causes-list';
import { csvPages, ROWS_A_PAGE } from '../../server/reports/csv-pages';
import { causeHeads } from '../../words/csv-heads';

export const GET = endpoint({ permission: 'cause.read', query: causesView }, async (call) => {
  const currency = await currencyOf(call.tx);
  const all = await causesInOrder(call.tx, call.query);
  return csvPages(
    call,
    'causes',
    async (tx, from: number | undefined = 0) => {
      const to = from + ROWS_A_PAGE;
      return {
        rows: await causesOf(tx, all.slice(from, to), currency),
        next: to < all.length ? to : null,
      };
    },
    [
      { header: causeHeads.site, value: (c) => c.siteName },
      { header: causeHeads.kind, value: (c) => kindWords(c.kind) },
      { header: causeHeads.what, value: (c) => c.headline },
      { header: causeHeads.strings, value: (c) => [...new Set(c.units.map((u) => u.stringName))].join(' ') },
      { header: causeHeads.units, value: (c) => c.units.filter((u) => u.position !== null).length },
      { header: causeHeads.sinceUtc, value: (c) => new Date(c.since) },
      { header: causeHeads.foundUtc, value: (c) => new Date(c.openedAt) },
      { header: causeHeads.overUtc, value: (c) => (c.closedAt === null ? null : new Date(c.closedAt)) },
      { header: causeHeads.cameBack, value: (c) => c.reopened },
      { header: causeHeads.confidence, value: (c) => Math.round(c.confidence * 100) / 100 },
      { header: causeHeads.lossADayKWh, value: (c) => (c.lossWhDay === null ? null : c.lossWhDay / 1000) },
      { header: causeHeads.lossUntilNowKWh, value: (c) => c.lossWh / 1000 },
      { header: causeHeads.lossUntilNowMoney(currency), value: (c) => c.lossMoney },
      { header: causeHeads.acknowledgedBy, value: (c) => c.acknowledged?.person },
      { header: causeHeads.case, value: (c) => c.openCase?.number },
    ],
  );
});
