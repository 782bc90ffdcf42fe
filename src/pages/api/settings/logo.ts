import { endpoint } from '../../../server/http/endpoint';
import { logoReply, receiveLogo, saveLogo } from '../../../server/services/settings';

export const GET = endpoint({ permission: 'own_account.use' }, ({ tx }) => logoReply(tx));

export const POST = endpoint(
  { permission: 'settings.write', receive: ({ context }) => receiveLogo(context.request) },
  ({ tx, actor, received, context }) =>
    saveLogo(tx, actor, received, { at: new Date(), address: context.clientAddress }),
);

export const DELETE = endpoint({ permission: 'settings.write' }, ({ tx, actor, context }) =>
  saveLogo(tx, actor, null, { at: new Date(), address: context.clientAddress }),
);
