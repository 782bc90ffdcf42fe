import { shareLinkParams } from '../../../schemas/api/share';
import { endpoint } from '../../../server/http/endpoint';
import { withdrawShareLink } from '../../../server/services/share-links';

export const DELETE = endpoint(
  { permission: 'share.manage', params: shareLinkParams },
  ({ tx, actor, params, context }) =>
    withdrawShareLink(tx, actor, params.link, new Date(), context.clientAddress),
);
