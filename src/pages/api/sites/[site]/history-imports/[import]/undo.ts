import { historyImportParams, undoImport } from '../../../../../../schemas/api/history-import';
import { endpoint } from '../../../../../../server/http/endpoint';
import { takeImportBack } from '../../../../../../server/services/history-import';

export const POST = endpoint(
  { permission: 'history.import', params: historyImportParams, body: undoImport },
  ({ tx, actor, params, body, context }) =>
    takeImportBack(tx, actor, params, body.reason, { at: new Date(), address: context.clientAddress }),
);
