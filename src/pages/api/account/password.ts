import { changePasswordBody } from '../../../schemas/api/my-account';
import { callerOf } from '../../../server/http/caller';
import { endpoint } from '../../../server/http/endpoint';
import { changePassword } from '../../../server/services/my-account';

export const PUT = endpoint(
  { permission: 'own_account.use', body: changePasswordBody },
  ({ tx, actor, body, context }) => changePassword(tx, callerOf(context, actor), body),
);
