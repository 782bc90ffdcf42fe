import { membershipQuery } from '../../../../../schemas/api/membership';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { membershipPage } from '../../../../../server/services/membership';

export const GET = endpoint(
  { permission: 'roll_call.read', params: siteParams, query: membershipQuery },
  ({ tx, params, query }) => membershipPage(tx, params.site, query.hours, new Date()),
);
