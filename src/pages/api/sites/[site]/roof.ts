import { roofSave } from '../../../../schemas/api/roof';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { roofPlanOf, saveRoof } from '../../../../server/services/roof';

export const GET = endpoint({ permission: 'as_built.read', params: siteParams }, ({ tx, params }) =>
  roofPlanOf(tx, params.site),
);

export const PUT = endpoint(
  // thousands of slots in one request
  { permission: 'as_built.write', params: siteParams, body: roofSave, bodyMaxBytes: 4 * 1024 * 1024 },
  ({ tx, actor, params, body, context }) => saveRoof(tx, actor, params.site, body, context.clientAddress),
);
