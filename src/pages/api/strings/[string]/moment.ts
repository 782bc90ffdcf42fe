import { stringParams } from '../../../../schemas/api/string';
import { momentQuery } from '../../../../schemas/api/workbench';
import { endpoint } from '../../../../server/http/endpoint';
import { readMoment } from '../../../../server/services/string-moment';

export const GET = endpoint(
  { permission: 'string.read', params: stringParams, query: momentQuery },
  ({ tx, params, query }) => readMoment(tx, params.string, query.at),
);
