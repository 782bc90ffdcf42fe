import { z } from 'zod';
import { id } from '../../../../schemas/api/now';
import { endpoint } from '../../../../server/http/endpoint';
import { csvResponse } from '../../../../server/reports/csv';
import { plannedWorksPage } from '../../../../server/services/planned-works';

export const GET = endpoint(
  { permission: 'site.read', params: z.object({ site: id }) },
  async ({ tx, params: { site } }) => {
    const page = await plannedWorksPage(tx, site, new Date());
    return csvResponse(
      `planned-works-${page.site.name}`,
      [
        { header: 'from (UTC)', value: (w) => new Date(w.startsAt) },
        { header: 'to (UTC)', value: (w) => new Date(w.endsAt) },
        { header: 'what', value: (w) => w.reason },
        { header: 'strings', value: (w) => w.strings?.join(' ') ?? 'whole site' },
        { header: 'entered by', value: (w) => w.by },
        { header: 'ended early by', value: (w) => w.endedBy },
      ],
      page.works,
    );
  },
);
