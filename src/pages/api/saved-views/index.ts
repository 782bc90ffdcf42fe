import { newSavedView, savedViewsQuery } from '../../../schemas/api/saved-views';
import { endpoint } from '../../../server/http/endpoint';
import { savedViewsOf } from '../../../server/queries/saved-views';
import { keepView } from '../../../server/services/saved-views';

export const GET = endpoint(
  { permission: 'saved_view.use', query: savedViewsQuery },
  ({ tx, actor, query }) => savedViewsOf(tx, actor.personId, query.list),
);

export const POST = endpoint({ permission: 'saved_view.use', body: newSavedView }, ({ tx, actor, body }) =>
  keepView(tx, actor, body),
);
