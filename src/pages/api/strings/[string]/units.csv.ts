import { stringParams, unitsQuery } from '../../../../schemas/api/string';
import { endpoint } from '../../../../server/http/endpoint';
import { unitsCsv } from '../../../../server/reports/string-csv';

export const GET = endpoint(
  { permission: 'telemetry.export', params: stringParams, query: unitsQuery },
  ({ tx, params, query }) => unitsCsv(tx, params.string, query, new Date()),
);
