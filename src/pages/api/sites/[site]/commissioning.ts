import { siteParams } from '../../../../schemas/api/site';
import { endpoint } from '../../../../server/http/endpoint';
import { siteAndItsSteps } from '../../../../server/services/commissioning';

export const GET = endpoint({ permission: 'roll_call.read', params: siteParams }, ({ tx, params }) =>
  siteAndItsSteps(tx, params.site),
);
