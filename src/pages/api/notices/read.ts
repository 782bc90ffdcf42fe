import { readBodySchema } from '../../../schemas/api/notices';
import { endpoint } from '../../../server/http/endpoint';
import { markRead, markUnread } from '../../../server/queries/notices';

export const POST = endpoint(
  { permission: 'notice.read', body: readBodySchema },
  async ({ tx, actor, body }) => {
    if ('ids' in body && !body.read) await markUnread(tx, actor.personId, body.ids);
    else await markRead(tx, actor.personId, body, new Date());
  },
);
