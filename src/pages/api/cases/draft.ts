import { newCaseView } from '../../../schemas/api/cases';
import { endpoint } from '../../../server/http/endpoint';
import { caseDraft } from '../../../server/services/cases';

export const GET = endpoint({ permission: 'case.write', query: newCaseView }, ({ tx, query }) =>
  caseDraft(tx, query, new Date()),
);
