import { siteParams } from '../../../../schemas/api/site';
import { tracesQuery } from '../../../../schemas/api/trace';
import { endpoint } from '../../../../server/http/endpoint';
import { readTraces } from '../../../../server/services/traces';

export const GET = endpoint(
  { permission: 'string.read', params: siteParams, query: tracesQuery },
  ({ tx, params, query }) => readTraces(tx, params.site, new Date(), query.string),
);
