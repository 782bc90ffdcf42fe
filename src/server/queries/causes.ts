import type { UnitKind } from '../../domain/equipment/unit-type';
import type { InForce, StringFinding } from '../../domain/verdicts/codes';
import type { FindingEvidence } from '../../domain/verdicts/memory';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** A site with all that the search for causes looks at, as the database has it. Times are epoch seconds. */
export interface CauseSiteRow {
  ref: string;
  name: string;
  reportIntervalS: number;
  strings: {
    ref: string;
    name: string;
    kind: UnitKind;
    releasedBy: 'keep_alive' | 'logger';
    zone: string;
    transmitters: string[];
    logger: string | null;
    inverter: string;
    input: number;
    units: { position: number; serial: string }[];
    /** By position − 1, as the judgement and the newest frame have them; null: none yet. */
    state: (number | null)[] | null;
    verdict: (number | null)[] | null;
    since: (number | null)[] | null;
    seen: (number | null)[] | null;
    via: (number | null)[] | null;
    gateways: Record<string, string> | null; // of its logger, by number
    finding: StringFinding | null;
    findingSinceS: number | null;
    evidence: FindingEvidence | null;
  }[];
  zones: { name: string; inForce: InForce | null }[];
  transmitters: { name: string; zone: string; inForce: InForce | null }[];
  gateways: { name: string; lastHeardS: number | null }[];
  loggers: { name: string; lastSpokeS: number | null; connected: boolean }[];
  inputs: { inverter: string; number: number; current: number | null }[]; // cA
  /** Wh that a unit makes on a middling day of the last week; null: not known. */
  unitDayWh: number | null;
}

/**
 * Every visible site (or those of the given numbers) at which any unit or string is not as it should be, in one
 * statement. Whole sites come, since an explanation rests as much on the units that are well.
 */
export async function causeSites(tx: Tx, siteIds?: readonly number[]): Promise<CauseSiteRow[]> {
  const { rows } = await tx.raw<{ rows: CauseSiteRow[] }>(
    `with concerned as materialized (
       select site.* from site
       where ${SITE_VISIBLE} ${siteIds ? 'and site.id = any (:siteIds)' : ''}
         and exists (select from string_judgement j where j.site_id = site.id
                     and (j.stuck > 0 or j.not_shutting_down > 0 or j.unconfirmed > 0 or j.silent > 0
                          or j.finding is not null))),
     said as (
       select distinct on (c.site_id, c.zone_id, c.transmitter_id) c.site_id, c.zone_id, c.transmitter_id, c.in_force
       from command c where c.site_id in (select id from concerned)
       order by c.site_id, c.zone_id, c.transmitter_id, c.since desc),
     served as materialized (
       select ts.string_id, json_agg(t.name order by t.name) as names
       from transmitter_string ts join transmitter t on t.id = ts.transmitter_id
       where ts.site_id in (select id from concerned) group by ts.string_id),
     radio as materialized (
       select logger_id, json_object_agg(number, name) as names from gateway
       where site_id in (select id from concerned) group by logger_id),
     wired as (
       select s.site_id, json_agg(json_build_object(
                'ref', s.ref, 'name', s.name, 'kind', s.kind, 'releasedBy', ut.released_by, 'zone', z.name,
                'transmitters', coalesce(served.names, '[]'), 'logger', l.serial, 'inverter', inv.name,
                'input', i.number, 'units', coalesce(placed.units, '[]'),
                'state', j.state, 'verdict', j.verdict, 'since', j.since, 'seen', st.seen, 'via', st.via,
                'gateways', radio.names, 'finding', j.finding,
                'findingSinceS', extract(epoch from j.finding_since)::int8,
                'evidence', j.evidence -> 'finding') order by s.id) as strings
       from string s
       join unit_type ut on ut.id = s.unit_type_id
       join zone z on z.id = s.zone_id
       join input i on i.id = s.input_id
       join inverter inv on inv.id = i.inverter_id
       left join logger l on l.id = s.logger_id
       left join radio on radio.logger_id = s.logger_id
       left join served on served.string_id = s.id
       left join lateral (
         select json_agg(json_build_object('position', sl.position, 'serial', u.serial) order by sl.position) as units
         from slot sl
         join placement p on p.slot_id = sl.id and p.placed_to is null
         join unit u on u.id = p.unit_id
         where sl.string_id = s.id) placed on true
       left join string_state st on st.string_id = s.id
       left join string_judgement j on j.string_id = s.id
       where s.site_id in (select id from concerned)
       group by s.site_id),
     made as (
       select d.site_id, percentile_cont(0.5) within group (order by d.energy::float8 / s.slots) as wh
       from string_day d join string s on s.id = d.string_id
       where d.site_id in (select id from concerned) and d.day >= current_date - 8 and d.energy > 0
       group by d.site_id)
     select c.ref, c.name, c.report_interval_s as "reportIntervalS", wired.strings, made.wh as "unitDayWh",
            coalesce((select json_agg(json_build_object('name', z.name, 'inForce', said.in_force))
                      from zone z left join said on said.zone_id = z.id where z.site_id = c.id), '[]') as zones,
            coalesce((select json_agg(json_build_object('name', t.name, 'zone', z.name, 'inForce', said.in_force))
                      from transmitter t join zone z on z.id = t.zone_id
                      left join said on said.transmitter_id = t.id where t.site_id = c.id), '[]') as transmitters,
            coalesce((select json_agg(json_build_object('name', g.name,
                        'lastHeardS', extract(epoch from g.last_heard_at)::int8))
                      from gateway g where g.site_id = c.id), '[]') as gateways,
            coalesce((select json_agg(json_build_object('name', l.serial, 'connected', l.connected_at is not null,
                        'lastSpokeS', extract(epoch from l.last_spoke_at)::int8))
                      from logger l where l.site_id = c.id), '[]') as loggers,
            coalesce((select json_agg(json_build_object('inverter', inv.name, 'number', i.number, 'current', ist.current))
                      from input i join inverter inv on inv.id = i.inverter_id
                      left join input_state ist on ist.input_id = i.id where i.site_id = c.id), '[]') as inputs
     from concerned c join wired on wired.site_id = c.id
     left join made on made.site_id = c.id
     order by c.name`,
    siteIds ? { siteIds: [...siteIds] } : {},
  );
  return rows;
}
