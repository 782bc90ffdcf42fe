import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { walkPage } from '../../../../../server/services/walk';

export const GET = endpoint({ permission: 'site.read', params: siteParams }, ({ tx, params }) =>
  walkPage(tx, params.site, new Date()),
);
