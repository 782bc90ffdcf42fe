import { caseParams } from '../../../../schemas/api/cases';
import { endpoint } from '../../../../server/http/endpoint';
import { caseEvidence } from '../../../../server/services/case-evidence';

export const GET = endpoint({ permission: 'case.read', params: caseParams }, ({ tx, actor, params }) =>
  caseEvidence(tx, actor, params.case, 'zip', new Date()),
);
