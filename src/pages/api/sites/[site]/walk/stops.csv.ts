import { stopsOfPage } from '../../../../../features/walk/stops';
import { STOP_WORDS } from '../../../../../words/walk-sentences';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { csvResponse } from '../../../../../server/reports/csv';
import { walkPage } from '../../../../../server/services/walk';
import { walkHeads } from '../../../../../words/csv-heads-site';

export const GET = endpoint(
  { permission: 'telemetry.export', params: siteParams },
  async ({ tx, params }) => {
    const page = await walkPage(tx, params.site, new Date());
    return csvResponse(
      `walk-${page.site.name}`,
      [
        { header: walkHeads.stop, value: (s) => s.number },
        { header: walkHeads.string, value: (s) => s.stringName },
        { header: walkHeads.position, value: (s) => s.position },
        { header: walkHeads.serial, value: (s) => s.serial },
        { header: walkHeads.what, value: (s) => STOP_WORDS[s.kind] },
        { header: walkHeads.placeOnTheRoof, value: (s) => s.roofPlace },
        { header: walkHeads.roofXM, value: (s) => s.at?.x },
        { header: walkHeads.roofYM, value: (s) => s.at?.y },
      ],
      stopsOfPage(page).map((s, i) => ({ ...s, number: i + 1 })),
    );
  },
);
