import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { stopRollCall } from '../../../../../server/services/stop-roll-call';

export const POST = endpoint(
  { permission: 'roll_call.run', params: siteParams },
  ({ tx, actor, params, context }) => stopRollCall(tx, actor, params.site, context.clientAddress),
);
