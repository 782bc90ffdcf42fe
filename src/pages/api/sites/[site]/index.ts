import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { readSite } from '../../../../server/services/site-page';

export const GET = endpoint({ permission: 'site.read', params: siteParams }, ({ tx, params }) =>
  readSite(tx, params.site, new Date()),
);
