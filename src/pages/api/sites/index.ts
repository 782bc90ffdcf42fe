import { siteCreate } from '../../../schemas/api/as-built';
import { endpoint } from '../../../server/http/endpoint';
import { createSite } from '../../../server/services/create-site';

export const POST = endpoint(
  { permission: 'as_built.write', body: siteCreate },
  async ({ tx, actor, body, context }) => {
    const { id } = await createSite(tx, actor, body.values, context.clientAddress);
    return { id };
  },
);
