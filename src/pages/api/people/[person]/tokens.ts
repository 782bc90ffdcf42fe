import { personParams } from '../../../../schemas/api/people';
import { endpoint } from '../../../../server/http/endpoint';
import { endTokensOfPerson } from '../../../../server/services/api-tokens';

export const DELETE = endpoint(
  { permission: 'people.manage', params: personParams },
  ({ tx, actor, params, context }) =>
    endTokensOfPerson(tx, actor, params.person, new Date(), context.clientAddress),
);
