import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { snapshotReply } from '../../../../server/http/snapshot-reply';
import { captureSnapshot, snapshotTag } from '../../../../server/services/capture-snapshot';

export const GET = endpoint(
  { permission: 'checks.read', params: siteParams },
  async ({ tx, actor, params, context }) => {
    const { viewer } = context.locals;
    const person = { id: viewer?.id ?? '', name: viewer?.name ?? '', role: actor.role };
    const snapshot = await captureSnapshot(tx, params.site, person, new Date());
    return snapshotReply(context.request, snapshot, snapshotTag(snapshot));
  },
);
