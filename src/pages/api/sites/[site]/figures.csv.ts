import { figuresQuery } from '../../../../schemas/api/figures';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { siteFiguresCsv } from '../../../../server/reports/figures/csv';
import { siteFigures } from '../../../../server/services/figures';

export const GET = endpoint(
  { permission: 'figures.read', params: siteParams, query: figuresQuery, mayLag: true },
  async ({ tx, params, query }) =>
    siteFiguresCsv(await siteFigures(tx, params.site, query.period, new Date())),
);
