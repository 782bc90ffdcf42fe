import { tallyOf } from '../../../../../features/commissioning/tally';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { csvResponse } from '../../../../../server/reports/csv';
import { rollCallPage } from '../../../../../server/services/roll-call-page';
import { rollCallHeads } from '../../../../../words/csv-heads-site';

export const GET = endpoint(
  { permission: 'telemetry.export', params: siteParams },
  async ({ tx, params }) => {
    const page = await rollCallPage(tx, params.site, new Date());
    return csvResponse(
      `roll-call-${page.site.name}`,
      [
        { header: rollCallHeads.string, value: (u) => u.stringName },
        { header: rollCallHeads.position, value: (u) => u.position },
        { header: rollCallHeads.serial, value: (u) => u.serial },
        { header: rollCallHeads.placeOnTheRoof, value: (u) => u.roofPlace },
        { header: rollCallHeads.answered, value: (u) => u.answer !== null },
        { header: rollCallHeads.firstAnswerUtc, value: (u) => u.answer?.at },
        { header: rollCallHeads.gateway, value: (u) => u.answer?.gateway },
        { header: rollCallHeads.signalDBm, value: (u) => u.signal },
      ],
      tallyOf(page).units,
    );
  },
);
