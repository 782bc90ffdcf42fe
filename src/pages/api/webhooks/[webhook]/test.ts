import { webhookParams } from '../../../../schemas/api/webhooks';
import { endpoint } from '../../../../server/http/endpoint';
import { testWebhook } from '../../../../server/services/webhooks';

export const POST = endpoint(
  { permission: 'webhook.manage', params: webhookParams },
  ({ tx, actor, params }) => testWebhook(tx, actor, params.webhook, new Date()),
);
