import { choiceBody } from '../../../schemas/api/notices';
import { callerOf } from '../../../server/http/caller';
import { endpoint } from '../../../server/http/endpoint';
import { choicesPage, saveChoices } from '../../../server/services/notices';

export const GET = endpoint({ permission: 'own_account.use' }, ({ tx, actor, context }) =>
  choicesPage(tx, actor, callerOf(context, actor).viewer.email, new Date()),
);

export const PUT = endpoint(
  { permission: 'own_account.use', body: choiceBody },
  async ({ tx, actor, body, context }) => {
    const { viewer, address } = callerOf(context, actor);
    await saveChoices(tx, actor, body, new Date(), address);
    return choicesPage(tx, actor, viewer.email, new Date());
  },
);
