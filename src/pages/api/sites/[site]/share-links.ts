import { shareLinkBody } from '../../../../schemas/api/share';
import { siteParams } from '../../../../schemas/api/site';
import { publicOrigin } from '../../../../server/config';
import { endpoint } from '../../../../server/http/endpoint';
import { makeShareLink, siteShareLinks } from '../../../../server/services/share-links';

export const GET = endpoint({ permission: 'share.manage', params: siteParams }, ({ tx, params }) =>
  siteShareLinks(tx, params.site, new Date()),
);

export const POST = endpoint(
  { permission: 'share.manage', params: siteParams, body: shareLinkBody },
  ({ tx, actor, params, body, context }) =>
    makeShareLink(tx, actor, params.site, body, {
      at: new Date(),
      address: context.clientAddress,
      origin: publicOrigin(context.url),
    }),
);
