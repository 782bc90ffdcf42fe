import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { csvResponse } from '../../../../server/reports/csv';
import { historyPage } from '../../../../server/services/history-import';

const time = (at: string | null): Date | null => (at === null ? null : new Date(at));

export const GET = endpoint({ permission: 'history.import', params: siteParams }, async ({ tx, params }) =>
  csvResponse(
    'earlier-readings',
    [
      { header: 'file', value: (i) => i.fileName },
      { header: 'imported (UTC)', value: (i) => time(i.madeAt) },
      { header: 'by', value: (i) => i.madeBy },
      { header: 'of', value: (i) => i.of.join('; ') },
      { header: 'from (UTC)', value: (i) => time(i.from) },
      { header: 'to (UTC)', value: (i) => time(i.to) },
      { header: 'rows', value: (i) => i.rows },
      { header: 'readings', value: (i) => i.readings },
      { header: 'left out', value: (i) => i.leftOut },
      { header: 'twice there', value: (i) => i.doubles },
      { header: 'note', value: (i) => i.note },
      { header: 'taken back (UTC)', value: (i) => time(i.undoneAt) },
      { header: 'taken back by', value: (i) => i.undoneBy },
    ],
    (await historyPage(tx, params.site, new Date())).imports,
  ),
);
