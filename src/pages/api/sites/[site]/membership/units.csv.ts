import { membershipQuery } from '../../../../../schemas/api/membership';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { csvResponse } from '../../../../../server/reports/csv';
import { membershipUnits } from '../../../../../server/services/membership';

const OUTCOMES = {
  here: 'carries the current of its string',
  elsewhere: 'carries the current of another string',
  cant_tell: 'can’t tell',
  fits_none: 'fits no string',
} as const;
const MISFIT = 'not its string; several others fit alike';

export const GET = endpoint(
  { permission: 'telemetry.export', params: siteParams, query: membershipQuery },
  async ({ tx, params, query }) => {
    const { site, units } = await membershipUnits(tx, params.site, query.hours, new Date());
    return csvResponse(
      `membership-${site.name}`,
      [
        { header: 'string', value: (u) => u.string },
        { header: 'position', value: (u) => u.position },
        { header: 'serial', value: (u) => u.serial },
        {
          header: 'finding',
          value: (u) => (u.fitsOwn || u.outcome !== 'cant_tell' ? OUTCOMES[u.outcome] : MISFIT),
        },
        { header: 'other string', value: (u) => u.otherString },
        { header: 'apart from its string (%)', value: (u) => percent(u.apartOwn) },
        { header: 'apart from the other (%)', value: (u) => percent(u.apartOther) },
        { header: 'reports with current', value: (u) => u.steps },
        { header: 'in words', value: (u) => u.words },
      ],
      units,
    );
  },
);

const percent = (share: number | null): number | null =>
  share === null ? null : Math.round(share * 1000) / 10;
