import { endSession } from '../../server/auth/sessions';
import { publicEndpoint } from '../../server/http/endpoint';

export const POST = publicEndpoint({ permission: 'public' }, async ({ context }) => {
  const headers = new Headers();
  for (const cookie of await endSession(context.locals.sessionId)) headers.append('set-cookie', cookie);
  return new Response(null, { status: 204, headers });
});
