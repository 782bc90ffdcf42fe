import { caseChange, caseParams } from '../../../../schemas/api/cases';
import { endpoint } from '../../../../server/http/endpoint';
import { casePage } from '../../../../server/services/cases';
import { changeCase } from '../../../../server/services/change-case';

export const GET = endpoint({ permission: 'case.read', params: caseParams }, ({ tx, actor, params }) =>
  casePage(tx, actor, params.case, new Date()),
);

export const PATCH = endpoint(
  { permission: 'case.write', params: caseParams, body: caseChange },
  ({ tx, actor, params, body, context }) =>
    changeCase(tx, actor, params.case, body, new Date(), context.clientAddress),
);
