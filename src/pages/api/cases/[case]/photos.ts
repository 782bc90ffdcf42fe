import { caseParams, casePhotoQuery } from '../../../../schemas/api/cases';
import { endpoint } from '../../../../server/http/endpoint';
import { addCasePhoto, receiveCasePhoto } from '../../../../server/services/case-photo';

export const POST = endpoint(
  {
    permission: 'case.write',
    params: caseParams,
    query: casePhotoQuery,
    receive: ({ actor, params, query, context }) =>
      receiveCasePhoto(actor, params.case, context.request, query, new Date()),
  },
  ({ tx, actor, params, query, received, context }) =>
    addCasePhoto(tx, actor, params.case, query, received, new Date(), context.clientAddress),
);
