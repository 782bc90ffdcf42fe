import type { Role } from '../../domain/access/permissions';
import { asSignIn, type Tx } from '../db/transaction';

/** People, their invitations and the letters that let them in. */

export interface PersonAccount {
  id: number;
  ref: string;
  name: string;
  email: string;
  role: Role;
  active: boolean;
  lastSeenAt: Date | null;
  deactivatedAt: Date | null;
  secondFactor: boolean;
  sites: string[];
  tokens: number;
  tokensUsedAt: Date | null;
}

/** Everybody of the actor's organisation, by name. */
export async function accountsOf(tx: Tx): Promise<PersonAccount[]> {
  const { rows } = await tx.raw<{ rows: PersonAccount[] }>(
    `select p.id, p.ref, p.name, p.email, p.role, p.active, p.last_seen_at as "lastSeenAt",
            p.deactivated_at as "deactivatedAt", p.totp_confirmed_at is not null as "secondFactor",
            coalesce((select array_agg(s.ref) from site_access a join site s on s.id = a.site_id where a.person_id = p.id), '{}') as sites,
            t.tokens, t.used_at as "tokensUsedAt"
     from person p
     cross join lateral (select count(*)::int as tokens, max(last_used_at) as used_at from api_token t
       where t.person_id = p.id and t.ended_at is null and t.expires_at > now()) t
     where p.organisation_id = (select actor_organisation()) order by p.name, p.id`,
  );
  return rows;
}

export async function accountOf(tx: Tx, ref: string): Promise<PersonAccount | undefined> {
  return (await accountsOf(tx)).find((p) => p.ref === ref);
}

/** Holds the organisation's people until the transaction ends, so that two can't remove the last two managers. */
export async function lockPeople(tx: Tx): Promise<void> {
  await tx.raw('select pg_advisory_xact_lock(hashtext(?), (select actor_organisation()))', ['people']);
}

export async function updatePerson(
  tx: Tx,
  personId: number,
  change: { name?: string; role?: Role; active?: boolean },
  at: Date,
): Promise<void> {
  const row: Record<string, unknown> = {};
  if (change.name !== undefined) row.name = change.name;
  if (change.role !== undefined) row.role = change.role;
  if (change.active !== undefined)
    Object.assign(row, { active: change.active, deactivated_at: change.active ? null : at });
  if (Object.keys(row).length > 0) await tx('person').where({ id: personId }).update(row);
}

export async function endSessionsOf(
  tx: Tx,
  personId: number,
  exceptHash: string | null = null,
): Promise<number> {
  return tx('session')
    .where({ user_id: personId })
    .modify((q) => {
      if (exceptHash) void q.whereNot({ id: exceptHash });
    })
    .delete();
}

/** Numbers of the sites that the actor sees among these; what is missing is not theirs to give. */
export async function siteNumbers(tx: Tx, refs: readonly string[]): Promise<Map<string, number>> {
  const rows = await tx('site').whereIn('ref', refs).select<{ ref: string; id: number }[]>('ref', 'id');
  return new Map(rows.map((r) => [r.ref, r.id]));
}

export async function replaceSiteAccess(tx: Tx, personId: number, siteIds: readonly number[]): Promise<void> {
  await tx('site_access').where({ person_id: personId }).whereNotIn('site_id', siteIds).delete();
  if (siteIds.length > 0)
    await tx('site_access')
      .insert(siteIds.map((site_id) => ({ person_id: personId, site_id })))
      .onConflict(['person_id', 'site_id'])
      .ignore();
}

export interface InvitationRow {
  id: number;
  ref: string;
  organisationId: number;
  organisation: string;
  name: string;
  email: string;
  role: Role;
  siteIds: number[];
  sites: string[];
  invitedBy: string;
  createdAt: Date;
  expiresAt: Date;
  acceptedAt: Date | null;
  endedAt: Date | null;
}

const INVITATION = `
  select i.id, i.ref, i.organisation_id as "organisationId", o.name as organisation, i.name, i.email, i.role,
         i.sites as "siteIds", coalesce((select array_agg(s.ref) from site s where s.id = any (i.sites)), '{}') as sites,
         person.name as "invitedBy", i.created_at as "createdAt", i.expires_at as "expiresAt",
         i.accepted_at as "acceptedAt", i.ended_at as "endedAt"
  from invitation i join organisation o on o.id = i.organisation_id join person on person.id = i.invited_by`;

/** Invitations of the actor's organisation, newest first. */
export async function invitationsOf(tx: Tx): Promise<InvitationRow[]> {
  const { rows } = await tx.raw<{ rows: InvitationRow[] }>(
    `${INVITATION} where i.organisation_id = (select actor_organisation()) order by i.created_at desc limit 500`,
  );
  return rows;
}

export async function isAddressTaken(email: string): Promise<boolean> {
  const row = await asSignIn((tx) =>
    tx('person').whereRaw('lower(email) = lower(?)', [email]).first<{ id: number } | undefined>('id'),
  );
  return row !== undefined;
}

export async function addInvitation(
  tx: Tx,
  invitation: {
    organisationId: number;
    email: string;
    name: string;
    role: Role;
    sites: readonly number[];
    hash: Buffer;
    invitedBy: number;
    at: Date;
    expiresAt: Date;
  },
): Promise<string> {
  // an older one to the same address gives way
  await tx('invitation')
    .whereRaw('lower(email) = lower(?)', [invitation.email])
    .whereNull('accepted_at')
    .whereNull('ended_at')
    .update({ ended_at: invitation.at });
  const [row] = await tx('invitation')
    .insert({
      organisation_id: invitation.organisationId,
      email: invitation.email,
      name: invitation.name,
      role: invitation.role,
      sites: [...invitation.sites],
      token_hash: invitation.hash,
      invited_by: invitation.invitedBy,
      created_at: invitation.at,
      expires_at: invitation.expiresAt,
    })
    .returning<{ ref: string }[]>('ref');
  return row?.ref ?? '';
}

export async function endInvitation(tx: Tx, ref: string, at: Date): Promise<boolean> {
  const ended = await tx('invitation')
    .where({ ref })
    .whereNull('accepted_at')
    .whereNull('ended_at')
    .update({ ended_at: at });
  return ended > 0;
}

/** By the hash of its token, on the sign-in account; locked where `forUse`. */
export async function invitationByToken(
  tx: Tx,
  hash: Buffer,
  forUse = false,
): Promise<InvitationRow | undefined> {
  const { rows } = await tx.raw<{ rows: InvitationRow[] }>(
    `${INVITATION} where i.token_hash = ? ${forUse ? 'for update of i' : ''}`,
    [hash],
  );
  return rows[0];
}

export async function acceptInvitation(
  tx: Tx,
  invitation: InvitationRow,
  person: { name: string; passwordHash: string },
  at: Date,
): Promise<number> {
  const [row] = await tx('person')
    .insert({
      organisation_id: invitation.organisationId,
      email: invitation.email,
      name: person.name,
      role: invitation.role,
      password_hash: person.passwordHash,
    })
    .returning<{ id: number }[]>('id');
  if (!row) throw new Error('the person was not stored');
  await tx('invitation').where({ id: invitation.id }).update({ accepted_at: at });
  if (invitation.role === 'customer') await replaceSiteAccess(tx, row.id, invitation.siteIds);
  return row.id;
}

export interface AccountLinkRow {
  id: number;
  personId: number;
  purpose: 'password_reset' | 'email_change';
  newEmail: string | null;
  expiresAt: Date;
  usedAt: Date | null;
  email: string;
  name: string;
  role: Role;
  organisationId: number;
}

export async function addAccountLink(
  tx: Tx,
  link: {
    personId: number;
    purpose: AccountLinkRow['purpose'];
    newEmail?: string;
    hash: Buffer;
    at: Date;
    expiresAt: Date;
  },
): Promise<void> {
  // the newest counts alone
  await tx('account_link')
    .where({ person_id: link.personId, purpose: link.purpose })
    .whereNull('used_at')
    .update({ used_at: link.at });
  await tx('account_link').insert({
    person_id: link.personId,
    purpose: link.purpose,
    new_email: link.newEmail ?? null,
    token_hash: link.hash,
    created_at: link.at,
    expires_at: link.expiresAt,
  });
}

/** By the hash of its token, on the sign-in account, with the active person it belongs to; locked. */
export async function accountLinkByToken(tx: Tx, hash: Buffer): Promise<AccountLinkRow | undefined> {
  const { rows } = await tx.raw<{ rows: AccountLinkRow[] }>(
    `select l.id, l.person_id as "personId", l.purpose, l.new_email as "newEmail", l.expires_at as "expiresAt",
            l.used_at as "usedAt", p.email, p.name, p.role, p.organisation_id as "organisationId"
     from account_link l join person p on p.id = l.person_id and p.active
     where l.token_hash = ? for update of l`,
    [hash],
  );
  return rows[0];
}

/** Ends every letter's link of a person that was not used yet: what they had asked for is over. */
export async function endAccountLinks(tx: Tx, personId: number): Promise<void> {
  await tx('account_link')
    .where({ person_id: personId })
    .whereNull('used_at')
    .update({ used_at: tx.fn.now() });
}

export async function useAccountLink(tx: Tx, id: number, at: Date): Promise<void> {
  await tx('account_link').where({ id }).update({ used_at: at });
}

export async function setPasswordHash(tx: Tx, personId: number, hash: string): Promise<void> {
  await tx('person').where({ id: personId }).update({ password_hash: hash });
}
export async function setEmail(tx: Tx, personId: number, email: string): Promise<void> {
  await tx('person').where({ id: personId }).update({ email });
}
