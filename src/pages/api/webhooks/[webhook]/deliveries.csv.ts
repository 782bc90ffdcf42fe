import { deliveriesView, webhookParams } from '../../../../schemas/api/webhooks';
import { found } from '../../../../server/errors';
import { endpoint } from '../../../../server/http/endpoint';
import { deliveriesOf, webhookByRef } from '../../../../server/queries/webhooks';
import { csvPages, pageBy, ROWS_A_PAGE } from '../../../../server/reports/csv-pages';
import { deliveryHeads } from '../../../../words/csv-heads';

export const GET = endpoint(
  { permission: 'webhook.manage', params: webhookParams, query: deliveriesView },
  async (call) => {
    const { number } = found(await webhookByRef(call.tx, call.params.webhook), 'webhook');
    return csvPages(
      call,
      'calls',
      async (tx, before: number | undefined = call.query.before) =>
        pageBy(
          await deliveriesOf(tx, number, { ...call.query, before }, ROWS_A_PAGE + 1),
          (last) => last.number,
        ),
      [
        { header: deliveryHeads.notedUtc, value: (d) => new Date(d.createdAt) },
        { header: deliveryHeads.call, value: (d) => d.id },
        { header: deliveryHeads.kind, value: (d) => d.kind },
        { header: deliveryHeads.site, value: (d) => d.site },
        { header: deliveryHeads.state, value: (d) => d.state },
        { header: deliveryHeads.tries, value: (d) => d.attempts.length },
        { header: deliveryHeads.lastStatus, value: (d) => d.attempts[0]?.status },
        { header: deliveryHeads.lastLatencyMs, value: (d) => d.attempts[0]?.latencyMs },
        { header: deliveryHeads.lastFailure, value: (d) => d.attempts[0]?.error },
      ],
    );
  },
);
