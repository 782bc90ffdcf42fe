import { actsBody, testParams } from '../../../../schemas/api/shutdown-test';
import { endpoint } from '../../../../server/http/endpoint';
import { shutdownTestPage } from '../../../../server/services/shutdown-test-page';
import { addActs } from '../../../../server/services/shutdown-test-write';

export const POST = endpoint(
  { permission: 'shutdown_test.run', params: testParams, body: actsBody },
  async ({ tx, actor, params, body, context }) => {
    const now = new Date();
    await addActs(tx, actor, params.test, body.acts, now);
    return shutdownTestPage(tx, params.test, now, context.locals.viewer?.name ?? '');
  },
);
