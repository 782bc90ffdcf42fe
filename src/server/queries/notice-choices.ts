import type { Role } from '../../domain/access/permissions';
import type { How } from '../../domain/notices/kinds';
import type { Tx } from '../db/transaction';

/** What people have chosen to be told of. */

export interface ChoiceRow {
  rules: Partial<Record<string, How>>;
  siteIds: number[] | null;
  digestAt: number;
  quietFrom: number | null;
  quietTo: number | null;
  /** The person's own; null: the organisation's. */
  timeZone: string | null;
  organisationZone: string;
}

export async function choiceOf(tx: Tx, personId: number): Promise<ChoiceRow | undefined> {
  const { rows } = await tx.raw<{ rows: ChoiceRow[] }>(
    `select coalesce(c.rules, '{}') as rules, c.site_ids as "siteIds", coalesce(c.digest_at, 420) as "digestAt",
            c.quiet_from as "quietFrom", c.quiet_to as "quietTo", p.time_zone as "timeZone",
            o.time_zone as "organisationZone"
     from person p join organisation o on o.id = p.organisation_id
     left join notice_choice c on c.person_id = p.id where p.id = ?`,
    [personId],
  );
  return rows[0];
}

export async function saveChoice(
  tx: Tx,
  of: { personId: number; organisationId: number },
  choice: Omit<ChoiceRow, 'organisationZone'>,
  at: Date,
): Promise<void> {
  await tx.raw(
    `insert into notice_choice (person_id, organisation_id, rules, site_ids, digest_at, quiet_from, quiet_to, changed_at)
     values (:personId, :organisationId, :rules, :siteIds, :digestAt, :quietFrom, :quietTo, :at)
     on conflict (person_id) do update set rules = excluded.rules, site_ids = excluded.site_ids,
       digest_at = excluded.digest_at, quiet_from = excluded.quiet_from, quiet_to = excluded.quiet_to,
       changed_at = excluded.changed_at`,
    {
      ...of,
      rules: JSON.stringify(choice.rules),
      siteIds: choice.siteIds,
      digestAt: choice.digestAt,
      quietFrom: choice.quietFrom,
      quietTo: choice.quietTo,
      at,
    },
  );
  await tx('person').where({ id: of.personId }).update({ time_zone: choice.timeZone });
}

/** The sites that the actor sees, by name. */
export async function sitesToChoose(tx: Tx): Promise<{ id: number; ref: string; name: string }[]> {
  return tx('site').select('id', 'ref', 'name').orderBy('name');
}

export interface SignedOutPerson {
  personId: number;
  organisationId: number;
  ref: string;
  name: string;
  email: string;
  role: Role;
  key: Buffer;
  rules: Partial<Record<string, How>>;
}

/** Whose token it may be: for ways out of letters, before anybody is signed in. */
export async function personOfLetter(tx: Tx, ref: string): Promise<SignedOutPerson | undefined> {
  const { rows } = await tx.raw<{ rows: SignedOutPerson[] }>(
    `select p.id as "personId", p.organisation_id as "organisationId", p.ref, p.name, p.email, p.role, c.key, c.rules
     from person p join notice_choice c on c.person_id = p.id where p.ref::text = ? and p.active`,
    [ref],
  );
  return rows[0];
}

export async function saveRules(
  tx: Tx,
  personId: number,
  rules: Partial<Record<string, How>>,
  at: Date,
): Promise<void> {
  await tx('notice_choice')
    .where({ person_id: personId })
    .update({ rules: JSON.stringify(rules), changed_at: at });
}
