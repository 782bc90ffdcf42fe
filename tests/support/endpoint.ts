import type { APIContext, APIRoute } from 'astro';
import type { Actor } from '../../src/domain/access/permissions';

interface Asked {
  actor: Actor | null;
  params?: Record<string, string>;
  /** Path with its query. */
  path?: string;
  method?: string;
  body?: unknown;
  name?: string;
}

/** Calls a route as Astro would for somebody who is signed in, without a server between. */
export async function ask(
  route: APIRoute,
  { actor, params = {}, path = '/api/x', method = 'GET', body, name }: Asked,
): Promise<Response> {
  const url = new URL(path, 'http://localhost');
  const request = new Request(url, {
    method,
    headers: body === undefined ? {} : { 'content-type': 'application/json' },
    body: body === undefined ? undefined : typeof body === 'string' ? body : JSON.stringify(body),
  });
  const viewer = actor && {
    name: name ?? 'Sunniva Quill',
    id: '00000000-0000-4000-8000-0000000000aa',
    initials: 'SQ',
    email: 'x@lowfield.example',
    role: actor.role,
    organisationName: 'Lowfield Solar Works',
    timeZone: 'Europe/London',
    theme: 'system' as const,
    unread: 0,
    hazards: 0,
  };
  const context = {
    locals: { requestId: 'test', actor, viewer, sessionId: null },
    params,
    url,
    request,
    clientAddress: '127.0.0.1',
  };
  // of the whole context a route of ours reads only these
  return route(context as unknown as APIContext);
}
