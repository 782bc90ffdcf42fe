import { createHash } from 'node:crypto';
import type { APIContext } from 'astro';
import { z } from 'zod';
import { tokenRefusal } from '../../domain/access/scopes';
import { actorOfToken, holderOfBearer } from '../auth/bearer';
import { API_LIMIT, takeApiRequest } from '../auth/limits';
import { asActor } from '../db/transaction';
import { AppError } from '../errors';
import { readBody } from '../http/body';
import { checked } from '../http/endpoint';
import { problem } from '../http/problem';
import { tokenHolds, type TokenHolder } from '../queries/api-tokens';
import { addAuditEntry } from '../queries/people';
import { keyOf, once } from './idempotent';
import type { JsonOperation, Operation, StreamOperation, V1Call } from './operation';
import { operationsAt } from './operations';
import { bodyOf, streamHeaders, takePlace } from './stream';

/**
 * The one door of /api/v1: finds the operation, asks for the token and for nothing else (no cookie counts here), holds
 * it to its scopes, its person's role and its sites, counts it, checks what comes in, and answers.
 */
export async function throughDoor(context: APIContext): Promise<Response> {
  const headers = new Headers();
  const withHeaders = (response: Response): Response => {
    for (const [name, value] of headers) response.headers.set(name, value);
    return response;
  };
  try {
    const found = operationAt(context, headers);
    if (found instanceof Response) return found;
    const call = await admitted(context, found.operation, headers);
    const input = inputOf(found.operation, found.params, context.url);
    return withHeaders(
      found.operation.kind === 'stream'
        ? await streamed(context, found.operation, call, input.query)
        : await answered(context, found.operation, call, input),
    );
  } catch (error) {
    return withHeaders(problem(error, context.locals.requestId));
  }
}

function operationAt(
  { request, url }: APIContext,
  headers: Headers,
): { operation: Operation; params: Record<string, string> } | Response {
  const at = operationsAt(url.pathname);
  if (!at)
    throw new AppError('not_found', {
      message:
        'No such address in /api/v1. What there is stands in /api/v1/openapi.json and on the page /developers.',
    });
  const methods = at.operations.flatMap((o) => (o.method === 'GET' ? ['GET', 'HEAD'] : [o.method]));
  const allow = [...methods, 'OPTIONS'].join(', ');
  if (request.method === 'OPTIONS')
    return new Response(null, { status: 204, headers: { allow, 'cache-control': 'no-store' } });
  const wanted = request.method === 'HEAD' ? 'GET' : request.method;
  const operation = at.operations.find((o) => o.method === wanted);
  if (!operation) {
    headers.set('allow', allow);
    throw new AppError('not_allowed', { message: `Here ${request.method} does nothing. It takes ${allow}.` });
  }
  return { operation, params: at.params };
}

const POLICY = `"requests";q=${API_LIMIT.requests};w=${API_LIMIT.windowS}`;

async function admitted(context: APIContext, operation: Operation, headers: Headers): Promise<V1Call> {
  const at = new Date();
  const { request, clientAddress } = context;
  let holder: TokenHolder;
  try {
    holder = await holderOfBearer(request.headers.get('authorization'), clientAddress, at);
  } catch (error) {
    if (error instanceof AppError && error.kind === 'unauthenticated')
      headers.set(
        'www-authenticate',
        `Bearer realm="wakeline"${request.headers.has('authorization') ? ', error="invalid_token"' : ''}`,
      );
    throw error;
  }
  const { allowed, left, resetS } = await takeApiRequest(holder.id);
  headers.set('ratelimit-policy', POLICY);
  headers.set('ratelimit', `"requests";r=${left};t=${resetS}`);
  if (!allowed)
    throw new AppError('too_many', {
      message: `This token may ask ${API_LIMIT.requests} times in ${API_LIMIT.windowS} seconds. Wait ${resetS} s.`,
      retryAfterS: resetS,
    });
  const refused = tokenRefusal(holder, operation);
  if (refused === 'scope')
    headers.set(
      'www-authenticate',
      `Bearer realm="wakeline", error="insufficient_scope", scope="${operation.scope ?? ''}"`,
    );
  if (refused)
    throw new AppError('forbidden', {
      message:
        refused === 'scope'
          ? `This token has no scope "${operation.scope ?? ''}". Make one that has it on the account page.`
          : `The role ${holder.role} does not include this, so a token of this person does not either. Ask a manager.`,
    });
  return { actor: actorOfToken(holder), holder, at, address: clientAddress };
}

/** Every parameter once, and none that is not known. @throws AppError invalid · not_found */
function inputOf(
  operation: Operation,
  params: Record<string, string>,
  url: URL,
): { params: unknown; query: unknown } {
  const names = [...url.searchParams.keys()];
  const known = operation.query instanceof z.ZodObject ? Object.keys(operation.query.shape) : [];
  const fields = [...new Set(names)].flatMap((name) => {
    const field = `query.${name.slice(0, 60)}`;
    if (!known.includes(name))
      return [
        {
          field,
          message:
            known.length > 0 ? `There is no such parameter: ${known.join(', ')}` : 'It takes no parameters',
        },
      ];
    return names.filter((n) => n === name).length > 1 ? [{ field, message: 'Give it once' }] : [];
  });
  if (fields.length > 0)
    throw new AppError('invalid', {
      message: fields.map((f) => `${f.field}: ${f.message}`).join('; '),
      fields,
    });
  return {
    params: checked(operation.params, params, 'path'),
    query: checked(operation.query, Object.fromEntries(url.searchParams), 'query'),
  };
}

async function answered(
  { request, url }: APIContext,
  operation: JsonOperation,
  call: V1Call,
  { params, query }: { params: unknown; query: unknown },
): Promise<Response> {
  if (operation.method === 'GET') {
    const { body } = await asActor(call.actor, (tx) =>
      operation.run({ ...call, tx, params, query, body: undefined }),
    );
    return tagged(request, url, body);
  }
  const key = keyOf(request.headers.get('idempotency-key'));
  const body: unknown = checked(operation.body, await readBody(request), 'body');
  const asked = { tokenId: call.holder.id, key, request: [operation.id, url.pathname, body], at: call.at };
  const done = await asActor(call.actor, (tx) =>
    once(tx, asked, async () => {
      const made = await operation.run({ ...call, tx, params, query, body });
      await addAuditEntry(tx, {
        organisationId: call.actor.organisationId,
        personId: call.actor.personId,
        address: call.address,
        action: 'account.token_wrote',
        subject: `token ${call.holder.ref}`,
        after: { token: call.holder.name, operation: operation.id, path: url.pathname },
      });
      return made;
    }),
  );
  return new Response(JSON.stringify(done.body), {
    status: done.status,
    headers: {
      'content-type': 'application/json',
      'cache-control': 'no-store',
      ...(done.replayed ? { 'idempotency-replayed': 'true' } : {}),
    },
  });
}

/** JSON with its tag; 304 where the reader has it already. */
export function tagged(request: Request, url: URL, body: unknown): Response {
  const text = JSON.stringify(body);
  const etag = `"${createHash('sha256').update(text).digest('base64url').slice(0, 27)}"`;
  const headers: Record<string, string> = {
    etag,
    'cache-control': 'private, no-cache',
    vary: 'authorization',
  };
  const next =
    typeof body === 'object' && body !== null && 'next' in body && typeof body.next === 'string'
      ? body.next
      : null;
  if (next !== null) {
    const link = new URL(url);
    link.searchParams.set('cursor', next);
    headers.link = `<${link.pathname}${link.search}>; rel="next"`;
  }
  const known = (request.headers.get('if-none-match') ?? '')
    .split(',')
    .map((t) => t.trim().replace(/^W\//, ''));
  if (known.includes(etag) || known.includes('*')) return new Response(null, { status: 304, headers });
  headers['content-type'] = 'application/json';
  return new Response(request.method === 'HEAD' ? null : text, { headers });
}

async function streamed(
  { request, locals }: APIContext,
  operation: StreamOperation,
  call: V1Call,
  query: unknown,
): Promise<Response> {
  const ended = takePlace(call.holder.id);
  try {
    const stream = await operation.open({ ...call, query });
    if (request.method === 'HEAD') {
      ended();
      return new Response(null, { headers: streamHeaders(stream) });
    }
    const body = bodyOf(stream, {
      drained: locals.drained ?? (() => Promise.resolve()),
      holds: () => tokenHolds(call.holder.id),
      ended,
    });
    return new Response(body, { headers: streamHeaders(stream) });
  } catch (error) {
    ended();
    throw error;
  }
}
