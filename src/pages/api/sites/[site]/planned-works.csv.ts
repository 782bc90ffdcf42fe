import { z } from 'zod';
import { id } from '../../../../schemas/api/now';
import { endpoint } from '../../../../server/http/endpoint';
import { csvResponse } from '../../../../server/reports/csv';
import { plannedWorksPage } from '../../../../server/services/planned-works';
import { plannedWorkHeads } from '../../../../words/csv-heads-site';

export const GET = endpoint(
  { permission: 'site.read', params: z.object({ site: id }) },
  async ({ tx, params: { site } }) => {
    const page = await plannedWorksPage(tx, site, new Date());
    return csvResponse(
      `planned-works-${page.site.name}`,
      [
        { header: plannedWorkHeads.fromUtc, value: (w) => new Date(w.startsAt) },
        { header: plannedWorkHeads.toUtc, value: (w) => new Date(w.endsAt) },
        { header: plannedWorkHeads.what, value: (w) => w.reason },
        {
          header: plannedWorkHeads.strings,
          value: (w) => w.strings?.join(' ') ?? plannedWorkHeads.wholeSite,
        },
        { header: plannedWorkHeads.enteredBy, value: (w) => w.by },
        { header: plannedWorkHeads.endedEarlyBy, value: (w) => w.endedBy },
      ],
      page.works,
    );
  },
);
