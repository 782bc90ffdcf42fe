import { letterChoice } from '../../../../schemas/api/customer';
import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { chooseLetter } from '../../../../server/services/roof-letters';

export const PUT = endpoint(
  { permission: 'customer_page.read', params: siteParams, body: letterChoice },
  ({ tx, actor, params, body }) => chooseLetter(tx, actor, params.site, body.every, new Date()),
);
