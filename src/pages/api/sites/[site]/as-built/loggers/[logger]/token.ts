import { loggerParams, tokenAsked } from '../../../../../../../schemas/api/as-built';
import { found } from '../../../../../../../server/errors';
import { endpoint } from '../../../../../../../server/http/endpoint';
import { visibleSite } from '../../../../../../../server/queries/visible-site';
import { makeLoggerToken, newToken } from '../../../../../../../server/services/logger-token';

export const POST = endpoint(
  { permission: 'as_built.write', params: loggerParams, body: tokenAsked },
  async ({ tx, actor, params, body, context }) => {
    const site = found(await visibleSite(tx, params.site), 'site');
    const token = newToken();
    const how = { reason: body.reason, source: 'forms', address: context.clientAddress };
    await makeLoggerToken(tx, actor, site.id, params.logger, how, { token });
    return { token };
  },
);
