import { historyQuery, stringParams } from '../../../../schemas/api/string';
import { endpoint } from '../../../../server/http/endpoint';
import { readHistory } from '../../../../server/services/string-history';

export const GET = endpoint(
  { permission: 'string.read', params: stringParams, query: historyQuery, mayLag: true },
  ({ tx, params, query }) => readHistory(tx, params.string, query, new Date()),
);
