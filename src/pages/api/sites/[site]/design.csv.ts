import { DESIGN_COLUMNS } from '../../../../features/design/csv';
import { shownFindings } from '../../../../features/design/list';
import { designCsvQuery } from '../../../../schemas/api/design';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { csvResponse } from '../../../../server/reports/csv';
import { siteDesign } from '../../../../server/services/design-findings';

export const GET = endpoint(
  { permission: 'as_built.read', params: siteParams, query: designCsvQuery },
  async ({ tx, params, query }) => {
    const design = await siteDesign(tx, params.site, new Date());
    return csvResponse(`design-checks-${design.siteName}`, DESIGN_COLUMNS, shownFindings(design, query));
  },
);
