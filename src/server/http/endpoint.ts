import type { APIContext, APIRoute } from 'astro';
import { z } from 'zod';
import { mayUse, type Actor, type Permission } from '../../domain/access/permissions';
import { asActor, type Tx } from '../db/transaction';
import { AppError } from '../errors';
import { readBody } from './body';
import { problem } from './problem';

/**
 * The one wrapper of API routes: who may, what comes in, what goes out when it fails.
 * `permission: 'public'` is for what must work before anybody is signed in.
 */
export interface EndpointSpec<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType> {
  permission: Permission | 'public';
  params?: P;
  query?: Q;
  body?: B;
}

export interface Call<P, Q, B> {
  params: P;
  query: Q;
  body: B;
  context: APIContext;
}
export interface ActorCall<P, Q, B> extends Call<P, Q, B> {
  actor: Actor;
  tx: Tx;
}

export function checked<T extends z.ZodType>(
  schema: T | undefined,
  value: unknown,
  where: string,
): z.infer<T> {
  if (!schema) return undefined as z.infer<T>;
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  const fields = result.error.issues.map((i) => ({
    field: [where, ...i.path].join('.'),
    message: i.message,
  }));
  // an identifier that cannot exist is a thing that is not there
  if (where === 'path')
    throw new AppError('not_found', { message: 'No such address. Check the link, or go back to the fleet.' });
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
    body: spec.body ? checked(spec.body, await readBody(context.request), 'body') : (undefined as z.infer<B>),
    context,
  };
}

/** For signed-in people: runs inside one transaction that sees only what the actor may see. */
export function endpoint<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType>(
  spec: EndpointSpec<P, Q, B> & { permission: Permission },
  run: (call: ActorCall<z.infer<P>, z.infer<Q>, z.infer<B>>) => Promise<unknown>,
): APIRoute {
  return async (context) => {
    try {
      const { actor } = context.locals;
      if (!actor) throw new AppError('unauthenticated', { message: 'Sign in, then try again.' });
      if (!mayUse(actor.role, spec.permission))
        throw new AppError('forbidden', {
          message: `The role ${actor.role} does not include this. Ask a manager.`,
        });
      const call = await parsed(spec, context);
      return reply(await asActor(actor, (tx) => run({ ...call, actor, tx })));
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
