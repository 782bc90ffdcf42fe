import { deliveriesView, webhookParams } from '../../../../schemas/api/webhooks';
import { found } from '../../../../server/errors';
import { endpoint } from '../../../../server/http/endpoint';
import { deliveriesOf, webhookByRef } from '../../../../server/queries/webhooks';
import { csvResponse } from '../../../../server/reports/csv';

const MOST_ROWS = 20_000;

export const GET = endpoint(
  { permission: 'webhook.manage', params: webhookParams, query: deliveriesView },
  async ({ tx, params, query }) => {
    const { number } = found(await webhookByRef(tx, params.webhook), 'webhook');
    return csvResponse(
      'calls',
      [
        { header: 'noted (UTC)', value: (d) => new Date(d.createdAt) },
        { header: 'call', value: (d) => d.id },
        { header: 'kind', value: (d) => d.kind },
        { header: 'site', value: (d) => d.site },
        { header: 'state', value: (d) => d.state },
        { header: 'tries', value: (d) => d.attempts.length },
        { header: 'last status', value: (d) => d.attempts[0]?.status },
        { header: 'last latency (ms)', value: (d) => d.attempts[0]?.latencyMs },
        { header: 'last failure', value: (d) => d.attempts[0]?.error },
      ],
      await deliveriesOf(tx, number, query, MOST_ROWS),
    );
  },
);
