import { historyQuery } from '../../../../../schemas/api/as-built';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { historyPage } from '../../../../../server/services/as-built-history';

export const GET = endpoint(
  { permission: 'as_built.read', params: siteParams, query: historyQuery },
  ({ tx, actor, params, query }) => historyPage(tx, actor, params.site, query, new Date()),
);
