import type { CheckInput, CheckRecord } from '../../schemas/api/checks';
import type { Tx } from '../db/transaction';

/** Install checks and their signatures. The site is one that the caller found as the actor. */

interface Row extends Omit<CheckRecord, 'at' | 'recordedAt'> {
  at: Date;
  recordedAt: Date;
  personId: number;
}
/** A record, and who made it by the database's own number. */
export type KeptCheck = CheckRecord & { personId: number };

const SELECT = `select k.ref, st.ref as "stringId", k.check_name as "check", k.result, k.reason, k.note, k.figures, k.at,
    k.recorded_at as "recordedAt", p.name as person, k.person_id as "personId", before.ref as supersedes
  from install_check k join string st on st.id = k.string_id join person p on p.id = k.person_id
  left join install_check before on before.id = k.supersedes`;

const kept = (row: Row): KeptCheck => ({
  ...row,
  at: row.at.toISOString(),
  recordedAt: row.recordedAt.toISOString(),
});
/** A record as it leaves the server. */
export const checkOut = ({ personId: _, ...record }: KeptCheck): CheckRecord => record;

/** What stands of each check: the record that none supersedes; where there are several, the one recorded last. */
export async function latestChecks(tx: Tx, siteId: number, stringId?: number): Promise<KeptCheck[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `${SELECT} where k.id in (
       select distinct on (string_id, check_name) id from install_check
       where site_id = :siteId and (cast(:stringId as int4) is null or string_id = :stringId)
       order by string_id, check_name, id desc)
     order by k.string_id, k.id`,
    { siteId, stringId: stringId ?? null },
  );
  return rows.map(kept);
}

/** A record by its identifier, if the actor may see it. */
export async function checkByRef(tx: Tx, ref: string): Promise<KeptCheck | undefined> {
  const { rows } = await tx.raw<{ rows: Row[] }>(`${SELECT} where k.ref = :ref`, { ref });
  return rows[0] && kept(rows[0]);
}

/** Writes a record; undefined where its identifier is taken, also by what the actor can't see. */
export async function insertCheck(
  tx: Tx,
  record: { siteId: number; stringId: number; personId: number; input: CheckInput },
): Promise<KeptCheck | undefined> {
  const { input } = record;
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `insert into install_check (ref, site_id, string_id, check_name, result, reason, note, figures, person_id, at, supersedes)
     values (:ref, :siteId, :stringId, :check, :result, :reason, :note, :figures, :personId, :at,
       (select id from install_check where ref = :supersedes))
     on conflict (ref) do nothing returning id`,
    {
      siteId: record.siteId,
      stringId: record.stringId,
      personId: record.personId,
      ref: input.ref,
      check: input.check,
      result: input.result,
      reason: input.reason,
      note: input.note,
      figures: JSON.stringify(input.figures),
      at: input.at,
      supersedes: input.supersedes,
    },
  );
  return rows[0] && checkByRef(tx, input.ref);
}

export interface SignOffRow {
  ref: string;
  stringId: string;
  person: string;
  personId: number;
  at: Date;
  fingerprint: string;
}
const SIGNED = `select f.ref, st.ref as "stringId", p.name as person, f.person_id as "personId", f.at, f.fingerprint
  from string_sign_off f join string st on st.id = f.string_id join person p on p.id = f.person_id`;

/** The newest signature of each string. */
export async function latestSignOffs(tx: Tx, siteId: number): Promise<SignOffRow[]> {
  const { rows } = await tx.raw<{ rows: SignOffRow[] }>(
    `${SIGNED} where f.id in (
       select distinct on (string_id) id from string_sign_off where site_id = ? order by string_id, id desc)`,
    [siteId],
  );
  return rows;
}

/** Writes a signature once; the one that is there where its identifier is known already, undefined where it is taken. */
export async function insertSignOff(
  tx: Tx,
  sign: { ref: string; siteId: number; stringId: number; personId: number; fingerprint: string },
): Promise<{ row: SignOffRow; made: boolean } | undefined> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `insert into string_sign_off (ref, site_id, string_id, person_id, fingerprint)
     values (:ref, :siteId, :stringId, :personId, :fingerprint) on conflict (ref) do nothing returning id`,
    sign,
  );
  const read = await tx.raw<{ rows: SignOffRow[] }>(`${SIGNED} where f.ref = ? and f.string_id = ?`, [
    sign.ref,
    sign.stringId,
  ]);
  return read.rows[0] && { row: read.rows[0], made: rows.length > 0 };
}
