import { endToken, tokenParams } from '../../../../../../../../schemas/api/loggers';
import { found } from '../../../../../../../../server/errors';
import { endpoint } from '../../../../../../../../server/http/endpoint';
import { visibleSite } from '../../../../../../../../server/queries/visible-site';
import { endLoggerToken } from '../../../../../../../../server/services/logger-token';

export const POST = endpoint(
  { permission: 'logger_token.manage', params: tokenParams, body: endToken },
  async ({ tx, actor, params, body, context }) => {
    const site = found(await visibleSite(tx, params.site), 'site');
    const how = { reason: body.reason, source: 'forms', address: context.clientAddress };
    await endLoggerToken(tx, actor, site.id, params, how);
  },
);
