import { themeBody } from '../../schemas/api/account';
import { endpoint } from '../../server/http/endpoint';
import { setTheme } from '../../server/queries/people';

export const PUT = endpoint(
  { permission: 'own_account.use', body: themeBody },
  async ({ tx, actor, body }) => {
    await setTheme(tx, actor.personId, body.theme);
  },
);
