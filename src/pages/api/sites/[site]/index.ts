import { sent } from '../../../../schemas/api/causes-on-the-way';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { readSite } from '../../../../server/services/site-page';

export const GET = endpoint({ permission: 'site.read', params: siteParams }, async ({ tx, params }) =>
  sent(await readSite(tx, params.site, new Date())),
);
