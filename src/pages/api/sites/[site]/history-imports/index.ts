import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { historyPage } from '../../../../../server/services/history-import';
import { answerHistoryImport } from '../../../../../server/services/history-import-stream';

export const GET = endpoint({ permission: 'history.import', params: siteParams }, async ({ tx, params }) => {
  const { at, site, imports } = await historyPage(tx, params.site, new Date());
  return { at, site, imports };
});

export const POST = endpoint(
  {
    permission: 'history.import',
    params: siteParams,
    // a file takes its time, and has a transaction of its own
    receive: ({ actor, params, context }) =>
      answerHistoryImport(
        actor,
        {
          siteRef: params.site,
          request: context.request,
          address: context.clientAddress,
          requestId: context.locals.requestId,
        },
        new Date(),
      ),
  },
  ({ received }) => Promise.resolve(received),
);
