import { randomUUID } from 'node:crypto';
import { defineMiddleware } from 'astro:middleware';
import { signedInBy } from './server/auth/sessions';
import { AppError } from './server/errors';
import { sameOrigin } from './server/http/origin';
import { problem } from './server/http/problem';

const SAFE = new Set(['GET', 'HEAD', 'OPTIONS']);
const HEADERS = {
  'x-content-type-options': 'nosniff',
  'referrer-policy': 'same-origin',
  'permissions-policy': 'camera=(self), geolocation=(), microphone=(), payment=(), usb=()',
  'content-security-policy': "frame-ancestors 'none'; base-uri 'self'; form-action 'self'; object-src 'none'",
  'cross-origin-opener-policy': 'same-origin',
};

export const onRequest = defineMiddleware(async (context, next) => {
  const { locals, request } = context;
  // a rewrite to the problem page comes through here a second time
  if (locals.requestId) return next();
  locals.requestId = randomUUID();
  locals.actor = null;
  locals.viewer = null;
  locals.sessionId = null;
  if (context.isPrerendered) return next();
  if (!SAFE.has(request.method) && !sameOrigin(request.headers))
    return problem(
      new AppError('forbidden', { message: 'The request came from another site.' }),
      locals.requestId,
    );

  let cookies: string[] = [];
  try {
    const found = await signedInBy(request.headers.get('cookie') ?? '');
    cookies = found.cookies;
    if ('actor' in found)
      Object.assign(locals, { actor: found.actor, viewer: found.viewer, sessionId: found.sessionId });
  } catch (error) {
    if (context.url.pathname.startsWith('/api/')) return problem(error, locals.requestId);
    locals.problem = {
      status: 503,
      title: 'Not reachable just now',
      message: 'The database does not answer, so Wakeline cannot tell who you are. Try again in a minute.',
    };
    return context.rewrite('/problem');
  }
  const response = await next();
  for (const [name, value] of Object.entries(HEADERS))
    if (!response.headers.has(name)) response.headers.set(name, value);
  if (response.headers.get('content-type')?.startsWith('text/html'))
    response.headers.set('cache-control', 'private, no-store');
  response.headers.set('x-request-id', locals.requestId);
  for (const cookie of cookies) response.headers.append('set-cookie', cookie);
  return response;
});
