import { isolationStart } from '../../../../../schemas/api/isolation';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { isolationPage, startIsolation } from '../../../../../server/services/isolation';

export const GET = endpoint({ permission: 'roll_call.read', params: siteParams }, ({ tx, params }) =>
  isolationPage(tx, params.site, new Date()),
);

export const POST = endpoint(
  { permission: 'roll_call.run', params: siteParams, body: isolationStart },
  ({ tx, actor, params, body, context }) =>
    startIsolation(tx, actor, params.site, body, new Date(), context.clientAddress),
);
