import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { openCasesOfSite } from '../../../../server/services/cases';

export const GET = endpoint({ permission: 'case.read', params: siteParams }, ({ tx, params }) =>
  openCasesOfSite(tx, params.site, new Date()),
);
