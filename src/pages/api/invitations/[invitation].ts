import { invitationParams } from '../../../schemas/api/people';
import { endpoint } from '../../../server/http/endpoint';
import { withdrawInvitation } from '../../../server/services/people';

export const DELETE = endpoint(
  { permission: 'people.manage', params: invitationParams },
  ({ tx, actor, params, context }) =>
    withdrawInvitation(tx, actor, params.invitation, new Date(), context.clientAddress),
);
