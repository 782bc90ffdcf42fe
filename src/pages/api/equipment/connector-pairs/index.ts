import { pairInput } from '../../../../schemas/api/equipment';
import { endpoint } from '../../../../server/http/endpoint';
import { recordPair } from '../../../../server/services/connector-pairs';

export const POST = endpoint(
  { permission: 'connector_evidence.record', body: pairInput },
  ({ tx, actor, body, context }) => recordPair(tx, actor, body, context.clientAddress),
);
