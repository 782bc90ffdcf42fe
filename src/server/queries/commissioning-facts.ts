import type { CommissioningFacts, StringFacts } from '../../domain/commissioning/steps';
import type { Tx } from '../db/transaction';
import { shutdownTestStanding } from './shutdown-tests';

/** Facts of sites under way, as the steps count them. */

interface StringRow extends Omit<StringFacts, 'failedChecks'> {
  siteId: number;
  failedChecks: string[] | null;
}
interface SiteRow {
  siteId: number;
  stage: 'commissioning' | 'operating';
  ruleSet: string;
  heardUnknown: number;
  rollCallRunning: boolean;
  rollCallStarted: boolean;
  accepted: string[] | null;
  packs: number;
}

async function stringFacts(tx: Tx, siteIds: readonly number[]): Promise<StringRow[]> {
  const { rows } = await tx.raw<{ rows: StringRow[] }>(
    `with newest as (
       select distinct on (string_id, check_name) string_id, check_name, result, recorded_at
       from install_check where site_id = any(:siteIds) order by string_id, check_name, id desc
     ), checked as (
       select string_id, count(*)::int as recorded, max(recorded_at) as last_at,
              array_agg(replace(check_name, '_', ' ') order by check_name) filter (where result = 'fail') as failed
       from newest group by string_id
     ), signed as (
       select distinct on (string_id) string_id, at from string_sign_off
       where site_id = any(:siteIds) order by string_id, at desc
     ), reading as (
       -- a conductor that touches earth is a finding of the string, whatever + to − says
       select string_id, case when bool_or(outcome = 'finding') then 'finding'
              else max(outcome) filter (where reading_kind = 'positive_to_negative') end as outcome
       from (select distinct on (string_id, reading_kind) string_id, reading_kind, findings ->> 'outcome' as outcome
             from meter_reading where site_id = any(:siteIds) order by string_id, reading_kind, id desc) newest_reading
       group by string_id
     ), built as (
       select st.id, count(sl.id)::int as slots, count(p.id)::int as placed,
              count(h.serial) filter (where st.kind <> 'shutdown_only')::int as heard
       from string st
       left join slot sl on sl.string_id = st.id
       left join placement p on p.slot_id = sl.id and p.placed_to is null
       left join heard h on h.unit_id = p.unit_id and h.site_id = st.site_id
       where st.site_id = any(:siteIds) group by st.id
     )
     select st.site_id as "siteId", st.name, st.kind = 'shutdown_only' as "shutdownOnly", b.slots, b.placed,
            case when st.kind = 'shutdown_only' then 0 else b.placed end as roster, b.heard,
            s.at is not null as "signedOff", coalesce(c.last_at > s.at, false) as "signOffStale",
            coalesce(c.recorded, 0) as "checksRecorded", c.failed as "failedChecks", r.outcome as reading
     from string st
     join built b on b.id = st.id
     left join checked c on c.string_id = st.id
     left join signed s on s.string_id = st.id
     left join reading r on r.string_id = st.id
     order by st.site_id, length(st.name), st.name`,
    { siteIds },
  );
  return rows;
}

async function siteFacts(tx: Tx, siteIds: readonly number[]): Promise<SiteRow[]> {
  const { rows } = await tx.raw<{ rows: SiteRow[] }>(
    `select s.id as "siteId", s.stage, s.rule_set as "ruleSet",
            (select count(*)::int from heard h where h.site_id = s.id and not exists (
               select from placement p where p.unit_id = h.unit_id and p.placed_to is null and p.site_id = s.id)
            ) as "heardUnknown",
            exists (select from roll_call r where r.site_id = s.id) as "rollCallStarted",
            exists (select from roll_call r where r.site_id = s.id and r.stopped_at is null) as "rollCallRunning",
            (select array_agg(g.gap) from accepted_gap g where g.site_id = s.id) as accepted,
            (select coalesce(max(version), 0) from handover_pack h where h.site_id = s.id)::int as packs
     from site s where s.id = any(:siteIds)`,
    { siteIds },
  );
  return rows;
}

/** By site number; every site asked for that the actor sees. */
export async function commissioningFacts(
  tx: Tx,
  siteIds: readonly number[],
): Promise<Map<number, CommissioningFacts>> {
  const strings = new Map<number, StringFacts[]>(siteIds.map((id) => [id, []]));
  for (const { siteId, failedChecks, ...facts } of await stringFacts(tx, siteIds))
    strings.get(siteId)?.push({ ...facts, failedChecks: failedChecks ?? [] });
  const facts = new Map<number, CommissioningFacts>();
  for (const { siteId, accepted, ...site } of await siteFacts(tx, siteIds)) {
    const zones = (await shutdownTestStanding(tx, siteId)).map(({ zone, result, untested, draft }) => ({
      name: zone.name,
      test: result,
      untested,
      underTest: draft !== null,
    }));
    facts.set(siteId, { ...site, accepted: accepted ?? [], zones, strings: strings.get(siteId) ?? [] });
  }
  return facts;
}

export interface LastHand {
  siteId: number;
  person: string;
  at: Date;
}

/** Who recorded something at each site last, and when: the person who is on it. */
export async function lastHands(tx: Tx, siteIds: readonly number[]): Promise<Map<number, LastHand>> {
  const { rows } = await tx.raw<{ rows: LastHand[] }>(
    `select distinct on (done.site_id) done.site_id as "siteId", person.name as person, done.at
     from (
       (select distinct on (site_id) site_id, person_id, recorded_at as at from install_check
        where site_id = any(:siteIds) order by site_id, recorded_at desc)
       union all
       (select distinct on (site_id) site_id, person_id, recorded_at from meter_reading
        where site_id = any(:siteIds) order by site_id, recorded_at desc)
       union all
       (select distinct on (site_id) site_id, person_id, at from audit_entry
        where site_id = any(:siteIds) order by site_id, at desc)
       union all
       (select distinct on (site_id) site_id, started_by, started_at from roll_call
        where site_id = any(:siteIds) order by site_id, started_at desc)
     ) done join person on person.id = done.person_id
     order by done.site_id, done.at desc`,
    { siteIds },
  );
  return new Map(rows.map((row) => [row.siteId, row]));
}

/** When each step of a site began, as far as records show: the first of its kind. */
export async function stepStarts(
  tx: Tx,
  siteIds: readonly number[],
): Promise<Map<number, Record<string, Date | null>>> {
  const { rows } = await tx.raw<{ rows: (Record<string, Date | null> & { siteId: number })[] }>(
    `select s.id as "siteId", s.created_at as as_built,
            (select min(at) from install_check c where c.site_id = s.id) as install_checks,
            (select min(at) from meter_reading m where m.site_id = s.id) as meter_readings,
            (select min(started_at) from roll_call r where r.site_id = s.id) as roll_call,
            least((select min(at) from shutdown_test t where t.site_id = s.id),
                  (select min(started_at) from shutdown_test_draft d where d.site_id = s.id and d.closed_at is null)
            ) as shutdown_test,
            (select min(made_at) from handover_pack h where h.site_id = s.id) as handover
     from site s where s.id = any(:siteIds)`,
    { siteIds },
  );
  return new Map(rows.map((row) => [row.siteId, row]));
}
