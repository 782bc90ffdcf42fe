import { webhookChange, webhookParams } from '../../../../schemas/api/webhooks';
import { endpoint } from '../../../../server/http/endpoint';
import { removeWebhook, reviseWebhook } from '../../../../server/services/webhooks';

export const PATCH = endpoint(
  { permission: 'webhook.manage', params: webhookParams, body: webhookChange },
  ({ tx, actor, params, body, context }) =>
    reviseWebhook(tx, actor, params.webhook, body, context.clientAddress, new Date()),
);

export const DELETE = endpoint(
  { permission: 'webhook.manage', params: webhookParams },
  ({ tx, actor, params, context }) =>
    removeWebhook(tx, actor, params.webhook, context.clientAddress, new Date()),
);
