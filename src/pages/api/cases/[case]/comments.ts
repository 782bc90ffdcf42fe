import { caseComment, caseParams } from '../../../../schemas/api/cases';
import { endpoint } from '../../../../server/http/endpoint';
import { commentCase } from '../../../../server/services/comment-case';

export const POST = endpoint(
  { permission: 'case.write', params: caseParams, body: caseComment },
  ({ tx, actor, params, body, context }) =>
    commentCase(tx, actor, params.case, body, new Date(), context.clientAddress),
);
