import type { Knex } from 'knex';
import { z } from 'zod';
import { UNIT_KINDS } from '../../domain/equipment/unit-type';
import { roster, type Roster } from '../../schemas/ingest';
import { inputKey, type RosterView } from './ingest-rows';

/**
 * The roster of a logger, made from the as-built and kept by version: a report is read by the roster that it was
 * written under. Beside the message the database's own numbers are kept, as they were when it was made.
 */
const stored = z.object({
  message: roster.omit({ version: true }),
  strings: z.array(
    z.object({
      index: z.int(),
      stringId: z.int(),
      name: z.string(),
      kind: z.enum(UNIT_KINDS),
      measures: z.enum(['none', 'input', 'output', 'both']),
      placed: z.array(z.boolean()),
    }),
  ),
  inputs: z.array(z.object({ inverter: z.string(), input: z.int(), id: z.int() })),
  inverters: z.array(z.object({ name: z.string(), id: z.int() })),
  sensors: z.array(z.object({ number: z.int(), id: z.int() })),
  zones: z.array(z.object({ name: z.string(), id: z.int() })),
  transmitters: z.array(z.object({ name: z.string(), id: z.int() })),
});
type Stored = z.infer<typeof stored>;

/** The as-built of a logger in one document; the order of everything is fixed, so that equal plants compare equal. */
const AS_BUILT = `
with l as (select l.id, l.site_id, s.report_interval_s from logger l join site s on s.id = l.site_id where l.id = ?),
st as (
  select st.id, st.roster_index as index, st.name, st.kind, ut.measures, z.name as zone, v.name as inverter, i.number as input,
    (select json_agg(u.serial order by n) from generate_series(1, st.slots) n
       left join slot on slot.string_id = st.id and slot.position = n
       left join placement p on p.slot_id = slot.id and p.placed_to is null
       left join unit u on u.id = p.unit_id) as serials
  from l join string st on st.logger_id = l.id and st.roster_index is not null
    join unit_type ut on ut.id = st.unit_type_id join zone z on z.id = st.zone_id
    join input i on i.id = st.input_id join inverter v on v.id = i.inverter_id),
inp as (select i.id, i.number, v.name from l join inverter v on v.site_id = l.site_id join input i on i.inverter_id = v.id)
select json_build_object(
  'reportIntervalS', (select report_interval_s from l),
  'strings', coalesce((select json_agg(to_json(st) order by index) from st), '[]'),
  'inputs', coalesce((select json_agg(json_build_object('inverter', name, 'input', number, 'id', id) order by name, number) from inp), '[]'),
  'inverters', coalesce((select json_agg(json_build_object('name', v.name, 'id', v.id) order by v.name) from l join inverter v on v.site_id = l.site_id), '[]'),
  'gateways', coalesce((select json_agg(json_build_object('number', g.number, 'name', g.name) order by g.number) from l join gateway g on g.logger_id = l.id), '[]'),
  'sensors', coalesce((select json_agg(json_build_object('number', n.number, 'kind', n.kind, 'id', n.id) order by n.number) from l join sensor n on n.logger_id = l.id), '[]'),
  'zones', coalesce((select json_agg(json_build_object('name', z.name, 'id', z.id) order by z.name) from l join zone z on z.site_id = l.site_id), '[]'),
  'transmitters', coalesce((select json_agg(json_build_object('name', t.name, 'id', t.id) order by t.name) from l join transmitter t on t.site_id = l.site_id), '[]')
) as built`;

const named = z.object({ name: z.string(), id: z.int() });
const asBuilt = z.object({
  reportIntervalS: z.int(),
  strings: z.array(
    z.object({
      id: z.int(),
      index: z.int(),
      name: z.string(),
      kind: z.enum(UNIT_KINDS),
      measures: z.enum(['none', 'input', 'output', 'both']),
      zone: z.string(),
      inverter: z.string(),
      input: z.int(),
      serials: z.array(z.string().nullable()),
    }),
  ),
  inputs: z.array(z.object({ inverter: z.string(), input: z.int(), id: z.int() })),
  inverters: z.array(named),
  gateways: z.array(z.object({ number: z.int(), name: z.string() })),
  sensors: z.array(z.object({ number: z.int(), kind: z.string(), id: z.int() })),
  zones: z.array(named),
  transmitters: z.array(named),
});

function toStored(built: z.infer<typeof asBuilt>): Stored {
  return {
    message: {
      type: 'roster',
      reportIntervalS: built.reportIntervalS,
      strings: built.strings.map((s) => ({
        index: s.index,
        name: s.name,
        kind: s.kind,
        zone: s.zone,
        inverter: s.inverter,
        input: s.input,
        serials: s.serials,
      })),
      inverters: built.inverters.map((v) => ({
        name: v.name,
        inputs: built.inputs.filter((i) => i.inverter === v.name).map((i) => i.input),
      })),
      gateways: built.gateways,
      sensors: built.sensors.map(({ number, kind }) => ({ number, kind })),
      zones: built.zones.map((z) => z.name),
      transmitters: built.transmitters.map((t) => t.name),
    },
    strings: built.strings.map((s) => ({
      index: s.index,
      stringId: s.id,
      name: s.name,
      kind: s.kind,
      measures: s.measures,
      placed: s.serials.map((serial) => serial !== null),
    })),
    inputs: built.inputs,
    inverters: built.inverters,
    sensors: built.sensors.map(({ number, id }) => ({ number, id })),
    zones: built.zones,
    transmitters: built.transmitters,
  };
}

function toView(version: number, siteId: number, kept: Stored): RosterView {
  return {
    version,
    strings: new Map(kept.strings.map((s) => [s.index, { ...s, siteId }])),
    inputs: new Map(kept.inputs.map((i) => [inputKey(i.inverter, i.input), i.id])),
    inverters: new Map(kept.inverters.map((i) => [i.name, i.id])),
    sensors: new Map(kept.sensors.map((s) => [s.number, s.id])),
    zones: new Map(kept.zones.map((z) => [z.name, z.id])),
    transmitters: new Map(kept.transmitters.map((t) => [t.name, t.id])),
  };
}

/** Learned gateways are no change of the as-built: they come with the next roster, and make none by themselves. */
const comparable = (kept: Stored): string =>
  JSON.stringify({ ...kept, message: { ...kept.message, gateways: [] } });

/**
 * The roster of a logger as the as-built stands now; a new version is kept when it differs from the last one.
 * `changed` says that it did.
 */
export async function currentRoster(
  db: Knex,
  logger: { id: number; siteId: number },
): Promise<{ message: Roster; view: RosterView; changed: boolean }> {
  return db.transaction(async (tx) => {
    // two connections of one logger must not both make version n + 1; the row lock of the lease is another matter
    await tx.raw('select pg_advisory_xact_lock(727003, ?)', [logger.id]);
    const [{ rows: built }, { rows: last }] = [
      await tx.raw<{ rows: { built: unknown }[] }>(AS_BUILT, [logger.id]),
      await tx.raw<{ rows: { version: number; roster: unknown }[] }>(
        'select version, roster from roster_version where logger_id = ? order by version desc limit 1',
        [logger.id],
      ),
    ];
    // through the schema once more: equal content then has equal key order
    const now = stored.parse(toStored(asBuilt.parse(built[0]?.built)));
    const before = last[0] && { version: last[0].version, kept: stored.parse(last[0].roster) };
    const same = before !== undefined && comparable(before.kept) === comparable(now);
    const version = same ? before.version : (before?.version ?? 0) + 1;
    if (!same)
      await tx.raw('insert into roster_version (site_id, logger_id, version, roster) values (?, ?, ?, ?)', [
        logger.siteId,
        logger.id,
        version,
        JSON.stringify(now),
      ]);
    if (!same && before)
      await tx.raw(
        `insert into event (at, organisation_id, site_id, kind, detail)
         select now(), organisation_id, id, 'roster_changed', jsonb_build_object('version', ?::int4) from site where id = ?`,
        [version, logger.siteId],
      );
    return {
      message: { ...now.message, version },
      view: toView(version, logger.siteId, now),
      changed: !same,
    };
  });
}

/** An earlier version; undefined where the logger never had it. */
export async function rosterVersion(
  db: Knex,
  logger: { id: number; siteId: number },
  version: number,
): Promise<RosterView | undefined> {
  const { rows } = await db.raw<{ rows: { roster: unknown }[] }>(
    'select roster from roster_version where logger_id = ? and version = ?',
    [logger.id, version],
  );
  return rows[0] && toView(version, logger.siteId, stored.parse(rows[0].roster));
}
