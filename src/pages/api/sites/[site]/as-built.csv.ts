import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { asBuiltCsv } from '../../../../server/reports/as-built-csv';
import { asBuiltPage } from '../../../../server/services/as-built-requests';

export const GET = endpoint({ permission: 'telemetry.export', params: siteParams }, async ({ tx, params }) =>
  asBuiltCsv(await asBuiltPage(tx, params.site, new Date())),
);
