import { callerOf } from '../../../server/http/caller';
import { endpoint } from '../../../server/http/endpoint';
import { accountPage } from '../../../server/services/my-account';

export const GET = endpoint({ permission: 'own_account.use' }, ({ tx, actor, context }) => {
  const { viewer, sessionId } = callerOf(context, actor);
  return accountPage(tx, actor, viewer, sessionId, new Date());
});
