import { stringParams } from '../../../../schemas/api/string';
import { endpoint } from '../../../../server/http/endpoint';
import { readString } from '../../../../server/services/string-page';

export const GET = endpoint({ permission: 'string.read', params: stringParams }, ({ tx, params }) =>
  readString(tx, params.string, new Date()),
);
