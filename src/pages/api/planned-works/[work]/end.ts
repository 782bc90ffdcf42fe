import { z } from 'zod';
import { id } from '../../../../schemas/api/now';
import { endpoint } from '../../../../server/http/endpoint';
import { endWork } from '../../../../server/services/planned-works';

export const POST = endpoint(
  { permission: 'planned_work.write', params: z.object({ work: id }) },
  ({ tx, actor, params: { work }, context }) =>
    endWork(
      tx,
      { actor, person: context.locals.viewer?.name ?? '', address: context.clientAddress },
      work,
      new Date(),
    ),
);
