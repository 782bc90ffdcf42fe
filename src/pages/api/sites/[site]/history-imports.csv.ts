import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { csvResponse, timeCell } from '../../../../server/reports/csv';
import { historyPage } from '../../../../server/services/history-import';
import { historyImportHeads } from '../../../../words/csv-heads-site';

export const GET = endpoint({ permission: 'history.import', params: siteParams }, async ({ tx, params }) =>
  csvResponse(
    'earlier-readings',
    [
      { header: historyImportHeads.file, value: (i) => i.fileName },
      { header: historyImportHeads.importedUtc, value: (i) => timeCell(i.madeAt) },
      { header: historyImportHeads.by, value: (i) => i.madeBy },
      { header: historyImportHeads.of, value: (i) => i.of.join('; ') },
      { header: historyImportHeads.fromUtc, value: (i) => timeCell(i.from) },
      { header: historyImportHeads.toUtc, value: (i) => timeCell(i.to) },
      { header: historyImportHeads.rows, value: (i) => i.rows },
      { header: historyImportHeads.readings, value: (i) => i.readings },
      { header: historyImportHeads.leftOut, value: (i) => i.leftOut },
      { header: historyImportHeads.twiceThere, value: (i) => i.doubles },
      { header: historyImportHeads.note, value: (i) => i.note },
      { header: historyImportHeads.takenBackUtc, value: (i) => timeCell(i.undoneAt) },
      { header: historyImportHeads.takenBackBy, value: (i) => i.undoneBy },
    ],
    (await historyPage(tx, params.site, new Date())).imports,
  ),
);
