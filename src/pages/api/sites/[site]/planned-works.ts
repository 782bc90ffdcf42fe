import { z } from 'zod';
import { id } from '../../../../schemas/api/now';
import { newPlannedWork } from '../../../../schemas/api/planned-works';
import { endpoint } from '../../../../server/http/endpoint';
import { plannedWorksPage, planWork } from '../../../../server/services/planned-works';

const params = z.object({ site: id });

export const GET = endpoint({ permission: 'site.read', params }, ({ tx, params: { site } }) =>
  plannedWorksPage(tx, site, new Date()),
);

export const POST = endpoint(
  { permission: 'planned_work.write', params, body: newPlannedWork },
  async ({ tx, actor, params: { site }, body, context }) => {
    const at = new Date();
    await planWork(
      tx,
      { actor, person: context.locals.viewer?.name ?? '', address: context.clientAddress },
      site,
      body,
      at,
    );
    return plannedWorksPage(tx, site, at);
  },
);
