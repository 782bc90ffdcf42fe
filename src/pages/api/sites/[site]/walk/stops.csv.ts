import { stopsOfPage } from '../../../../../features/walk/stops';
import { STOP_WORDS } from '../../../../../features/walk/words';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { csvResponse } from '../../../../../server/reports/csv';
import { walkPage } from '../../../../../server/services/walk';

export const GET = endpoint(
  { permission: 'telemetry.export', params: siteParams },
  async ({ tx, params }) => {
    const page = await walkPage(tx, params.site, new Date());
    return csvResponse(
      `walk-${page.site.name}`,
      [
        { header: 'stop', value: (s) => s.number },
        { header: 'string', value: (s) => s.stringName },
        { header: 'position', value: (s) => s.position },
        { header: 'serial', value: (s) => s.serial },
        { header: 'what', value: (s) => STOP_WORDS[s.kind] },
        { header: 'place on the roof', value: (s) => s.roofPlace },
        { header: 'roof x (m)', value: (s) => s.at?.x },
        { header: 'roof y (m)', value: (s) => s.at?.y },
      ],
      stopsOfPage(page).map((s, i) => ({ ...s, number: i + 1 })),
    );
  },
);
