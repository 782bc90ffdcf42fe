import { changedBy } from '../../../../../words/as-built-history';
import { changeText, historyTitle, sourceWords } from '../../../../../words/as-built-history-sentences';
import { historyView } from '../../../../../schemas/api/as-built';
import { siteParams } from '../../../../../schemas/api/site';
import { found } from '../../../../../server/errors';
import { endpoint } from '../../../../../server/http/endpoint';
import { historyItems } from '../../../../../server/queries/as-built-history';
import { visibleSite } from '../../../../../server/queries/visible-site';
import { csvPages, pageBy, ROWS_A_PAGE } from '../../../../../server/reports/csv-pages';
import { asBuiltHistoryHeads } from '../../../../../words/csv-heads-site';

export const GET = endpoint(
  { permission: 'telemetry.export', params: siteParams, query: historyView },
  async (call) => {
    const site = found(await visibleSite(call.tx, call.params.site), 'site');
    return csvPages(
      call,
      `as-built-history-${site.name}`,
      async (tx, before: number | undefined) =>
        pageBy(
          await historyItems(tx, site.id, {
            ...call.query,
            limit: ROWS_A_PAGE + 1,
            ...(before !== undefined && { before }),
          }),
          (last) => last.id,
        ),
      [
        { header: asBuiltHistoryHeads.atUtc, value: (i) => new Date(i.at) },
        { header: asBuiltHistoryHeads.person, value: (i) => changedBy(i.person) },
        { header: asBuiltHistoryHeads.what, value: (i) => historyTitle(i) },
        { header: asBuiltHistoryHeads.change, value: (i) => changeText(i) },
        { header: asBuiltHistoryHeads.reason, value: (i) => i.reason },
        { header: asBuiltHistoryHeads.how, value: (i) => sourceWords(i.source) },
      ],
    );
  },
);
