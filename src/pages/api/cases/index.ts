import { casesView, newCase } from '../../../schemas/api/cases';
import { endpoint } from '../../../server/http/endpoint';
import { casesPage } from '../../../server/services/cases';
import { openCase } from '../../../server/services/open-case';

export const GET = endpoint({ permission: 'case.read', query: casesView }, ({ tx, actor, query }) =>
  casesPage(tx, actor, query.show, new Date()),
);

export const POST = endpoint({ permission: 'case.write', body: newCase }, ({ tx, actor, body, context }) =>
  openCase(tx, actor, { ...body, address: context.clientAddress }, new Date()),
);
