import { siteParams } from '../../../schemas/api/site';
import { endpoint } from '../../../server/http/endpoint';
import { customerSite } from '../../../server/services/customer-page';

export const GET = endpoint({ permission: 'customer_page.read', params: siteParams }, ({ tx, params }) =>
  customerSite(tx, params.site, new Date()),
);
