import { tallyOf } from '../../../../../features/commissioning/tally';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { csvResponse } from '../../../../../server/reports/csv';
import { rollCallPage } from '../../../../../server/services/roll-call-page';

export const GET = endpoint(
  { permission: 'telemetry.export', params: siteParams },
  async ({ tx, params }) => {
    const page = await rollCallPage(tx, params.site, new Date());
    return csvResponse(
      `roll-call-${page.site.name}`,
      [
        { header: 'string', value: (u) => u.stringName },
        { header: 'position', value: (u) => u.position },
        { header: 'serial', value: (u) => u.serial },
        { header: 'place on the roof', value: (u) => u.roofPlace },
        { header: 'answered', value: (u) => u.answer !== null },
        { header: 'first answer (UTC)', value: (u) => u.answer?.at },
        { header: 'gateway', value: (u) => u.answer?.gateway },
        { header: 'signal (dBm)', value: (u) => u.signal },
      ],
      tallyOf(page).units,
    );
  },
);
