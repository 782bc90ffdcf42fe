import { placementsBody } from '../../../../schemas/api/as-built';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { saveSlots } from '../../../../server/services/as-built-requests';

export const POST = endpoint(
  { permission: 'as_built.write', params: siteParams, body: placementsBody },
  ({ tx, actor, params, body, context }) =>
    saveSlots(tx, actor, params.site, body, new Date(), context.clientAddress),
);
