import {
  beginSecondFactorBody,
  confirmSecondFactorBody,
  endSecondFactorBody,
} from '../../../schemas/api/my-account';
import { callerOf } from '../../../server/http/caller';
import { endpoint } from '../../../server/http/endpoint';
import { beginSecondFactor, confirmSecondFactor, endSecondFactor } from '../../../server/services/my-account';

export const POST = endpoint(
  { permission: 'own_account.use', body: beginSecondFactorBody },
  ({ tx, actor, body, context }) => beginSecondFactor(tx, callerOf(context, actor), body.current),
);

export const PUT = endpoint(
  { permission: 'own_account.use', body: confirmSecondFactorBody },
  ({ tx, actor, body, context }) => confirmSecondFactor(tx, callerOf(context, actor), body.code, new Date()),
);

export const DELETE = endpoint(
  { permission: 'own_account.use', body: endSecondFactorBody },
  ({ tx, actor, body, context }) => endSecondFactor(tx, callerOf(context, actor), body.current),
);
