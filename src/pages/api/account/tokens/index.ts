import { makeTokenBody } from '../../../../schemas/api/tokens';
import { callerOf } from '../../../../server/http/caller';
import { endpoint } from '../../../../server/http/endpoint';
import { makeToken, tokensPage } from '../../../../server/services/api-tokens';

export const GET = endpoint({ permission: 'api_token.use' }, ({ tx, actor }) =>
  tokensPage(tx, actor, new Date()),
);

export const POST = endpoint(
  { permission: 'api_token.use', body: makeTokenBody },
  ({ tx, actor, body, context }) => makeToken(tx, callerOf(context, actor), body, new Date()),
);
