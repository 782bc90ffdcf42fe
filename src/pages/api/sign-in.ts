import { signInBody } from '../../schemas/api/account';
import { paths } from '../../schemas/paths';
import { replacingCookies } from '../../server/auth/sessions';
import { returnPath } from '../../server/auth/return-path';
import { publicEndpoint } from '../../server/http/endpoint';
import { signIn } from '../../server/services/sign-in';

export const POST = publicEndpoint({ permission: 'public', body: signInBody }, async ({ body, context }) => {
  const { cookie, role } = await signIn(
    { ...body, address: context.clientAddress, agent: context.request.headers.get('user-agent') },
    new Date(),
  );
  const home = role === 'customer' ? paths.customerHome() : paths.fleet();
  const headers = new Headers({ 'content-type': 'application/json', 'cache-control': 'no-store' });
  for (const line of await replacingCookies(context.locals.sessionId, cookie))
    headers.append('set-cookie', line);
  return new Response(JSON.stringify({ next: returnPath(body.next, home) }), { headers });
});
