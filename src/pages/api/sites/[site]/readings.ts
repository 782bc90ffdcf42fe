import { readingInput } from '../../../../schemas/api/readings';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { recordedReply } from '../../../../server/http/recorded-reply';
import { readingsPage } from '../../../../server/services/checks-page';
import { recordReading } from '../../../../server/services/record-reading';

export const GET = endpoint(
  { permission: 'checks.read', params: siteParams },
  ({ tx, actor, params, context }) =>
    readingsPage(
      tx,
      params.site,
      { id: context.locals.viewer?.id ?? '', name: context.locals.viewer?.name ?? '', role: actor.role },
      new Date(),
    ),
);

export const POST = endpoint(
  { permission: 'checks.write', params: siteParams, body: readingInput },
  async ({ tx, actor, params, body }) =>
    recordedReply(await recordReading(tx, actor, params.site, body, new Date())),
);
