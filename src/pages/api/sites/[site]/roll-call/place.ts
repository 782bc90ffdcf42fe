import { placeBody } from '../../../../../schemas/api/placing';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { placeHeard } from '../../../../../server/services/place-heard';

export const POST = endpoint(
  { permission: 'as_built.write', params: siteParams, body: placeBody },
  ({ tx, actor, params, body, context }) =>
    placeHeard(tx, actor, params.site, body, new Date(), context.clientAddress),
);
