import { eventsQuery, siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { readEvents } from '../../../../server/services/site-page';

export const GET = endpoint(
  { permission: 'site.read', params: siteParams, query: eventsQuery },
  ({ tx, params, query }) => readEvents(tx, params.site, query),
);
