import { publicEndpoint } from '../../../../server/http/endpoint';
import { takeBatchByHttps } from '../../../../server/services/ingest-by-https';

// nobody is signed in here: a logger speaks, by its own token
export const POST = publicEndpoint({ permission: 'public' }, ({ context }) =>
  takeBatchByHttps(context.request, context.clientAddress),
);
