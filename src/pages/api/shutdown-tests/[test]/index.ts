import { testParams } from '../../../../schemas/api/shutdown-test';
import { endpoint } from '../../../../server/http/endpoint';
import { shutdownTestPage } from '../../../../server/services/shutdown-test-page';

export const GET = endpoint(
  { permission: 'shutdown_test.read', params: testParams },
  ({ tx, params, context }) =>
    shutdownTestPage(tx, params.test, new Date(), context.locals.viewer?.name ?? ''),
);
