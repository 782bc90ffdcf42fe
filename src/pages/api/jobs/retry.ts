import { retryBody } from '../../../schemas/api/jobs';
import { endpoint } from '../../../server/http/endpoint';
import { retryFailed } from '../../../server/services/jobs-page';

export const POST = endpoint({ permission: 'jobs.retry', body: retryBody }, ({ tx, actor, body, context }) =>
  retryFailed(tx, { actor, address: context.clientAddress }, body.job, new Date()),
);
