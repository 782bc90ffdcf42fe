import { deliveryParams } from '../../../../schemas/api/webhooks';
import { endpoint } from '../../../../server/http/endpoint';
import { resendCall } from '../../../../server/services/webhooks';

export const POST = endpoint(
  { permission: 'webhook.manage', params: deliveryParams },
  ({ tx, actor, params, context }) => resendCall(tx, actor, params.delivery, context.clientAddress),
);
