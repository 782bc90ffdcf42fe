import { sharedParams } from '../../../schemas/api/share';
import { publicEndpoint } from '../../../server/http/endpoint';
import { SECRET_HEADERS } from '../../../server/http/plain-form';
import { sharedPage } from '../../../server/services/share-links';

export const GET = publicEndpoint(
  { permission: 'public', params: sharedParams },
  async ({ params, context }) =>
    Response.json(await sharedPage(params.token, new Date(), context.clientAddress), {
      headers: { ...SECRET_HEADERS, 'cache-control': 'no-store' },
    }),
);
