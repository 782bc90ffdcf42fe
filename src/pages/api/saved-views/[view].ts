import { changedSavedView, savedViewParams } from '../../../schemas/api/saved-views';
import { endpoint } from '../../../server/http/endpoint';
import { changeView, dropView } from '../../../server/services/saved-views';

export const PATCH = endpoint(
  { permission: 'saved_view.use', params: savedViewParams, body: changedSavedView },
  ({ tx, actor, params, body }) => changeView(tx, actor, params.view, body),
);

export const DELETE = endpoint(
  { permission: 'saved_view.use', params: savedViewParams },
  ({ tx, actor, params }) => dropView(tx, actor, params.view),
);
