import { pairParams } from '../../../../../schemas/api/equipment';
import { endpoint } from '../../../../../server/http/endpoint';
import { endRecordedPair } from '../../../../../server/services/connector-pairs';

export const DELETE = endpoint(
  { permission: 'connector_evidence.record', params: pairParams },
  ({ tx, actor, params, context }) =>
    endRecordedPair(tx, actor, params.pair, new Date(), context.clientAddress),
);
