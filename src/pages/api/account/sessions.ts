import { endSessionsBody } from '../../../schemas/api/my-account';
import { callerOf } from '../../../server/http/caller';
import { endpoint } from '../../../server/http/endpoint';
import { endOtherSessions } from '../../../server/services/my-account';

export const DELETE = endpoint(
  { permission: 'own_account.use', body: endSessionsBody },
  ({ tx, actor, body, context }) => endOtherSessions(tx, callerOf(context, actor), body.key),
);
