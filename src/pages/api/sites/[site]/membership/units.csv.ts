import { membershipQuery } from '../../../../../schemas/api/membership';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { csvResponse } from '../../../../../server/reports/csv';
import { membershipUnits } from '../../../../../server/services/membership';
import { membershipHeads } from '../../../../../words/csv-heads-site';

export const GET = endpoint(
  { permission: 'telemetry.export', params: siteParams, query: membershipQuery },
  async ({ tx, params, query }) => {
    const { site, units } = await membershipUnits(tx, params.site, query.hours, new Date());
    return csvResponse(
      `membership-${site.name}`,
      [
        { header: membershipHeads.string, value: (u) => u.string },
        { header: membershipHeads.position, value: (u) => u.position },
        { header: membershipHeads.serial, value: (u) => u.serial },
        {
          header: membershipHeads.finding,
          value: (u) =>
            u.fitsOwn || u.outcome !== 'cant_tell'
              ? membershipHeads.findings[u.outcome]
              : membershipHeads.severalFit,
        },
        { header: membershipHeads.otherString, value: (u) => u.otherString },
        { header: membershipHeads.apartFromItsString, value: (u) => percent(u.apartOwn) },
        { header: membershipHeads.apartFromTheOther, value: (u) => percent(u.apartOther) },
        { header: membershipHeads.reportsWithCurrent, value: (u) => u.steps },
        { header: membershipHeads.inWords, value: (u) => u.words },
      ],
      units,
    );
  },
);

const percent = (share: number | null): number | null =>
  share === null ? null : Math.round(share * 1000) / 10;
