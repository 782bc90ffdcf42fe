import type { AstroGlobal } from 'astro';
import type { z } from 'zod';
import { AppError, ERROR_KINDS } from '../errors';
import { readBody } from './body';
import { checked } from './endpoint';
import { explain } from './problem';

/** What a plain form came to: sent and done, or what was wrong and what had been typed. */
export interface FormOutcome<R> {
  done: R | null;
  fault: string;
  typed: Record<string, string>;
}

/** Handles a form that works without scripts: its page posts to itself. Anything but a POST is nothing yet. */
export async function plainForm<B extends z.ZodType, R>(
  astro: AstroGlobal,
  schema: B,
  work: (body: z.infer<B>) => Promise<R>,
): Promise<FormOutcome<R>> {
  const outcome: FormOutcome<R> = { done: null, fault: '', typed: {} };
  if (astro.request.method !== 'POST') return outcome;
  try {
    const typed = (await readBody(astro.request)) as Record<string, unknown>;
    outcome.typed = Object.fromEntries(
      Object.entries(typed).flatMap(([k, v]) => (typeof v === 'string' ? [[k, v]] : [])),
    );
    outcome.done = await work(checked(schema, typed, 'form'));
  } catch (error) {
    const known = explain(error);
    if (!known) throw error;
    astro.response.status = ERROR_KINDS[known.kind].status;
    outcome.fault = known.detail.fields?.map((f) => f.message).join(' ') || known.message;
  }
  return outcome;
}

export const SECRET_HEADERS = { 'referrer-policy': 'no-referrer', 'x-robots-tag': 'noindex' } as const;

/** A page whose address is a secret: it is never told to others, kept or indexed. @throws nothing */
export function secretPage(astro: AstroGlobal): void {
  for (const [name, value] of Object.entries(SECRET_HEADERS)) astro.response.headers.set(name, value);
}

/** What a link leads to, or why it can't be used. */
export async function behindLink<T>(
  work: () => Promise<T>,
): Promise<{ found: T | null; why: string; status: number }> {
  try {
    return { found: await work(), why: '', status: 200 };
  } catch (error) {
    if (error instanceof AppError)
      return { found: null, why: error.message, status: ERROR_KINDS[error.kind].status };
    throw error;
  }
}
