import { startBody } from '../../../../schemas/api/shutdown-test';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { shutdownTestList } from '../../../../server/services/shutdown-test-report';
import { startShutdownTest } from '../../../../server/services/shutdown-test-write';

export const GET = endpoint({ permission: 'shutdown_test.read', params: siteParams }, ({ tx, params }) =>
  shutdownTestList(tx, params.site, new Date()),
);

export const POST = endpoint(
  { permission: 'shutdown_test.run', params: siteParams, body: startBody },
  ({ tx, actor, params, body, context }) =>
    startShutdownTest(tx, actor, params.site, body, context.clientAddress),
);
