import { inviteBody } from '../../../schemas/api/people';
import { endpoint } from '../../../server/http/endpoint';
import { invite } from '../../../server/services/people';

export const POST = endpoint(
  { permission: 'people.manage', body: inviteBody },
  ({ tx, actor, body, context }) => invite(tx, actor, body, new Date(), context.clientAddress),
);
