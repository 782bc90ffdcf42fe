import { changeEmailBody } from '../../../schemas/api/my-account';
import { evenly } from '../../../server/auth/even-time';
import { callerOf } from '../../../server/http/caller';
import { endpoint } from '../../../server/http/endpoint';
import { askForEmail } from '../../../server/services/my-account';

export const PUT = endpoint(
  { permission: 'own_account.use', body: changeEmailBody },
  ({ tx, actor, body, context }) => evenly(() => askForEmail(tx, callerOf(context, actor), body, new Date())),
);
