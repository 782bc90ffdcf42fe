import { personChange, personParams } from '../../../schemas/api/people';
import { endpoint } from '../../../server/http/endpoint';
import { changePerson } from '../../../server/services/people';

export const PATCH = endpoint(
  { permission: 'people.manage', params: personParams, body: personChange },
  ({ tx, actor, params, body, context }) =>
    changePerson(tx, actor, params.person, body, new Date(), context.clientAddress),
);
