import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { loggersPage } from '../../../../../server/services/logger-token';

export const GET = endpoint({ permission: 'logger.read', params: siteParams }, ({ tx, params }) =>
  loggersPage(tx, params.site, new Date()),
);
