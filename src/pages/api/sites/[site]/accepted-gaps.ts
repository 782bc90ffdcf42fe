import { acceptGap as acceptGapBody } from '../../../../schemas/api/commissioning';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { acceptGap } from '../../../../server/services/accept-gap';

export const POST = endpoint(
  { permission: 'gap.accept', params: siteParams, body: acceptGapBody },
  ({ tx, actor, params, body, context }) => acceptGap(tx, actor, params.site, body, context.clientAddress),
);
