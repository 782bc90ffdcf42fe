import { signBody, testParams } from '../../../../schemas/api/shutdown-test';
import { endpoint } from '../../../../server/http/endpoint';
import { signShutdownTest } from '../../../../server/services/shutdown-test-sign';

export const POST = endpoint(
  { permission: 'shutdown_test.run', params: testParams, body: signBody },
  ({ tx, actor, params, body, context }) =>
    signShutdownTest(
      tx,
      actor,
      { name: context.locals.viewer?.name ?? '', address: context.clientAddress },
      params.test,
      body,
      new Date(),
    ),
);
