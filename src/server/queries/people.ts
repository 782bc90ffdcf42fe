import { asSignIn, type Tx } from '../db/transaction';

export interface PersonRow {
  id: number;
  organisationId: number;
  organisationName: string;
  timeZone: string;
  email: string;
  name: string;
  role: string;
  theme: string;
  sites: number[];
}

/** The person behind a valid session, with the sites that a customer was given; undefined when deactivated. */
export async function personOfSession(personId: number): Promise<PersonRow | undefined> {
  return asSignIn(async (tx) => {
    const { rows } = await tx.raw<{ rows: PersonRow[] }>(
      `select p.id, p.organisation_id as "organisationId", o.name as "organisationName", o.time_zone as "timeZone", p.email, p.name, p.role, p.theme,
              coalesce((select array_agg(site_id) from site_access a where a.person_id = p.id), '{}') as sites
       from person p join organisation o on o.id = p.organisation_id
       where p.id = ? and p.active`,
      [personId],
    );
    return rows[0];
  });
}

/** What sign-in compares; undefined when no active person has the address. */
export async function credentialsOf(
  email: string,
): Promise<{ id: number; organisationId: number; passwordHash: string; role: string } | undefined> {
  return asSignIn((tx) =>
    tx('person')
      .whereRaw('lower(email) = lower(?)', [email])
      .where('active', true)
      .first('id', 'role', { organisationId: 'organisation_id', passwordHash: 'password_hash' }),
  );
}

export async function markSeen(personId: number): Promise<void> {
  await asSignIn((tx) => tx('person').where('id', personId).update({ last_seen_at: tx.fn.now() }));
}

export async function setTheme(tx: Tx, personId: number, theme: string): Promise<void> {
  await tx('person').where('id', personId).update({ theme });
}

export async function addAuditEntry(
  tx: Tx,
  entry: {
    organisationId: number;
    personId: number;
    address?: string | null;
    action: string;
    subject: string;
    before?: unknown;
    after?: unknown;
  },
): Promise<void> {
  const json = (v: unknown) => (v === undefined ? null : JSON.stringify(v));
  await tx('audit_entry').insert({
    organisation_id: entry.organisationId,
    person_id: entry.personId,
    address: entry.address ?? null,
    action: entry.action,
    subject: entry.subject,
    before: json(entry.before),
    after: json(entry.after),
  });
}
