import { publicEndpoint } from '../../../server/http/endpoint';
import { openApiDocument } from '../../../server/v1/document';
import { tagged } from '../../../server/v1/door';

export const GET = publicEndpoint({ permission: 'public' }, ({ context }) =>
  Promise.resolve(tagged(context.request, context.url, openApiDocument())),
);
