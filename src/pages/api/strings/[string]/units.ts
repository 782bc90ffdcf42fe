import { stringParams, unitsQuery } from '../../../../schemas/api/string';
import { endpoint } from '../../../../server/http/endpoint';
import { readUnits } from '../../../../server/services/string-units';

export const GET = endpoint(
  { permission: 'string.read', params: stringParams, query: unitsQuery },
  ({ tx, params, query }) => readUnits(tx, params.string, query, new Date()),
);
