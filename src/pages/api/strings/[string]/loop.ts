import { stringParams } from '../../../../schemas/api/string';
import { dayQuery } from '../../../../schemas/api/workbench';
import { endpoint } from '../../../../server/http/endpoint';
import { readLoop } from '../../../../server/services/string-loop';

export const GET = endpoint(
  { permission: 'string.read', params: stringParams, query: dayQuery, mayLag: true },
  ({ tx, params, query }) => readLoop(tx, params.string, query, new Date()),
);
