import { tokenParams } from '../../../../schemas/api/tokens';
import { callerOf } from '../../../../server/http/caller';
import { endpoint } from '../../../../server/http/endpoint';
import { endToken } from '../../../../server/services/api-tokens';

export const DELETE = endpoint(
  { permission: 'api_token.use', params: tokenParams },
  ({ tx, actor, params, context }) => endToken(tx, callerOf(context, actor), params.token, new Date()),
);
