import { webhookBody } from '../../../schemas/api/webhooks';
import { endpoint } from '../../../server/http/endpoint';
import { makeWebhook, webhooksPage } from '../../../server/services/webhooks';

export const GET = endpoint({ permission: 'webhook.manage' }, ({ tx }) => webhooksPage(tx, new Date()));

export const POST = endpoint(
  { permission: 'webhook.manage', body: webhookBody },
  ({ tx, actor, body, context }) => makeWebhook(tx, actor, body, context.clientAddress),
);
