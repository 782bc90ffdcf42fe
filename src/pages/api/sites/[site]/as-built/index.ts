import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { asBuiltPage } from '../../../../../server/services/as-built-requests';

export const GET = endpoint({ permission: 'as_built.read', params: siteParams }, ({ tx, params }) =>
  asBuiltPage(tx, params.site, new Date()),
);
