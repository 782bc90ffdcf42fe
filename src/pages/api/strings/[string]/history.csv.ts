import { historyQuery, stringParams } from '../../../../schemas/api/string';
import { endpoint } from '../../../../server/http/endpoint';
import { historyCsv } from '../../../../server/reports/string-csv';

export const GET = endpoint(
  { permission: 'telemetry.export', params: stringParams, query: historyQuery, mayLag: true },
  ({ tx, params, query }) => historyCsv(tx, params.string, query, new Date()),
);
