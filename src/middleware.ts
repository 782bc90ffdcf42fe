import { randomUUID } from 'node:crypto';
import type { APIContext, MiddlewareNext } from 'astro';
import { defineMiddleware } from 'astro:middleware';
import type { TemperatureUnit } from './drawings/numbers';
import { cookieName, signedInBy } from './server/auth/sessions';
import { config } from './server/config';
import { AppError } from './server/errors';
import { answerHeaders } from './server/http/headers';
import { inTime } from './server/http/in-time';
import { sameOrigin } from './server/http/origin';
import { justWrittenCookie } from './server/http/just-written';
import { asReader } from './server/http/reader';
import { explain, problem } from './server/http/problem';
import { log } from './server/log';
import { currentRequest, inRequest } from './server/request';
import { doorRefusals, pageRefusals } from './words/refusals';

/** Who somebody is takes a database milliseconds; without an answer the page says that there is none. */
const SIGNED_IN_WITHIN_MS = 12_000;
const SAFE = new Set(['GET', 'HEAD', 'OPTIONS']);
/** Addresses that are secrets and only read: the router would write one into its log that is asked for otherwise. */
const SECRET_AND_READ = /^\/(api\/)?shared\//;

/** What the router answers itself below /api is a page for people: programs get the document that they know. */
const asProblem = (response: Response, { url, locals }: APIContext): Response =>
  response.status === 404 &&
  url.pathname.startsWith('/api/') &&
  !response.headers.get('content-type')?.includes('json')
    ? problem(new AppError('not_found', { message: doorRefusals.noSuchCall }), locals.requestId)
    : response;

/** What every answer says, refusals of this file included, unless it says so itself. */
function finish(response: Response, locals: App.Locals): Response {
  const isPage = response.headers.get('content-type')?.startsWith('text/html') ?? false;
  const headers = answerHeaders(config(), { isPage, doors: locals.doors, development: WAKELINE_DEVELOPMENT });
  for (const [name, value] of Object.entries(headers))
    if (!response.headers.has(name)) response.headers.set(name, value);
  if (isPage) response.headers.set('cache-control', 'private, no-store');
  response.headers.set('x-request-id', locals.requestId);
  return response;
}

export const onRequest = defineMiddleware((context, next) => {
  // a rewrite to the problem page comes through here a second time
  if (context.locals.requestId) return next();
  const current = currentRequest();
  if (!current) return inRequest({ requestId: randomUUID() }, () => answer(context, next)); // astro dev
  return answer(context, next);
});

async function answer(context: APIContext, next: MiddlewareNext): Promise<Response> {
  const { locals, request } = context;
  const current = currentRequest();
  locals.requestId = current?.requestId ?? randomUUID();
  if (current) current.route = context.routePattern;
  locals.actor = null;
  locals.viewer = null;
  locals.sessionId = null;
  if (context.isPrerendered) return next();
  if (!SAFE.has(request.method) && !sameOrigin(request.headers))
    return finish(
      problem(new AppError('forbidden', { message: doorRefusals.otherSite }), locals.requestId),
      locals,
    );

  if (!SAFE.has(request.method) && SECRET_AND_READ.test(context.url.pathname))
    return finish(
      problem(new AppError('not_found', { message: doorRefusals.onlyRead }), locals.requestId),
      locals,
    );

  // programs come with a token of their own: no cookie of a browser lets anybody in there
  if (context.url.pathname.startsWith('/api/v1/')) return finish(await next(), locals);

  let cookies: string[] = [];
  let units: TemperatureUnit = 'metric';
  try {
    const found = await inTime(SIGNED_IN_WITHIN_MS, signedInBy(request.headers.get('cookie') ?? ''));
    cookies = found.cookies;
    if ('actor' in found) {
      units = found.viewer.units;
      Object.assign(locals, { actor: found.actor, viewer: found.viewer, sessionId: found.sessionId });
    }
  } catch (error) {
    if (context.url.pathname.startsWith('/api/')) return finish(problem(error, locals.requestId), locals);
    const away = explain(error) !== undefined;
    if (!away) log.error({ error }, 'who somebody is could not be read');
    locals.problem = {
      status: away ? 503 : 500,
      title: away ? doorRefusals.notReachable : pageRefusals.failedHere,
      message: away ? doorRefusals.databaseAway : pageRefusals.tryAgain(locals.requestId),
    };
    return finish(await context.rewrite('/problem'), locals);
  }
  const response = finish(asProblem(await asReader(units, next), context), locals);
  // what the answer says of a cookie itself, a new session above all, is the last word
  const said = new Set(response.headers.getSetCookie().map(cookieName));
  for (const cookie of cookies)
    if (!said.has(cookieName(cookie))) response.headers.append('set-cookie', cookie);
  const written = SAFE.has(request.method) ? undefined : justWrittenCookie();
  if (written) response.headers.append('set-cookie', written);
  return response;
}
