import type { Actor } from '../../domain/access/permissions';
import { TOKENS_MAX } from '../../domain/access/scopes';
import type { MadeToken, MakeToken, TokenItem, TokensPage } from '../../schemas/api/tokens';
import { confirmPassword } from '../auth/confirm-password';
import { newApiToken, tokenHash } from '../auth/secret-link';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { accountOf, siteNumbers } from '../queries/accounts';
import { addToken, endTokens, tokensOf, type TokenRow } from '../queries/api-tokens';
import { addAuditEntry } from '../queries/people';
import { siteChoices } from '../queries/site';
import type { Caller } from './my-account';
import { apiTokenRefusals } from '../../words/refusals-people';

type Maker = Pick<Caller, 'actor' | 'address'>;

const DAY_MS = 86_400_000;

const tokenItem = (t: TokenRow, at: Date): TokenItem => ({
  id: t.ref,
  name: t.name,
  scopes: t.scopes,
  sites: t.sites,
  ending: t.ending,
  createdAt: t.createdAt.toISOString(),
  expiresAt: t.expiresAt.toISOString(),
  expired: t.expiresAt <= at,
  lastUsedAt: t.lastUsedAt?.toISOString() ?? null,
  lastAddress: t.lastAddress,
});

/** One's own tokens, and the sites that a new one can be held to. */
export async function tokensPage(tx: Tx, actor: Actor, at: Date): Promise<TokensPage> {
  return {
    at: at.toISOString(),
    tokens: (await tokensOf(tx, actor.personId)).map((t) => tokenItem(t, at)),
    sites: await siteChoices(tx),
  };
}

const wrong = (field: string, message: string): AppError =>
  new AppError('invalid', { message, fields: [{ field, message }] });

async function numbersOf(tx: Tx, sites: readonly string[]): Promise<number[] | null> {
  if (sites.length === 0) return null;
  const known = await siteNumbers(tx, sites);
  if (sites.some((ref) => !known.has(ref))) throw wrong('sites', apiTokenRefusals.notYourSite);
  return [...known.values()];
}

/**
 * A new token for a program of one's own, with one's password. It is shown this once; the database has its hash.
 * @throws AppError invalid (at its field) · conflict (too many tokens) · too_many (wrong passwords)
 */
export async function makeToken(tx: Tx, caller: Maker, body: MakeToken, at: Date): Promise<MadeToken> {
  const { actor, address } = caller;
  try {
    await confirmPassword(actor.personId, body.current);
  } catch (error) {
    if (error instanceof AppError && error.kind === 'invalid')
      throw wrong('current', apiTokenRefusals.wrongPassword);
    throw error;
  }
  const before = await tokensOf(tx, actor.personId);
  if (before.filter((t) => t.expiresAt > at).length >= TOKENS_MAX)
    throw new AppError('conflict', {
      message: apiTokenRefusals.tooMany(TOKENS_MAX),
    });
  if (before.some((t) => t.name === body.name)) throw wrong('name', apiTokenRefusals.nameTaken);
  const token = newApiToken();
  const expiresAt = new Date(at.getTime() + body.days * DAY_MS);
  const ref = await addToken(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    name: body.name,
    scopes: body.scopes,
    sites: await numbersOf(tx, body.sites),
    hash: tokenHash(token),
    ending: token.slice(-4),
    at,
    expiresAt,
  });
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action: 'account.token_made',
    subject: `token ${ref}`,
    after: { name: body.name, scopes: body.scopes, sites: body.sites, expiresAt },
  });
  const item = (await tokensOf(tx, actor.personId)).find((t) => t.ref === ref);
  return { token, item: tokenItem(found(item, 'token'), at) };
}

/** Ends a token of one's own; it lets nobody in from this moment. @throws AppError not_found */
export async function endToken(tx: Tx, { actor, address }: Maker, ref: string, at: Date): Promise<void> {
  const [name] = await endTokens(tx, actor.personId, { endedBy: actor.personId, at, ref });
  found(name, 'token');
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action: 'account.token_ended',
    subject: `token ${ref}`,
    before: { name },
  });
}

/** A manager ends every token of somebody. @returns how many that were @throws AppError not_found */
export async function endTokensOfPerson(
  tx: Tx,
  actor: Actor,
  personRef: string,
  at: Date,
  address: string | null,
): Promise<{ ended: number }> {
  const person = found(await accountOf(tx, personRef), 'person');
  const names = await endTokens(tx, person.id, { endedBy: actor.personId, at });
  if (names.length > 0)
    await addAuditEntry(tx, {
      organisationId: actor.organisationId,
      personId: actor.personId,
      address,
      action: 'people.tokens_ended',
      subject: `person ${personRef}`,
      before: { tokens: names },
    });
  return { ended: names.length };
}
