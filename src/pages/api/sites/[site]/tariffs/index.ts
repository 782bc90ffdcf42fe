import { newTariff } from '../../../../../schemas/api/figures';
import { siteParams } from '../../../../../schemas/api/site';
import { endpoint } from '../../../../../server/http/endpoint';
import { setTariff } from '../../../../../server/services/figures';

export const POST = endpoint(
  { permission: 'tariff.write', params: siteParams, body: newTariff },
  ({ tx, actor, params, body, context }) =>
    setTariff(tx, actor, params.site, body, { at: new Date(), address: context.clientAddress }),
);
