import { stringParams } from '../../../../schemas/api/string';
import { heatQuery } from '../../../../schemas/api/workbench';
import { endpoint } from '../../../../server/http/endpoint';
import { heatCsv } from '../../../../server/reports/string-csv';

export const GET = endpoint(
  { permission: 'telemetry.export', params: stringParams, query: heatQuery, mayLag: true },
  ({ tx, params, query }) => heatCsv(tx, params.string, query, new Date()),
);
