import { entryInput, familyParams } from '../../../../schemas/api/equipment';
import { endpoint } from '../../../../server/http/endpoint';
import { readCatalogue } from '../../../../server/services/equipment';
import { createType } from '../../../../server/services/equipment-save';

export const GET = endpoint({ permission: 'equipment.read', params: familyParams }, ({ tx, params }) =>
  readCatalogue(tx, params.family),
);

export const POST = endpoint(
  { permission: 'equipment.write', params: familyParams, body: entryInput },
  ({ tx, actor, params, body, context }) => createType(tx, actor, params.family, body, context.clientAddress),
);
