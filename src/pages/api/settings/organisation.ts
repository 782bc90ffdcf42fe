import { organisationBody } from '../../../schemas/api/settings';
import { endpoint } from '../../../server/http/endpoint';
import { saveOrganisation } from '../../../server/services/settings';

export const PUT = endpoint(
  { permission: 'settings.write', body: organisationBody },
  ({ tx, actor, body, context }) =>
    saveOrganisation(tx, actor, body, { at: new Date(), address: context.clientAddress }),
);
