import type { CaseKind, CasePart } from '../../domain/cases/cases';
import { UNIT_STATES, VERDICTS } from '../../domain/verdicts/codes';
import type { Tx } from '../db/transaction';

/** Closed cases that nobody has looked at again. For jobs, which serve every organisation. */

/** Their rows, longest closed first. */
export async function uncheckedCases(tx: Tx, at: Date): Promise<number[]> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `select id from case_file where closed_at is not null and checked_at is null and closed_at < ? order by closed_at`,
    [at],
  );
  return rows.map((r) => r.id);
}

export interface ClosedCase {
  id: number;
  ref: string;
  number: number;
  title: string;
  organisationId: number;
  siteId: number;
  latitude: number;
  longitude: number;
  altitude: number;
  kind: CaseKind;
  closedAt: Date;
  version: number;
  assigneeId: number | null;
  stringIds: number[];
  stringRefs: string[];
  parts: CasePart[];
  /** null: it was opened without a cause. */
  causeOpen: boolean | null;
  plannedWork: boolean;
  shutdownSince: boolean;
}

/** The case, held until the transaction ends; undefined where another worker has it or it was looked at meanwhile. */
export async function lockUnchecked(tx: Tx, id: number, at: Date): Promise<ClosedCase | undefined> {
  const { rows } = await tx.raw<{ rows: ClosedCase[] }>(
    `select c.id, c.ref, c.number, c.title, c.organisation_id as "organisationId", c.site_id as "siteId",
            site.latitude, site.longitude, site.altitude, c.kind, c.closed_at as "closedAt", c.version,
            c.assignee_id as "assigneeId", c.string_ids as "stringIds", c.units as parts,
            coalesce((select array_agg(s.ref::text) from string s where s.id = any (c.string_ids)), '{}') as "stringRefs",
            (select exists (select from cause n where n.site_id = was.site_id and n.key = was.key and n.closed_at is null)
             from cause was where was.id = c.cause_id) as "causeOpen",
            exists (select from planned_work w where w.site_id = c.site_id and w.ended_by is null
                    and w.starts_at <= :at and w.ends_at > :at
                    and (w.string_ids is null or w.string_ids && c.string_ids)) as "plannedWork",
            exists (select from command m where m.site_id = c.site_id and m.since between c.closed_at and :at
                    and m.in_force <> 'released'
                    and (m.zone_id is null or m.zone_id in (select s.zone_id from string s where s.id = any (c.string_ids))))
              as "shutdownSince"
     from case_file c join site on site.id = c.site_id
     where c.id = :id and c.closed_at is not null and c.checked_at is null
     for update of c skip locked`,
    { id, at },
  );
  return rows[0];
}

/** What the judgement of units changed to after an instant, other than "ok" and awake. */
export async function relapsesSince(
  tx: Tx,
  stringIds: readonly number[],
  from: Date,
  to: Date,
): Promise<{ stringId: string; position: number; verdict: string; atMs: number }[]> {
  const { rows } = await tx.raw<{
    rows: { stringId: string; position: number; verdict: number; state: number; at: Date }[];
  }>(
    `select s.ref as "stringId", e.position::int, e.verdict::int, e.state::int, e.at
     from unit_event e join string s on s.id = e.string_id
     where e.string_id = any (:stringIds) and e.at > :from and e.at <= :to
       and ((e.verdict <> 0 and e.verdict is distinct from e.verdict_before)
            or (e.state = :silent and e.state is distinct from e.state_before))
     order by e.at`,
    { stringIds: [...stringIds], from, to, silent: UNIT_STATES.indexOf('silent') },
  );
  return rows.map((r) => ({
    stringId: r.stringId,
    position: r.position,
    verdict: r.verdict === 0 ? 'silent' : (VERDICTS[r.verdict] ?? 'ok'),
    atMs: r.at.getTime(),
  }));
}

/** Nights' judgements of days after that of the closing, oldest first. */
export async function daysSince(
  tx: Tx,
  siteId: number,
  stringIds: readonly number[],
  closedAt: Date,
): Promise<{ stringId: string; day: string; ratio: number | null; z: number | null }[]> {
  const { rows } = await tx.raw<{
    rows: { stringId: string; day: string; ratio: number | null; z: number | null }[];
  }>(
    `select s.ref as "stringId", d.day::text as day, d.ratio::float8 as ratio, d.z::float8 as z
     from output_day d join string s on s.id = d.string_id join site on site.id = d.site_id
     where d.site_id = :siteId and d.string_id = any (:stringIds)
       and d.day > (:closedAt::timestamptz at time zone site.time_zone)::date
     order by d.day`,
    { siteId, stringIds: [...stringIds], closedAt },
  );
  return rows;
}
