import { evidenceQuery, pairParams } from '../../../../../schemas/api/equipment';
import { endpoint } from '../../../../../server/http/endpoint';
import { recordedReply } from '../../../../../server/http/recorded-reply';
import { receiveEvidence, storeEvidence } from '../../../../../server/services/store-evidence';

export const POST = endpoint(
  {
    permission: 'connector_evidence.record',
    params: pairParams,
    query: evidenceQuery,
    receive: ({ actor, params, query, context }) =>
      receiveEvidence(actor, params.pair, context.request, query.name),
  },
  async ({ tx, actor, params, query, received }) =>
    recordedReply(await storeEvidence(tx, actor, params.pair, query, received, new Date())),
);
