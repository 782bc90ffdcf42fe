import { paths } from '../../schemas/paths';
import { endSession } from '../../server/auth/sessions';
import { publicEndpoint } from '../../server/http/endpoint';

export const POST = publicEndpoint({ permission: 'public' }, async ({ context }) => {
  const headers = new Headers();
  for (const cookie of await endSession(context.locals.sessionId)) headers.append('set-cookie', cookie);
  // a form of a page goes somewhere; a script is told that it is done
  const fromForm = context.request.headers.get('accept')?.includes('text/html');
  if (fromForm) headers.set('location', paths.signIn());
  return new Response(null, { status: fromForm ? 303 : 204, headers });
});
