import { z } from 'zod';
import { TOKEN_DAYS, TOKEN_SCOPES } from '../../domain/access/scopes';
import { id } from './now';
import { tokenFields } from '../../words/fields';

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
    .string({ error: tokenFields.giveName })
    .trim()
    .min(1, tokenFields.whatWillUseIt)
    .max(80, tokenFields.nameTooLong)
    .refine((text) => !/\p{C}/u.test(text), tokenFields.noControlCharacters),
  scopes: z.array(z.enum(TOKEN_SCOPES)).min(1, tokenFields.chooseScope).max(20),
  /** Empty: every site that its person sees. */
  sites: z.array(id).max(500, tokenFields.tooManySites).default([]),
  days: z
    .number({ error: tokenFields.chooseDays })
    .refine((days) => (TOKEN_DAYS as readonly number[]).includes(days), tokenFields.chooseDays),
  current: z.string({ error: tokenFields.enterPassword }).min(1, tokenFields.enterPassword).max(1000),
});
export type MakeToken = z.infer<typeof makeTokenBody>;

/** The token itself, this once. */
export const madeToken = z.object({ token: z.string(), item: tokenItem });
export type MadeToken = z.infer<typeof madeToken>;

export const tokenParams = z.strictObject({ token: id });
