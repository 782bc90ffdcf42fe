import type { APIContext, APIRoute } from 'astro';
import { z } from 'zod';
import { mayUse, type Actor, type Permission } from '../../domain/access/permissions';
import { PERSON_HEADER } from '../../schemas/lists-and-limits';
import { asActor, type Tx } from '../db/transaction';
import { AppError } from '../errors';
import { asOnlooker } from '../replica';
import { readBody } from './body';
import { hasJustWritten } from './just-written';
import { problem } from './problem';
import { bodyRefusals, endpointRefusals } from '../../words/refusals';

/**
 * The one wrapper of API routes: who may, what comes in, what goes out when it fails.
 * `permission: 'public'` is for what must work before anybody is signed in.
 */
export interface EndpointSpec<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType> {
  permission: Permission | 'public';
  params?: P;
  query?: Q;
  body?: B;
  /** For a route whose bodies are larger than usual. */
  bodyMaxBytes?: number;
}

export interface Call<P, Q, B> {
  params: P;
  query: Q;
  body: B;
  context: APIContext;
}
export interface ActorCall<P, Q, B, R = undefined> extends Call<P, Q, B> {
  actor: Actor;
  tx: Tx;
  /** What `receive` made of the body. */
  received: R;
}

/** Where a text has a NUL, which the database keeps nowhere; null: nowhere. Of what a schema let through, so not deep. */
function nulIn(value: unknown, path: string): string | null {
  if (typeof value === 'string') return value.includes('\0') ? path : null;
  if (typeof value !== 'object' || value === null) return null;
  for (const [key, part] of Object.entries(value)) {
    const found = nulIn(part, `${path}.${key}`);
    if (found !== null) return found;
  }
  return null;
}

export function checked<T extends z.ZodType>(
  schema: T | undefined,
  value: unknown,
  where: string,
): z.infer<T> {
  if (!schema) return undefined as z.infer<T>;
  const result = schema.safeParse(value);
  const nul = result.success ? nulIn(result.data, where) : null;
  if (result.success && nul === null) return result.data;
  const fields = result.success
    ? [{ field: nul ?? where, message: bodyRefusals.noText }]
    : result.error.issues.map((i) => ({ field: [where, ...i.path].join('.'), message: i.message }));
  // an identifier that cannot exist is a thing that is not there
  if (where === 'path') throw new AppError('not_found', { message: endpointRefusals.noSuchAddress });
  throw new AppError('invalid', {
    message: fields.map((f) => `${f.field}: ${f.message}`).join('; '),
    fields,
  });
}

const reply = (result: unknown): Response => {
  if (result instanceof Response) return result;
  if (result === undefined) return new Response(null, { status: 204 });
  return new Response(JSON.stringify(result), {
    headers: { 'content-type': 'application/json', 'cache-control': 'no-store' },
  });
};

async function parsed<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType>(
  spec: EndpointSpec<P, Q, B>,
  context: APIContext,
): Promise<Call<z.infer<P>, z.infer<Q>, z.infer<B>>> {
  return {
    params: checked(spec.params, context.params, 'path'),
    query: checked(spec.query, Object.fromEntries(context.url.searchParams), 'query'),
    body: spec.body
      ? checked(spec.body, await readBody(context.request, spec.bodyMaxBytes), 'body')
      : (undefined as z.infer<B>),
    context,
  };
}

/** A phone names whose record it sends: it may be another person's by now, who signed in on the same phone. */
function checkPerson({ request, locals }: APIContext): void {
  const named = request.headers.get(PERSON_HEADER);
  if (named !== null && named !== locals.viewer?.id)
    throw new AppError('forbidden', {
      message: endpointRefusals.anotherPersonSendLater,
      fields: [{ field: PERSON_HEADER, message: endpointRefusals.anotherPerson }],
    });
}

/** For signed-in people: runs inside one transaction that sees only what the actor may see. */
export function endpoint<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, R = undefined>(
  spec: EndpointSpec<P, Q, B> & {
    permission: Permission;
    /** History and reports, which only read: a replica may answer, some seconds behind. */
    mayLag?: boolean;
    /** Takes a body that is no JSON, before the transaction begins: a slow sender holds no connection. */
    receive?: (
      call: Pick<ActorCall<z.infer<P>, z.infer<Q>, z.infer<B>>, 'actor' | 'params' | 'query' | 'context'>,
    ) => Promise<R>;
  },
  run: (call: ActorCall<z.infer<P>, z.infer<Q>, z.infer<B>, R>) => Promise<unknown>,
): APIRoute {
  return async (context) => {
    try {
      const { actor } = context.locals;
      if (!actor) throw new AppError('unauthenticated', { message: endpointRefusals.signIn });
      checkPerson(context);
      if (!mayUse(actor.role, spec.permission))
        throw new AppError('forbidden', {
          message: endpointRefusals.roleLacksThis(actor.role),
        });
      const call = await parsed(spec, context);
      const received = (await spec.receive?.({ ...call, actor })) as R;
      const work = (tx: Tx): Promise<unknown> => run({ ...call, actor, tx, received });
      return reply(
        await (spec.mayLag ? asOnlooker(actor, work, hasJustWritten(context.request)) : asActor(actor, work)),
      );
    } catch (error) {
      return problem(error, context.locals.requestId);
    }
  };
}

/** For what must work before anybody is signed in. */
export function publicEndpoint<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType>(
  spec: EndpointSpec<P, Q, B> & { permission: 'public' },
  run: (call: Call<z.infer<P>, z.infer<Q>, z.infer<B>>) => Promise<unknown>,
): APIRoute {
  return async (context) => {
    try {
      return reply(await run(await parsed(spec, context)));
    } catch (error) {
      return problem(error, context.locals.requestId);
    }
  };
}
