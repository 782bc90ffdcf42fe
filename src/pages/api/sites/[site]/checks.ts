import { checkInput } from '../../../../schemas/api/checks';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { recordedReply } from '../../../../server/http/recorded-reply';
import { checksPage } from '../../../../server/services/checks-page';
import { recordCheck } from '../../../../server/services/record-check';

export const GET = endpoint(
  { permission: 'checks.read', params: siteParams },
  ({ tx, actor, params, context }) =>
    checksPage(
      tx,
      params.site,
      { id: context.locals.viewer?.id ?? '', name: context.locals.viewer?.name ?? '', role: actor.role },
      new Date(),
    ),
);

export const POST = endpoint(
  { permission: 'checks.write', params: siteParams, body: checkInput },
  async ({ tx, actor, params, body }) =>
    recordedReply(await recordCheck(tx, actor, params.site, body, new Date())),
);
