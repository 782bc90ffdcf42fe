import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { stopIsolation } from '../../../../../server/services/isolation';

export const POST = endpoint(
  { permission: 'roll_call.run', params: siteParams },
  ({ tx, actor, params, context }) =>
    stopIsolation(tx, actor, params.site, new Date(), context.clientAddress),
);
