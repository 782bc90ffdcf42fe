import { tariffParams } from '../../../../../schemas/api/figures';
import { endpoint } from '../../../../../server/http/endpoint';
import { dropTariff } from '../../../../../server/services/figures';

export const DELETE = endpoint(
  { permission: 'tariff.write', params: tariffParams },
  ({ tx, actor, params, context }) =>
    dropTariff(tx, actor, params, { at: new Date(), address: context.clientAddress }),
);
