import { asSignIn, type Tx } from '../db/transaction';

export interface PersonRow {
  id: number;
  ref: string;
  organisationId: number;
  organisationName: string;
  timeZone: string;
  /** How the organisation reads temperatures. */
  units: 'metric' | 'imperial';
  email: string;
  name: string;
  role: string;
  theme: string;
  sites: number[];
  /** Notices not read yet, at most a hundred, and hazards among them that are not over. */
  unread: number;
  hazards: number;
}

/**
 * The person behind a valid session, with the sites that a customer was given; undefined when deactivated. Notes that
 * the session is used and its person was here, at most every five minutes.
 */
export async function personOfSession(personId: number, sessionHash: string): Promise<PersonRow | undefined> {
  return asSignIn(async (tx) => {
    const { rows } = await tx.raw<{ rows: PersonRow[] }>(
      `with used as (
         update session set used_at = now() where id = ? and used_at < now() - interval '5 minutes' returning user_id),
       here as (update person set last_seen_at = now() where id in (select user_id from used))
       select p.id, p.ref, p.organisation_id as "organisationId", o.name as "organisationName", o.time_zone as "timeZone", o.units, p.email, p.name, p.role, p.theme,
              coalesce((select array_agg(site_id) from site_access a where a.person_id = p.id), '{}') as sites,
              n.unread, n.hazards
       from person p join organisation o on o.id = p.organisation_id
       cross join lateral (
         select count(*)::int as unread, (count(*) filter (where hazard and over_at is null))::int as hazards
         from (select hazard, over_at from notice where person_id = p.id and read_at is null limit 100) newest) n
       where p.id = ? and p.active`,
      [sessionHash, personId],
    );
    return rows[0];
  });
}

export interface Credentials {
  id: number;
  organisationId: number;
  name: string;
  email: string;
  role: string;
  passwordHash: string;
  /** Set where sign-in asks for a code as well. */
  secondFactorSince: Date | null;
}

/** What sign-in compares; undefined when no active person has the address. */
export async function credentialsOf(email: string): Promise<Credentials | undefined> {
  return asSignIn((tx) =>
    tx('person')
      .whereRaw('lower(email) = lower(?)', [email])
      .where('active', true)
      .first<Credentials | undefined>('id', 'role', 'name', 'email', {
        organisationId: 'organisation_id',
        passwordHash: 'password_hash',
        secondFactorSince: 'totp_confirmed_at',
      }),
  );
}

/** What a signature compares; undefined when the person has been deactivated meanwhile. */
export async function passwordHashOf(personId: number): Promise<string | undefined> {
  const row = await asSignIn((tx) =>
    tx('person')
      .where({ id: personId, active: true })
      .first<{ hash: string } | undefined>({ hash: 'password_hash' }),
  );
  return row?.hash;
}

export async function markSeen(personId: number): Promise<void> {
  await asSignIn((tx) => tx('person').where('id', personId).update({ last_seen_at: tx.fn.now() }));
}

export async function setTheme(tx: Tx, personId: number, theme: string): Promise<void> {
  await tx('person').where('id', personId).update({ theme });
}

export interface AuditEntry {
  organisationId: number;
  /** null: Wakeline itself. */
  personId: number | null;
  address?: string | null | undefined;
  action: string;
  subject: string;
  before?: unknown;
  after?: unknown;
  siteId?: number | null | undefined;
  stringId?: number | null | undefined;
  /** Why, in the person's words. */
  reason?: string | undefined;
}

/** A person of the actor's organisation by number. */
export async function findPersonName(tx: Tx, personId: number): Promise<string | undefined> {
  const row = await tx<{ id: number; name: string }>('person').where({ id: personId }).first('name');
  return row?.name;
}

export const addAuditEntry = (tx: Tx, entry: AuditEntry): Promise<void> => addAuditEntries(tx, [entry]);

/** Many at once, in one statement; they keep the order given. */
export async function addAuditEntries(tx: Tx, entries: readonly AuditEntry[]): Promise<void> {
  if (entries.length === 0) return;
  await tx.raw(
    `insert into audit_entry (organisation_id, person_id, address, action, subject, before, after, site_id, string_id, reason)
     select o, p, address, action, subject, before, after, site_id, string_id, reason
     from rows from (jsonb_to_recordset(?::jsonb) as (o int4, p int4, address text, action text, subject text,
         before jsonb, after jsonb, site_id int4, string_id int4, reason text))
       with ordinality as x(o, p, address, action, subject, before, after, site_id, string_id, reason, n)
     order by n`,
    [
      JSON.stringify(
        entries.map((e) => ({
          o: e.organisationId,
          p: e.personId,
          address: e.address ?? null,
          action: e.action,
          subject: e.subject,
          before: e.before ?? null,
          after: e.after ?? null,
          site_id: e.siteId ?? null,
          string_id: e.stringId ?? null,
          reason: e.reason ?? '',
        })),
      ),
    ],
  );
}
