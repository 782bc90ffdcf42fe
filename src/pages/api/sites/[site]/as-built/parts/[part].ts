import { partChange, partParams, partRemove } from '../../../../../../schemas/api/as-built';
import { found } from '../../../../../../server/errors';
import { endpoint } from '../../../../../../server/http/endpoint';
import { visibleSite } from '../../../../../../server/queries/visible-site';
import { changePart, removePart } from '../../../../../../server/services/edit-as-built';

export const PATCH = endpoint(
  { permission: 'as_built.write', params: partParams, body: partChange },
  async ({ tx, actor, params, body, context }) => {
    const site = found(await visibleSite(tx, params.site), 'site');
    const { reason, ...edit } = body;
    const how = { reason, source: 'forms', address: context.clientAddress };
    await changePart(tx, actor, site.id, { ...edit, id: params.part }, how);
  },
);

export const DELETE = endpoint(
  { permission: 'as_built.write', params: partParams, body: partRemove },
  async ({ tx, actor, params, body, context }) => {
    const site = found(await visibleSite(tx, params.site), 'site');
    const how = { reason: body.reason, source: 'forms', address: context.clientAddress };
    await removePart(tx, actor, site.id, { kind: body.kind, id: params.part }, how);
  },
);
