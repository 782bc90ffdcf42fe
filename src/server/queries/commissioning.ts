import { gravestTestOf } from './shutdown-tests';
import type { SiteUnderWay } from '../../schemas/api/commissioning';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE, type VisibleSite } from './visible-site';

interface Row {
  id: string;
  name: string;
  place: string;
  timeZone: string;
  stage: 'commissioning' | 'operating';
  strings: number;
  slots: number;
  placed: number;
  roster: number;
  heard: number;
  heardUnknown: number;
  startedAt: Date | null;
  stoppedAt: Date | null;
  personOnSite: string | null;
  startedBy: string | null;
  checkedStrings: number;
  failedChecks: number;
  readStrings: number;
  lastReadingAt: Date | null;
  testAt: Date | null;
  testResult: 'passed' | 'failed' | 'consistent' | 'not_witnessed' | null;
}

/**
 * Sites that the actor sees and that are being commissioned, or where a roll call runs; by name. With a site's
 * number: that one, whatever its stage.
 */
export async function sitesUnderWay(tx: Tx, siteId?: number): Promise<SiteUnderWay[]> {
  const { rows } = await tx.raw<{ rows: Row[] }>(
    `with under_way as (
       select id, ref, name, place, time_zone, stage from site
       where ${SITE_VISIBLE}
         and (cast(:siteId as int4) is null or site.id = :siteId)
         and (cast(:siteId as int4) is not null or stage = 'commissioning'
              or exists (select from roll_call r where r.site_id = site.id and r.stopped_at is null))
     )
     select u.ref as id, u.name, u.place, u.time_zone as "timeZone", u.stage,
            built.strings, built.slots, built.placed, built.roster, built.heard,
            (select count(*)::int from heard h where h.site_id = u.id
               and not exists (select from placement p where p.unit_id = h.unit_id and p.placed_to is null and p.site_id = u.id)
            ) as "heardUnknown",
            run.started_at as "startedAt", run.stopped_at as "stoppedAt", run.person_on_site as "personOnSite", run.name as "startedBy",
            checks.strings as "checkedStrings", checks.failed as "failedChecks",
            reading.strings as "readStrings", reading.last_at as "lastReadingAt",
            test.at as "testAt", test.result as "testResult"
     from under_way u
     cross join lateral (
       select count(distinct st.id)::int as strings, count(sl.id)::int as slots, count(p.id)::int as placed,
              count(p.id) filter (where st.kind <> 'shutdown_only')::int as roster,
              count(h.serial) filter (where st.kind <> 'shutdown_only')::int as heard
       from string st
       left join slot sl on sl.string_id = st.id
       left join placement p on p.slot_id = sl.id and p.placed_to is null
       left join heard h on h.unit_id = p.unit_id and h.site_id = u.id
       where st.site_id = u.id
     ) built
     left join lateral (
       select r.started_at, r.stopped_at, r.person_on_site, person.name
       from roll_call r join person on person.id = r.started_by
       where r.site_id = u.id order by r.stopped_at is null desc, r.started_at desc limit 1
     ) run on true
     cross join lateral (
       select count(distinct c.string_id)::int as strings, count(*) filter (where c.result = 'fail')::int as failed
       from (select distinct on (string_id, check_name) string_id, result from install_check
             where site_id = u.id order by string_id, check_name, at desc, id desc) c
     ) checks
     cross join lateral (
       select count(distinct string_id)::int as strings, max(at) as last_at from meter_reading where site_id = u.id
     ) reading
     left join lateral ${gravestTestOf('u.id')} test on true
     order by u.name`,
    { siteId: siteId ?? null },
  );
  return rows.map((r) => ({
    id: r.id,
    name: r.name,
    place: r.place,
    timeZone: r.timeZone,
    stage: r.stage,
    strings: r.strings,
    slots: r.slots,
    placed: r.placed,
    roster: r.roster,
    heard: r.heard,
    heardUnknown: r.heardUnknown,
    rollCall:
      r.startedAt && r.personOnSite && r.startedBy
        ? {
            startedAt: r.startedAt.toISOString(),
            stoppedAt: r.stoppedAt?.toISOString() ?? null,
            personOnSite: r.personOnSite,
            startedBy: r.startedBy,
          }
        : null,
    checks: { strings: r.checkedStrings, failed: r.failedChecks },
    readings: { strings: r.readStrings, lastAt: r.lastReadingAt?.toISOString() ?? null },
    lastTest: r.testAt && r.testResult ? { at: r.testAt.toISOString(), result: r.testResult } : null,
  }));
}

/** Sites that the actor sees and that are being commissioned, or where a roll call runs; by name. */
export async function sitesCommissioned(tx: Tx): Promise<VisibleSite[]> {
  const { rows } = await tx.raw<{ rows: VisibleSite[] }>(
    `select site.id, site.ref, site.organisation_id as "organisationId", site.name, site.place,
            site.time_zone as "timeZone", site.stage
     from site where ${SITE_VISIBLE}
       and (stage = 'commissioning'
            or exists (select from roll_call r where r.site_id = site.id and r.stopped_at is null))
     order by name`,
  );
  return rows;
}
