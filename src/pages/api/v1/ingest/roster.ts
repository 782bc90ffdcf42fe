import { publicEndpoint } from '../../../../server/http/endpoint';
import { rosterByHttps } from '../../../../server/services/ingest-by-https';

// nobody is signed in here: a logger speaks, by its own token
export const GET = publicEndpoint({ permission: 'public' }, ({ context }) =>
  rosterByHttps(context.request, context.clientAddress),
);
