import type { UnitKind } from '../../domain/equipment/unit-type';
import { codeOf, UNIT_STATES, type InForce, type StringFinding } from '../../domain/verdicts/codes';
import type { FindingEvidence } from '../../domain/verdicts/memory';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

export interface CauseStringRow {
  id: number;
  siteId: number;
  ref: string;
  name: string;
  kind: UnitKind;
  releasedBy: 'keep_alive' | 'logger';
  zone: string;
  transmitters: string[];
  loggerId: number | null;
  logger: string | null;
  inverter: string;
  input: number;
  /** Slots that hold a unit, in order; the serials of those, or none where the string is sound. */
  positions: number[];
  serials: string[];
  /** By position − 1, as the judgement and the newest frame have them; null: none yet. Times are epoch seconds. */
  state: (number | null)[] | null;
  verdict: (number | null)[] | null;
  since: (number | null)[] | null;
  seen: (number | null)[] | null;
  via: (number | null)[] | null;
  finding: StringFinding | null;
  findingSince: Date | null;
  evidence: FindingEvidence | null;
}

/** A site with all that the search for causes looks at, as the database has it. */
export interface CauseSiteRow {
  id: number;
  ref: string;
  name: string;
  reportIntervalS: number;
  strings: CauseStringRow[];
  zones: { name: string; inForce: InForce | null }[];
  transmitters: { name: string; zone: string; inForce: InForce | null }[];
  gateways: { loggerId: number; number: number; name: string; lastHeardS: number | null }[];
  loggers: { name: string; lastSpokeS: number | null; connected: boolean }[];
  inputs: { inverter: string; number: number; current: number | null; atS: number | null }[]; // cA
  /** Wh that a unit makes on a middling day of the last week, where any may be stuck; null: not known, or not asked for. */
  unitDayWh: number | null;
}

/**
 * Every site that the actor sees, or those of the given numbers (then whoever calls has checked them), at which any unit
 * or string is not as it should be. Whole sites come, since an explanation rests as much on the units that are well.
 * Three plain statements at most, joined here: one large one went astray whenever statistics were old. Serials come with
 * strings at which something is amiss; of the others a search for causes needs only which slots hold a unit.
 *
 * @param also `sound`: sites too at which all is well, and serials of all strings
 */
export async function causeSites(
  tx: Tx,
  siteIds?: readonly number[],
  also: { sound?: boolean } = {},
): Promise<CauseSiteRow[]> {
  const sites = await concernedSites(tx, siteIds, also.sound ?? false);
  if (sites.length === 0) return [];
  const ids = sites.map((s) => s.id);
  const found = await stringsOf(tx, ids);
  const amiss = found.filter((s) => also.sound || !isSound(s)).map((s) => s.id);
  const units = await unitsOf(tx, amiss);
  const judged = also.sound ? () => NO_UNITS : judgedUnits;
  const strings = new Map<number, CauseStringRow[]>(ids.map((id) => [id, []]));
  for (const row of found) strings.get(row.siteId)?.push({ ...row, ...(units.get(row.id) ?? judged(row)) });
  return sites.map((site) => ({ ...site, strings: strings.get(site.id) ?? [] }));
}

interface Units {
  positions: number[];
  serials: string[];
}
const NO_UNITS: Units = { positions: [], serials: [] };
const SILENT = codeOf(UNIT_STATES, 'silent');

/** Whether every unit of a string tells of itself, and nothing of it is amiss. */
const isSound = (s: Pick<CauseStringRow, 'kind' | 'state' | 'verdict' | 'finding'>): boolean =>
  s.kind !== 'shutdown_only' &&
  s.finding === null &&
  s.state !== null &&
  !s.state.includes(SILENT) &&
  (s.verdict ?? []).every((v) => v === null || v === 0);

/** Slots of a judged string that hold a unit: the others have no state. */
const judgedUnits = (s: Pick<CauseStringRow, 'state'>): Units => ({
  positions: (s.state ?? []).flatMap((state, i) => (state === null ? [] : [i + 1])),
  serials: [],
});

async function concernedSites(
  tx: Tx,
  siteIds: readonly number[] | undefined,
  sound: boolean,
): Promise<Omit<CauseSiteRow, 'strings'>[]> {
  const { rows } = await tx.raw<{ rows: Omit<CauseSiteRow, 'strings'>[] }>(
    `with concerned as materialized (
       select site.id, site.ref, site.name, site.report_interval_s,
              exists (select from string_judgement j where j.site_id = site.id
                      and (j.stuck > 0 or j.finding is not null)) as stuck
       from site
       where ${siteIds ? 'site.id = any (:siteIds)' : SITE_VISIBLE}
         and (${sound} or exists (select from string_judgement j where j.site_id = site.id
                     and (j.stuck > 0 or j.not_shutting_down > 0 or j.unconfirmed > 0 or j.silent > 0
                          or j.finding is not null))))
     select c.id, c.ref, c.name, c.report_interval_s as "reportIntervalS",
            case when c.stuck then
              (select percentile_cont(0.5) within group (order by d.energy::float8 / s.slots)
               from string_day d join string s on s.id = d.string_id
               where d.site_id = c.id and d.day >= current_date - 8 and d.energy > 0) end as "unitDayWh",
            coalesce((select json_agg(json_build_object('name', z.name, 'inForce',
                        (select in_force from command where site_id = c.id and zone_id = z.id order by since desc limit 1)))
                      from zone z where z.site_id = c.id), '[]') as zones,
            coalesce((select json_agg(json_build_object('name', t.name, 'zone', z.name, 'inForce',
                        (select in_force from command where site_id = c.id and transmitter_id = t.id
                         order by since desc limit 1)))
                      from transmitter t join zone z on z.id = t.zone_id where t.site_id = c.id), '[]') as transmitters,
            coalesce((select json_agg(json_build_object('loggerId', g.logger_id, 'number', g.number, 'name', g.name,
                        'lastHeardS', extract(epoch from g.last_heard_at)::int8))
                      from gateway g where g.site_id = c.id), '[]') as gateways,
            coalesce((select json_agg(json_build_object('name', l.serial, 'connected', l.connected_at is not null,
                        'lastSpokeS', extract(epoch from l.last_spoke_at)::int8))
                      from logger l where l.site_id = c.id), '[]') as loggers,
            coalesce((select json_agg(json_build_object('inverter', inv.name, 'number', i.number, 'current', ist.current,
                        'atS', extract(epoch from ist.at)))
                      from input i join inverter inv on inv.id = i.inverter_id
                      left join input_state ist on ist.input_id = i.id where i.site_id = c.id), '[]') as inputs
     from concerned c
     order by c.name`,
    siteIds ? { siteIds: [...siteIds] } : {},
  );
  return rows;
}

async function stringsOf(
  tx: Tx,
  siteIds: readonly number[],
): Promise<Omit<CauseStringRow, 'positions' | 'serials'>[]> {
  const { rows } = await tx.raw<{ rows: Omit<CauseStringRow, 'positions' | 'serials'>[] }>(
    `select s.id, s.site_id as "siteId", s.ref, s.name, s.kind, ut.released_by as "releasedBy", z.name as zone,
            coalesce((select array_agg(t.name order by t.name) from transmitter_string ts
                      join transmitter t on t.id = ts.transmitter_id where ts.string_id = s.id), '{}') as transmitters,
            s.logger_id as "loggerId", l.serial as logger, inv.name as inverter, i.number as input,
            j.state, j.verdict, j.since, st.seen, st.via, j.finding, j.finding_since as "findingSince",
            j.evidence -> 'finding' as evidence
     from string s
     join unit_type ut on ut.id = s.unit_type_id
     join zone z on z.id = s.zone_id
     join input i on i.id = s.input_id
     join inverter inv on inv.id = i.inverter_id
     left join logger l on l.id = s.logger_id
     left join string_state st on st.string_id = s.id
     left join string_judgement j on j.string_id = s.id
     where s.site_id = any (:siteIds)
     order by s.id`,
    { siteIds: [...siteIds] },
  );
  return rows;
}

async function unitsOf(tx: Tx, stringIds: readonly number[]): Promise<Map<number, Units>> {
  if (stringIds.length === 0) return new Map();
  const { rows } = await tx.raw<{ rows: (Units & { stringId: number })[] }>(
    `select sl.string_id as "stringId", array_agg(sl.position order by sl.position) as positions,
            array_agg(u.serial order by sl.position) as serials
     from slot sl
     join placement p on p.slot_id = sl.id and p.placed_to is null
     join unit u on u.id = p.unit_id
     where sl.string_id = any (:stringIds)
     group by sl.string_id`,
    { stringIds: [...stringIds] },
  );
  return new Map(rows.map(({ stringId, ...units }) => [stringId, units]));
}
