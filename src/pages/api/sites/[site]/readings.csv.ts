import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { readingsCsv } from '../../../../server/reports/checks-csv';
import { captureSnapshot } from '../../../../server/services/capture-snapshot';

export const GET = endpoint(
  { permission: 'checks.read', params: siteParams },
  async ({ tx, actor, params, context }) => {
    const { viewer } = context.locals;
    const person = { id: viewer?.id ?? '', name: viewer?.name ?? '', role: actor.role };
    return readingsCsv(await captureSnapshot(tx, params.site, person, new Date()));
  },
);
