import { sent } from '../../../../schemas/api/cause-sent';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { readSite } from '../../../../server/services/site-page';

export const GET = endpoint({ permission: 'site.read', params: siteParams }, async ({ tx, params }) =>
  sent(await readSite(tx, params.site, new Date())),
);
