import { changeText, historyTitle, sourceWords } from '../../../../../words/as-built-history-sentences';
import { historyView } from '../../../../../schemas/api/as-built';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { csvResponse } from '../../../../../server/reports/csv';
import { historyPage } from '../../../../../server/services/as-built-history';
import { asBuiltHistoryHeads } from '../../../../../words/csv-heads-site';

/** More entries than a site gathers in decades. */
const ALL = 100_000;

export const GET = endpoint(
  { permission: 'telemetry.export', params: siteParams, query: historyView },
  async ({ tx, actor, params, query }) => {
    const page = await historyPage(tx, actor, params.site, { ...query, limit: ALL }, new Date());
    return csvResponse(
      `as-built-history-${page.site.name}`,
      [
        { header: asBuiltHistoryHeads.atUtc, value: (i) => new Date(i.at) },
        { header: asBuiltHistoryHeads.person, value: (i) => i.person },
        { header: asBuiltHistoryHeads.what, value: (i) => historyTitle(i) },
        { header: asBuiltHistoryHeads.change, value: (i) => changeText(i) },
        { header: asBuiltHistoryHeads.reason, value: (i) => i.reason },
        { header: asBuiltHistoryHeads.how, value: (i) => sourceWords(i.source) },
      ],
      page.items,
    );
  },
);
