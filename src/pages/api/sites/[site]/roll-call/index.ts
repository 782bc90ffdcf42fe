import { rollCallStart } from '../../../../../schemas/api/roll-call';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { rollCallPage } from '../../../../../server/services/roll-call-page';
import { startRollCall } from '../../../../../server/services/start-roll-call';

export const GET = endpoint({ permission: 'roll_call.read', params: siteParams }, ({ tx, params }) =>
  rollCallPage(tx, params.site, new Date()),
);

export const POST = endpoint(
  { permission: 'roll_call.run', params: siteParams, body: rollCallStart },
  ({ tx, actor, params, body, context }) =>
    startRollCall(tx, actor, params.site, body, context.clientAddress),
);
