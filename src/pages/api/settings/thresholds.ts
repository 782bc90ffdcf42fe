import { thresholdsBody } from '../../../schemas/api/settings';
import { endpoint } from '../../../server/http/endpoint';
import { saveThresholds } from '../../../server/services/settings';

export const PUT = endpoint(
  { permission: 'settings.write', body: thresholdsBody },
  ({ tx, actor, body, context }) =>
    saveThresholds(tx, actor, body, { at: new Date(), address: context.clientAddress }),
);
