import { z } from 'zod';
import { TOKEN_DAYS, TOKEN_SCOPES } from '../../domain/access/scopes';
import { id } from './now';

/** Tokens of one's own, for programs. Times ISO 8601 in UTC. */

const time = z.iso.datetime();

export const tokenItem = z.object({
  id,
  name: z.string(),
  scopes: z.array(z.enum(TOKEN_SCOPES)),
  /** Names of the sites that it sees; null: every one that its person sees. */
  sites: z.array(z.string()).nullable(),
  ending: z.string(),
  createdAt: time,
  expiresAt: time,
  expired: z.boolean(),
  lastUsedAt: time.nullable(),
  lastAddress: z.string().nullable(),
});
export type TokenItem = z.infer<typeof tokenItem>;

export const tokensPage = z.object({
  at: time,
  tokens: z.array(tokenItem),
  sites: z.array(z.object({ id, name: z.string() })),
});
export type TokensPage = z.infer<typeof tokensPage>;

export const makeTokenBody = z.strictObject({
  name: z
    .string({ error: 'Give it a name.' })
    .trim()
    .min(1, 'Give it a name: what will use it?')
    .max(80, 'Use at most 80 characters.')
    .refine((text) => !/\p{C}/u.test(text), 'Leave control characters out.'),
  scopes: z.array(z.enum(TOKEN_SCOPES)).min(1, 'Choose at least one thing that it may do.').max(20),
  /** Empty: every site that its person sees. */
  sites: z.array(id).max(500, 'At most 500 sites.').default([]),
  days: z
    .number({ error: 'Choose how long it holds.' })
    .refine((days) => (TOKEN_DAYS as readonly number[]).includes(days), 'Choose how long it holds.'),
  current: z.string({ error: 'Enter your password.' }).min(1, 'Enter your password.').max(1000),
});
export type MakeToken = z.infer<typeof makeTokenBody>;

/** The token itself, this once. */
export const madeToken = z.object({ token: z.string(), item: tokenItem });
export type MadeToken = z.infer<typeof madeToken>;

export const tokenParams = z.strictObject({ token: id });
