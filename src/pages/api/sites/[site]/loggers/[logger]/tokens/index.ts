import { loggerParams } from '../../../../../../../schemas/api/as-built';
import { newToken as tokenAsked, type NewTokenReply } from '../../../../../../../schemas/api/loggers';
import { found } from '../../../../../../../server/errors';
import { endpoint } from '../../../../../../../server/http/endpoint';
import { visibleSite } from '../../../../../../../server/queries/visible-site';
import { makeLoggerToken, newToken } from '../../../../../../../server/services/logger-token';

export const POST = endpoint(
  { permission: 'logger_token.manage', params: loggerParams, body: tokenAsked },
  async ({ tx, actor, params, body, context }): Promise<NewTokenReply> => {
    const site = found(await visibleSite(tx, params.site), 'site');
    const token = newToken();
    const how = { reason: body.reason, source: 'forms', address: context.clientAddress };
    const order = { token, name: body.name, overlapS: body.overlapHours * 3600 };
    return { token, ...(await makeLoggerToken(tx, actor, site.id, params.logger, how, order)) };
  },
);
