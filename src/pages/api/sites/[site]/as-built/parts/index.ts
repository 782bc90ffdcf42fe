import { partAdd } from '../../../../../../schemas/api/as-built';
import { siteParams } from '../../../../../../schemas/api/site';
import { endpoint } from '../../../../../../server/http/endpoint';
import { addFromForm } from '../../../../../../server/services/as-built-requests';

export const POST = endpoint(
  { permission: 'as_built.write', params: siteParams, body: partAdd },
  ({ tx, actor, params, body, context }) => addFromForm(tx, actor, params.site, body, context.clientAddress),
);
