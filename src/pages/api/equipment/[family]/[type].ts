import { archiveInput, entryChange, typeParams } from '../../../../schemas/api/equipment';
import { endpoint } from '../../../../server/http/endpoint';
import { readType } from '../../../../server/services/equipment';
import { archiveType, changeType } from '../../../../server/services/equipment-save';

export const GET = endpoint({ permission: 'equipment.read', params: typeParams }, ({ tx, params }) =>
  readType(tx, params.family, params.type),
);

export const PUT = endpoint(
  { permission: 'equipment.write', params: typeParams, body: entryChange },
  ({ tx, actor, params, body, context }) =>
    changeType(tx, actor, params.family, params.type, body, context.clientAddress),
);

export const PATCH = endpoint(
  { permission: 'equipment.write', params: typeParams, body: archiveInput },
  ({ tx, actor, params, body, context }) =>
    archiveType(tx, actor, params.family, params.type, {
      archived: body.archived,
      at: new Date(),
      address: context.clientAddress,
    }),
);
