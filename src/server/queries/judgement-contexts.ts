import type { Knex } from 'knex';
import type { InForce } from '../../domain/verdicts/codes';
import type { CommandPoint, RuleSet, UnitBehaviour } from '../../domain/verdicts/context';

/** What judgement rests on besides frames: the plant of a site and what it was told. */

export interface JudgedString {
  id: number;
  name: string;
  kind: UnitBehaviour['kind'];
  zoneId: number;
  loggerId: number | null;
  inputId: number;
  unitTypeId: number;
  transmitterIds: number[];
  /** In slot order; null: no unit there. */
  serials: (string | null)[];
  /** Epoch seconds; 0: not yet heard. */
  heardAtS: number[];
  /** Since when each slot's unit sits there, epoch seconds; 0: no unit there. */
  placedAtS: number[];
  /** The newest of them. */
  newestPlacedS: number;
}

export interface JudgedSite {
  id: number;
  organisationId: number;
  latitude: number;
  longitude: number;
  altitude: number;
  stage: 'commissioning' | 'operating';
  ruleSet: RuleSet;
  reportIntervalS: number;
  /** As kept with the organisation: domain/settings/thresholds reads it. */
  thresholds: unknown;
  behaviours: Map<number, UnitBehaviour>;
  zones: Map<number, CommandPoint[]>;
  transmitters: Map<number, { zoneId: number; own: CommandPoint[] }>;
  strings: JudgedString[];
}

/** Commands older than this matter only as the last one before. */
const COMMANDS_DAYS = 8;

export async function judgedSite(db: Knex, siteId: number): Promise<JudgedSite | undefined> {
  const sites = await db.raw<{
    rows: Omit<JudgedSite, 'behaviours' | 'zones' | 'transmitters' | 'strings'>[];
  }>(
    `select id, organisation_id as "organisationId", latitude, longitude, altitude, stage, rule_set as "ruleSet",
       report_interval_s as "reportIntervalS",
       (select o.thresholds from organisation o where o.id = site.organisation_id) as thresholds
     from site where id = ?`,
    [siteId],
  );
  const site = sites.rows[0];
  if (!site) return undefined;
  const strings = await db.raw<{ rows: Omit<JudgedString, 'newestPlacedS'>[] }>(
    `with s as (select * from string where site_id = :siteId),
     placed as (
       select slot.string_id, slot.position, u.serial, extract(epoch from h.first_heard_at)::int4 as heard,
         ceil(extract(epoch from p.placed_from))::int4 as since
       from slot join placement p on p.slot_id = slot.id and p.placed_to is null join unit u on u.id = p.unit_id
         left join heard h on h.site_id = slot.site_id and h.serial = u.serial
       where slot.site_id = :siteId)
     select s.id, s.name, s.kind, s.zone_id as "zoneId", s.logger_id as "loggerId", s.input_id as "inputId",
       s.unit_type_id as "unitTypeId",
       coalesce((select array_agg(transmitter_id) from transmitter_string t where t.string_id = s.id), '{}') as "transmitterIds",
       (select array_agg(placed.serial order by n) from generate_series(1, s.slots) n
          left join placed on placed.string_id = s.id and placed.position = n) as serials,
       (select array_agg(coalesce(placed.heard, 0) order by n) from generate_series(1, s.slots) n
          left join placed on placed.string_id = s.id and placed.position = n) as "heardAtS",
       (select array_agg(coalesce(placed.since, 0) order by n) from generate_series(1, s.slots) n
          left join placed on placed.string_id = s.id and placed.position = n) as "placedAtS"
     from s order by s.id`,
    { siteId },
  );
  const types = await db.raw<{
    rows: ({ id: number; nominal: number; min: number; max: number } & UnitBehaviour)[];
  }>(
    `select id, kind, out_of_box as "outOfBox", released_by as "releasedBy", on_command_loss as "onCommandLoss",
       command_loss_after_s as "commandLossAfterS", shutdown_voltage_nominal as nominal, shutdown_voltage_min as min,
       shutdown_voltage_max as max, bypass_voltage as "bypassVoltage", measures, voltage_accuracy as "voltageAccuracy"
     from unit_type where id in (select unit_type_id from string where site_id = ?)`,
    [siteId],
  );
  const parts = await db.raw<{ rows: { zoneId: number; transmitterId: number | null }[] }>(
    `select id as "zoneId", null::int4 as "transmitterId" from zone where site_id = :siteId
     union all select zone_id, id from transmitter where site_id = :siteId`,
    { siteId },
  );
  const said = await db.raw<{
    rows: { zoneId: number | null; transmitterId: number | null; inForce: InForce; sinceS: number }[];
  }>(
    `select zone_id as "zoneId", transmitter_id as "transmitterId", in_force as "inForce", extract(epoch from since)::int4 as "sinceS"
     from (select *, lead(since) over (partition by zone_id, transmitter_id order by since) as until
           from command where site_id = ?) c
     where until is null or until > now() - make_interval(days => ?) order by since`,
    [siteId, COMMANDS_DAYS],
  );
  const zones = new Map<number, CommandPoint[]>();
  const transmitters = new Map<number, { zoneId: number; own: CommandPoint[] }>();
  for (const { zoneId, transmitterId } of parts.rows)
    if (transmitterId === null) zones.set(zoneId, []);
    else transmitters.set(transmitterId, { zoneId, own: [] });
  for (const { zoneId, transmitterId, inForce, sinceS } of said.rows) {
    if (zoneId !== null) zones.get(zoneId)?.push({ inForce, sinceS });
    else if (transmitterId !== null) transmitters.get(transmitterId)?.own.push({ inForce, sinceS });
  }
  return {
    ...site,
    strings: strings.rows.map((s) => ({ ...s, newestPlacedS: Math.max(0, ...s.placedAtS) })),
    behaviours: new Map(
      types.rows.map(({ id, nominal, min, max, ...type }) => [
        id,
        { ...type, shutdownVoltage: { nominal, min, max } },
      ]),
    ),
    zones,
    transmitters,
  };
}
