import { deliveriesView, webhookParams } from '../../../../schemas/api/webhooks';
import { endpoint } from '../../../../server/http/endpoint';
import { webhookPage } from '../../../../server/services/webhooks';

export const GET = endpoint(
  { permission: 'webhook.manage', params: webhookParams, query: deliveriesView },
  ({ tx, params, query }) => webhookPage(tx, params.webhook, query, new Date()),
);
