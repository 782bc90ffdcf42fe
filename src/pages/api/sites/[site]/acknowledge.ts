import { acknowledgeBody } from '../../../../schemas/api/fleet';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { acknowledge } from '../../../../server/services/acknowledge';

export const POST = endpoint(
  { permission: 'hazard.acknowledge', params: siteParams, body: acknowledgeBody },
  ({ tx, actor, params, body, context }) =>
    acknowledge(
      tx,
      actor,
      {
        site: params.site,
        key: body.key,
        person: context.locals.viewer?.name ?? '',
        address: context.clientAddress,
      },
      new Date(),
    ),
);
