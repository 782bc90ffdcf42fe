import { stringParams } from '../../../../schemas/api/string';
import { dayQuery } from '../../../../schemas/api/workbench';
import { endpoint } from '../../../../server/http/endpoint';
import { readExplanations } from '../../../../server/services/string-explanations';

export const GET = endpoint(
  { permission: 'string.read', params: stringParams, query: dayQuery },
  ({ tx, params, query }) => readExplanations(tx, params.string, query, new Date()),
);
