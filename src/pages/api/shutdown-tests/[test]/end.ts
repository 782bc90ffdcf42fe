import { endBody, testParams } from '../../../../schemas/api/shutdown-test';
import { endpoint } from '../../../../server/http/endpoint';
import { endShutdownTest } from '../../../../server/services/shutdown-test-write';

export const POST = endpoint(
  { permission: 'shutdown_test.run', params: testParams, body: endBody },
  ({ tx, actor, params, body, context }) =>
    endShutdownTest(tx, actor, params.test, body.reason, context.clientAddress),
);
