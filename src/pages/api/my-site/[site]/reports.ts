import { caseReport } from '../../../../schemas/api/cases';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { reportCase, reportedCases } from '../../../../server/services/report-case';

export const GET = endpoint({ permission: 'case.report', params: siteParams }, ({ tx, actor, params }) =>
  reportedCases(tx, actor, params.site),
);

export const POST = endpoint(
  { permission: 'case.report', params: siteParams, body: caseReport },
  ({ tx, actor, params, body, context }) =>
    reportCase(tx, actor, params.site, body, new Date(), context.clientAddress),
);
