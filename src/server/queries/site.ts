import type { EventKind, InForce } from '../../domain/verdicts/codes';
import type { SitePage, LoggerNow, ZoneNow } from '../../schemas/api/site';
import type { CommandNow, EventItem } from '../../schemas/api/now';
import type { Tx } from '../db/transaction';
import { gravestTestOf } from './shutdown-tests';
import { SITE_VISIBLE } from './visible-site';

const iso = (at: Date | null): string | null => at?.toISOString() ?? null;

export interface SiteFacts {
  id: number;
  ref: string;
  contactName: string;
  contactPhone: string;
  shutdownSwitchPlace: string;
  ruleSet: SitePage['ruleSet'];
  switchedOnOn: string | null;
  rollCall: SitePage['rollCall'];
  lastShutdownTest: SitePage['lastShutdownTest'];
}

/** What is written down about a site; undefined where the actor may not see it or it does not exist. */
export async function siteFacts(tx: Tx, ref: string): Promise<SiteFacts | undefined> {
  const { rows } = await tx.raw<{
    rows: (Omit<SiteFacts, 'rollCall' | 'lastShutdownTest'> & {
      rollCallAt: Date | null;
      personOnSite: string | null;
      testAt: Date | null;
      testResult: NonNullable<SitePage['lastShutdownTest']>['result'] | null;
      testBy: string | null;
    })[];
  }>(
    `select site.id, site.ref, site.contact_name as "contactName", site.contact_phone as "contactPhone",
            site.shutdown_switch_place as "shutdownSwitchPlace", site.rule_set as "ruleSet",
            to_char(site.switched_on_on, 'YYYY-MM-DD') as "switchedOnOn",
            r.started_at as "rollCallAt", r.person_on_site as "personOnSite",
            t.at as "testAt", t.result as "testResult", t.made_by as "testBy"
     from site
     left join roll_call r on r.site_id = site.id and r.stopped_at is null
     left join lateral ${gravestTestOf('site.id')} t on true
     where site.ref = :ref and ${SITE_VISIBLE}`,
    { ref },
  );
  const row = rows[0];
  if (!row) return undefined;
  const { rollCallAt, personOnSite, testAt, testResult, testBy, ...facts } = row;
  return {
    ...facts,
    rollCall: rollCallAt && { startedAt: rollCallAt.toISOString(), personOnSite: personOnSite ?? '' },
    lastShutdownTest:
      testAt && testResult ? { at: testAt.toISOString(), result: testResult, madeBy: testBy ?? '' } : null,
  };
}

/** Zones with the newest command of each, and transmitters that are told something else than their zone. */
export async function zonesNow(tx: Tx, siteId: number): Promise<ZoneNow[]> {
  interface Said {
    where: string;
    inForce: InForce;
    since: string;
    by: string;
  }
  const { rows } = await tx.raw<{
    rows: {
      name: string;
      initiator: string;
      initiatorPlace: string;
      strings: string[];
      command: Said | null;
      transmitters: Said[];
    }[];
  }>(
    `select z.name, i.name as initiator, i.place as "initiatorPlace",
            coalesce((select array_agg(s.name order by s.name) from string s where s.zone_id = z.id), '{}') as strings,
            (select json_build_object('where', z.name, 'inForce', c.in_force, 'since', c.since, 'by', c.said_by)
             from command c where c.site_id = z.site_id and c.zone_id = z.id order by c.since desc limit 1) as command,
            coalesce((select json_agg(json_build_object('where', t.name, 'inForce', c.in_force, 'since', c.since,
                                                        'by', c.said_by) order by t.name)
             from transmitter t
             cross join lateral (select in_force, since, said_by from command
                                 where site_id = t.site_id and transmitter_id = t.id
                                 order by since desc limit 1) c
             where t.zone_id = z.id and c.in_force <> 'released'), '[]') as transmitters
     from zone z join initiator i on i.id = z.initiator_id
     where z.site_id = :siteId
     order by z.name`,
    { siteId },
  );
  const command = (said: Said, whereKind: CommandNow['whereKind']): CommandNow => ({
    ...said,
    whereKind,
    since: new Date(said.since).toISOString(),
  });
  return rows.map((r) => ({
    ...r,
    command: r.command && command(r.command, 'zone'),
    transmitters: r.transmitters.map((t) => command(t, 'transmitter')),
  }));
}

export async function loggersNow(tx: Tx, siteId: number): Promise<LoggerNow[]> {
  const { rows } = await tx.raw<{
    rows: { serial: string; firmware: string | null; connectedAt: Date | null; lastSpokeAt: Date | null }[];
  }>(
    `select serial, firmware, connected_at as "connectedAt", last_spoke_at as "lastSpokeAt"
     from logger where site_id = :siteId order by serial`,
    { siteId },
  );
  return rows.map((r) => ({ ...r, connectedAt: iso(r.connectedAt), lastSpokeAt: iso(r.lastSpokeAt) }));
}

export interface EventsWanted {
  kind?: EventKind;
  /** From the page before: microseconds of the event's time, a dot, its number. */
  before?: string;
  limit: number;
}

/** A site's events, newest first; one that another supersedes is left out. */
export async function eventsOfSite(
  tx: Tx,
  siteId: number,
  wanted: EventsWanted,
): Promise<{ events: EventItem[]; before: string | null }> {
  const [micros, number] = (wanted.before ?? '').split('.');
  const { rows } = await tx.raw<{
    rows: (Omit<EventItem, 'at' | 'recordedAt'> & { at: Date; recordedAt: Date; micros: number })[];
  }>(
    `select e.id::text as id, e.at, e.recorded_at as "recordedAt", site.ref as "siteId", site.name as "siteName",
            string.ref as "stringId", string.name as "stringName", e.kind, e.detail,
            (extract(epoch from e.at) * 1000000)::int8 as micros
     from event e join site on site.id = e.site_id left join string on string.id = e.string_id
     where e.site_id = :siteId and ${SITE_VISIBLE}
       and not exists (select from event newer where newer.supersedes = e.id)
       ${wanted.kind ? 'and e.kind = :kind' : ''}
       ${wanted.before ? `and (e.at, e.id) < (timestamptz 'epoch' + :micros::int8 * interval '1 microsecond', :number::int8)` : ''}
     order by e.at desc, e.id desc
     limit :limit`,
    {
      siteId,
      limit: wanted.limit + 1,
      ...(wanted.kind && { kind: wanted.kind }),
      ...(wanted.before && { micros: micros ?? '0', number: number ?? '0' }),
    },
  );
  const shown = rows.slice(0, wanted.limit);
  const last = shown.at(-1);
  return {
    events: shown.map(({ micros: _, ...e }) => ({
      ...e,
      at: e.at.toISOString(),
      recordedAt: e.recordedAt.toISOString(),
    })),
    before: rows.length > wanted.limit && last ? `${last.micros}.${last.id}` : null,
  };
}

/** Sites that the actor sees, for choosing among them; by name. */
export async function siteChoices(tx: Tx): Promise<{ id: string; name: string }[]> {
  const { rows } = await tx.raw<{ rows: { id: string; name: string }[] }>(
    `select site.ref as id, site.name from site where ${SITE_VISIBLE} order by site.name`,
  );
  return rows;
}
