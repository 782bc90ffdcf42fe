import { endpoint } from '../../../server/http/endpoint';
import { peoplePage } from '../../../server/services/people';

export const GET = endpoint({ permission: 'people.manage' }, ({ tx, actor }) =>
  peoplePage(tx, actor, new Date()),
);
