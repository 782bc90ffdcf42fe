import { familyParams, importInput } from '../../../../schemas/api/equipment';
import { endpoint } from '../../../../server/http/endpoint';
import { importTypes } from '../../../../server/services/equipment-import';

export const POST = endpoint(
  { permission: 'equipment.write', params: familyParams, body: importInput },
  ({ tx, actor, params, body, context }) =>
    importTypes(tx, actor, params.family, body, context.clientAddress),
);
