import { stringParams } from '../../../../schemas/api/string';
import { dayQuery } from '../../../../schemas/api/workbench';
import { endpoint } from '../../../../server/http/endpoint';
import { loopCsv } from '../../../../server/reports/string-csv';

export const GET = endpoint(
  { permission: 'telemetry.export', params: stringParams, query: dayQuery, mayLag: true },
  ({ tx, params, query }) => loopCsv(tx, params.string, query, new Date()),
);
