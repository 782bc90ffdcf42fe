import { stringParams } from '../../../../schemas/api/string';
import { heatQuery } from '../../../../schemas/api/workbench';
import { endpoint } from '../../../../server/http/endpoint';
import { readHeat } from '../../../../server/services/string-units';

export const GET = endpoint(
  { permission: 'string.read', params: stringParams, query: heatQuery, mayLag: true },
  ({ tx, params, query }) => readHeat(tx, params.string, query, new Date()),
);
