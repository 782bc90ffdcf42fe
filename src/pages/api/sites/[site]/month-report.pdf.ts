import { monthQuery } from '../../../../schemas/api/figures';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { monthReport } from '../../../../server/reports/figures/month-report';
import { organisationLogo } from '../../../../server/services/settings';
import { siteFigures } from '../../../../server/services/figures';

export const GET = endpoint(
  { permission: 'figures.read', params: siteParams, query: monthQuery, mayLag: true },
  async ({ tx, params, query }) =>
    monthReport(await siteFigures(tx, params.site, query.month, new Date()), await organisationLogo(tx)),
);
