import type { Tx } from '../db/transaction';

export interface PairRow {
  id: string;
  first: { id: string; name: string };
  second: { id: string; name: string };
  evidence: string;
  recordedBy: string;
  recordedAt: Date;
  endedAt: Date | null;
  /** Files that were recorded with it. */
  files: { id: string; name: string }[];
}

/** Every pair that was ever recorded, newest first; ended ones stay to be seen. */
export async function pairRows(tx: Tx): Promise<PairRow[]> {
  const { rows } = await tx.raw<{ rows: PairRow[] }>(
    `select p.ref as id, json_build_object('id', a.ref, 'name', a.name) as first,
            json_build_object('id', b.ref, 'name', b.name) as second,
            p.evidence, pe.name as "recordedBy", p.recorded_at as "recordedAt", p.ended_at as "endedAt",
            coalesce((select json_agg(json_build_object('id', f.ref, 'name', f.name) order by f.id)
                      from attachment f where f.subject = 'connector_pair' and f.subject_ref = p.ref), '[]') as files
     from connector_pair p
     join connector_type a on a.id = p.first_id join connector_type b on b.id = p.second_id
     join person pe on pe.id = p.recorded_by
     where p.organisation_id = (select actor_organisation())
     order by p.recorded_at desc, p.id desc`,
  );
  return rows;
}

/** Records a pair; undefined where one is in force already. The two in any order. */
export async function insertPair(
  tx: Tx,
  pair: { organisationId: number; first: number; second: number; evidence: string; personId: number },
): Promise<string | undefined> {
  const { rows } = await tx.raw<{ rows: { id: string }[] }>(
    `insert into connector_pair (organisation_id, first_id, second_id, evidence, recorded_by)
     values (:organisationId, least(cast(:first as int4), cast(:second as int4)), greatest(cast(:first as int4), cast(:second as int4)), :evidence, :personId)
     on conflict (first_id, second_id) where ended_at is null do nothing
     returning ref as id`,
    pair,
  );
  return rows[0]?.id;
}

/** Ends a pair that is in force; undefined where there is none of that identifier in force. */
export async function endPair(
  tx: Tx,
  ref: string,
  at: Date,
): Promise<{ evidence: string; first: number; second: number } | undefined> {
  const { rows } = await tx.raw<{ rows: { evidence: string; first: number; second: number }[] }>(
    `update connector_pair set ended_at = :at
     where ref = :ref and ended_at is null and organisation_id = (select actor_organisation())
     returning evidence, first_id as first, second_id as second`,
    { ref, at },
  );
  return rows[0];
}

/** The organisation of a pair that the actor may see; undefined for every other. */
export async function pairOrganisation(tx: Tx, ref: string): Promise<number | undefined> {
  const { rows } = await tx.raw<{ rows: { organisationId: number }[] }>(
    `select organisation_id as "organisationId" from connector_pair
     where ref = :ref and organisation_id = (select actor_organisation())`,
    { ref },
  );
  return rows[0]?.organisationId;
}
