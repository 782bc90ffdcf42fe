import type { Role } from '../../domain/access/permissions';
import type { TokenScope } from '../../domain/access/scopes';
import { asSignIn, type Tx } from '../db/transaction';

/** Tokens of people for their programs, known by the hash of each; replies of writes that may come again. */

export interface TokenHolder {
  id: number;
  ref: string;
  name: string;
  scopes: TokenScope[];
  /** Numbers of the sites that the token names; null: every one that its person sees. */
  sites: number[] | null;
  expiresAt: Date;
  endedAt: Date | null;
  personId: number;
  personRef: string;
  personName: string;
  role: Role;
  active: boolean;
  /** What a customer was given. */
  personSites: number[];
  organisationId: number;
  organisationRef: string;
  organisationName: string;
  timeZone: string;
}

/** Whose a token is, by its hash, in force or not; notes when it was used and from where, at most once a minute. */
export async function holderOf(hash: Buffer, address: string | null): Promise<TokenHolder | undefined> {
  return asSignIn(async (tx) => {
    const { rows } = await tx.raw<{ rows: TokenHolder[] }>(
      `with used as (
         update api_token t set last_used_at = now(), last_address = :address
         from person p
         where t.hash = :hash and p.id = t.person_id and p.active and t.ended_at is null and t.expires_at > now()
           and (t.last_used_at is null or t.last_used_at < now() - interval '1 minute'))
       select t.id, t.ref, t.name, t.scopes, t.sites, t.expires_at as "expiresAt", t.ended_at as "endedAt",
              p.id as "personId", p.ref as "personRef", p.name as "personName", p.role, p.active,
              coalesce((select array_agg(a.site_id) from site_access a where a.person_id = p.id), '{}') as "personSites",
              o.id as "organisationId", o.ref as "organisationRef", o.name as "organisationName",
              o.time_zone as "timeZone"
       from api_token t join person p on p.id = t.person_id join organisation o on o.id = p.organisation_id
       where t.hash = :hash and p.organisation_id = t.organisation_id`,
      { hash, address },
    );
    return rows[0];
  });
}

/** Whether a token is still good: for what runs longer than a request. */
export async function tokenHolds(tokenId: number): Promise<boolean> {
  return asSignIn(async (tx) => {
    const { rows } = await tx.raw<{ rows: unknown[] }>(
      `select 1 from api_token t join person p on p.id = t.person_id
       where t.id = ? and p.active and t.ended_at is null and t.expires_at > now()`,
      [tokenId],
    );
    return rows.length > 0;
  });
}

export interface TokenRow {
  id: number;
  ref: string;
  name: string;
  scopes: TokenScope[];
  sites: string[] | null;
  ending: string;
  createdAt: Date;
  expiresAt: Date;
  lastUsedAt: Date | null;
  lastAddress: string | null;
}

const TOKEN = `select t.id, t.ref, t.name, t.scopes, t.ending, t.created_at as "createdAt", t.expires_at as "expiresAt",
    t.last_used_at as "lastUsedAt", t.last_address as "lastAddress",
    case when t.sites is null then null else coalesce(
      (select array_agg(s.name order by s.name) from site s where s.id = any (t.sites)), '{}') end as sites
  from api_token t where t.organisation_id = (select actor_organisation())`;

/** Tokens of a person that have not been ended, run out ones included, the newest first. */
export async function tokensOf(tx: Tx, personId: number): Promise<TokenRow[]> {
  const { rows } = await tx.raw<{ rows: TokenRow[] }>(
    `${TOKEN} and t.person_id = ? and t.ended_at is null order by t.created_at desc, t.id desc`,
    [personId],
  );
  return rows;
}

export interface TokenToAdd {
  organisationId: number;
  personId: number;
  name: string;
  scopes: readonly TokenScope[];
  sites: readonly number[] | null;
  hash: Buffer;
  ending: string;
  at: Date;
  expiresAt: Date;
}
/** @returns its public identifier */
export async function addToken(tx: Tx, token: TokenToAdd): Promise<string> {
  const [row] = await tx('api_token')
    .insert({
      organisation_id: token.organisationId,
      person_id: token.personId,
      name: token.name,
      scopes: [...token.scopes],
      sites: token.sites && [...token.sites],
      hash: token.hash,
      ending: token.ending,
      created_at: token.at,
      expires_at: token.expiresAt,
    })
    .returning<{ ref: string }[]>('ref');
  if (!row) throw new Error('a token that was written has no identifier');
  return row.ref;
}

/** Ends one token of a person, or all; gives the names of those that ended now. */
export async function endTokens(
  tx: Tx,
  personId: number,
  by: { endedBy: number; at: Date; ref?: string | undefined },
): Promise<string[]> {
  const rows = await tx('api_token')
    .where({ person_id: personId, ended_at: null })
    .whereRaw('organisation_id = (select actor_organisation())')
    .modify((q) => {
      if (by.ref !== undefined) void q.where({ ref: by.ref });
    })
    .update({ ended_at: by.at, ended_by: by.endedBy })
    .returning<{ name: string }[]>('name');
  return rows.map((r) => r.name);
}

/** Public identifiers of the sites that a token names, of those that the actor sees. */
export async function siteRefsOf(tx: Tx, siteIds: readonly number[]): Promise<string[]> {
  const rows = await tx('site').whereIn('id', siteIds).orderBy('name').select<{ ref: string }[]>('ref');
  return rows.map((r) => r.ref);
}

/** Holds one key of a token until the transaction ends; false: another request has it. */
export async function holdKey(tx: Tx, tokenId: number, key: string): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: { held: boolean }[] }>(
    `select pg_try_advisory_xact_lock(:tokenId::int4, hashtext(:key)) as held`,
    { tokenId, key },
  );
  return rows[0]?.held ?? false;
}

export interface KeptReply {
  fingerprint: string;
  status: number;
  body: unknown;
}
/** What an earlier write with this key came to, where it is not older than that. */
export async function keptReply(
  tx: Tx,
  tokenId: number,
  key: string,
  since: Date,
): Promise<KeptReply | undefined> {
  return tx('api_reply')
    .where({ token_id: tokenId, key })
    .where('at', '>', since)
    .first<KeptReply | undefined>('fingerprint', 'status', 'body');
}

/** Keeps what a write came to; throws away what is older than a key counts. */
export async function keepReply(
  tx: Tx,
  tokenId: number,
  key: string,
  reply: KeptReply,
  at: Date,
  since: Date,
): Promise<void> {
  await tx('api_reply').where('at', '<=', since).delete();
  await tx('api_reply').insert({
    token_id: tokenId,
    key,
    fingerprint: reply.fingerprint,
    status: reply.status,
    body: JSON.stringify(reply.body ?? null),
    at,
  });
}
