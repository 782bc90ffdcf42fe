import type { NamedKind, PartKind } from '../../domain/commissioning/as-built/parts';
import type { Tx } from '../db/transaction';

/** Writing the parts of a site. Whoever calls holds the site's as-built lock and has checked the values. */

const OF_ORGANISATION: readonly NamedKind[] = ['unit_type', 'module_type', 'inverter_type'];

/** The database's numbers of what public identifiers name, at this site and in the organisation's catalogue. */
export async function numbersOf(
  tx: Tx,
  where: { siteId: number; organisationId: number },
  named: readonly { of: NamedKind; id: string }[],
): Promise<Map<string, number>> {
  const kinds = [...new Set(named.map((n) => n.of))];
  if (kinds.length === 0) return new Map();
  const { rows } = await tx.raw<{ rows: { ref: string; id: number }[] }>(
    kinds
      .map((kind) =>
        OF_ORGANISATION.includes(kind)
          ? `select ref, id from ${kind} where organisation_id = :organisationId and ref = any (:refs::uuid[])`
          : `select ref, id from ${kind} where site_id = :siteId and ref = any (:refs::uuid[])`,
      )
      .join(' union all '),
    { ...where, refs: [...new Set(named.map((n) => n.id))] },
  );
  return new Map(rows.map((r) => [r.ref, r.id]));
}

export async function insertPart(
  tx: Tx,
  kind: PartKind,
  columns: Record<string, unknown>,
): Promise<{ id: number; ref: string }> {
  const [row] = await tx(kind).insert(columns).returning<{ id: number; ref: string }[]>(['id', 'ref']);
  if (!row) throw new Error(`the ${kind} was not written`);
  return row;
}

export async function updatePart(
  tx: Tx,
  kind: PartKind,
  id: number,
  columns: Record<string, unknown>,
): Promise<void> {
  if (Object.keys(columns).length > 0) await tx(kind).where('id', id).update(columns);
}

export async function partNumber(
  tx: Tx,
  kind: PartKind,
  siteId: number,
  ref: string,
): Promise<number | undefined> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `select id from ${kind} where ref = ? and ${kind === 'site' ? 'id' : 'site_id'} = ?`,
    [ref, siteId],
  );
  return rows[0]?.id;
}

/** Deletes a part with what belongs to it alone: an inverter's inputs, a string's slots and their past units. */
export async function deletePart(tx: Tx, kind: PartKind, id: number): Promise<void> {
  if (kind === 'inverter') await tx.raw('delete from input where inverter_id = ?', [id]);
  if (kind === 'string') {
    await tx.raw(
      'delete from placement where slot_id in (select slot.id from slot where slot.string_id = ?)',
      [id],
    );
    await tx.raw('delete from slot where string_id = ?', [id]);
    await tx.raw('delete from transmitter_string where string_id = ?', [id]);
  }
  await tx(kind).where('id', id).delete();
}

/** Makes the inputs 1 … n of an inverter, and takes those above away. */
export async function setInputs(tx: Tx, siteId: number, inverterId: number, inputs: number): Promise<void> {
  await tx.raw('delete from input where inverter_id = ? and number > ?', [inverterId, inputs]);
  await tx.raw(
    `insert into input (site_id, inverter_id, number) select ?, ?, n from generate_series(1, ?::int4) n
     on conflict (inverter_id, number) do nothing`,
    [siteId, inverterId, inputs],
  );
}

/** Inputs above `inputs` that strings are on or that have reported. */
export async function inputsInUse(
  tx: Tx,
  inverterId: number,
  inputs: number,
): Promise<{ number: number; strings: string[]; reported: boolean }[]> {
  const { rows } = await tx.raw<{ rows: { number: number; strings: string[]; reported: boolean }[] }>(
    `select i.number, coalesce(array_agg(s.name order by s.name) filter (where s.id is not null), '{}') as strings,
            exists (select from input_state x where x.input_id = i.id) as reported
     from input i left join string s on s.input_id = i.id
     where i.inverter_id = ? and i.number > ?
     group by i.id, i.number
     having count(s.id) > 0 or exists (select from input_state x where x.input_id = i.id) order by i.number`,
    [inverterId, inputs],
  );
  return rows;
}

/** Which transmitters a string hears, or which strings a transmitter serves. */
export async function setServed(
  tx: Tx,
  siteId: number,
  one: { transmitterId: number } | { stringId: number },
  others: readonly number[],
): Promise<void> {
  const [own, other, id] =
    'transmitterId' in one
      ? (['transmitter_id', 'string_id', one.transmitterId] as const)
      : (['string_id', 'transmitter_id', one.stringId] as const);
  await tx.raw(`delete from transmitter_string where ${own} = ? and ${other} <> all (?::int4[])`, [
    id,
    [...others],
  ]);
  await tx.raw(
    `insert into transmitter_string (${own}, ${other}, site_id) select ?, x, ? from unnest(?::int4[]) x
     on conflict do nothing`,
    [id, siteId, [...others]],
  );
}

export interface StringRow {
  name: string;
  planeId: number;
  inputId: number;
  zoneId: number;
  loggerId: number | null;
  unitTypeId: number;
  moduleTypeId: number;
  slots: number;
  cableResistance: number;
  homeRunLeavesArray: boolean;
  transmitterIds: number[];
}

/** New strings with empty slots; each gets the next place in its logger's roster. In the order given. */
export async function insertStrings(
  tx: Tx,
  siteId: number,
  strings: readonly StringRow[],
): Promise<{ id: number; ref: string; name: string }[]> {
  const { rows } = await tx.raw<{ rows: { id: number; ref: string; name: string }[] }>(
    `with x as materialized (
       select * from rows from (jsonb_to_recordset(:strings::jsonb) as ("name" text, "planeId" int4, "inputId" int4,
           "zoneId" int4, "loggerId" int4, "unitTypeId" int4, "moduleTypeId" int4, slots int2, "cableResistance" real,
           "homeRunLeavesArray" boolean, "transmitterIds" int4[]))
         with ordinality as x(name, plane, input, zone, logger, unit_type, module_type, slots, resistance, leaves, transmitters, n)),
     made as (
       insert into string (site_id, name, plane_id, input_id, zone_id, logger_id, roster_index, unit_type_id, kind, slots,
         cable_resistance, home_run_leaves_array)
       select :siteId, x.name, x.plane, x.input, x.zone, x.logger,
         case when x.logger is not null then
           coalesce((select max(s.roster_index) from string s where s.logger_id = x.logger), -1)
             + row_number() over (partition by x.logger order by x.n) end,
         x.unit_type, t.kind, x.slots, x.resistance, x.leaves
       from x join unit_type t on t.id = x.unit_type order by x.n
       returning id, ref, name),
     slots as (
       insert into slot (site_id, string_id, position, module_type_id)
       select :siteId, made.id, p, x.module_type from made join x on x.name = made.name
         cross join lateral generate_series(1, x.slots) p order by x.n, p),
     served as (
       insert into transmitter_string (transmitter_id, string_id, site_id)
       select t, made.id, :siteId from made join x on x.name = made.name cross join lateral unnest(x.transmitters) t)
     select made.id, made.ref, made.name from made join x on x.name = made.name order by x.n`,
    { siteId, strings: JSON.stringify(strings) },
  );
  return rows;
}

/** Puts a string under a logger, at the end of its roster; null: under none. */
export async function setLogger(tx: Tx, stringId: number, loggerId: number | null): Promise<void> {
  await tx.raw(
    `update string set logger_id = :loggerId,
       roster_index = case when :loggerId::int4 is null then null
         else coalesce((select max(s.roster_index) from string s where s.logger_id = :loggerId::int4), -1) + 1 end
     where id = :stringId`,
    { stringId, loggerId },
  );
}

/** A string's unit type, with the kind that goes with it, for the units in it too. */
export async function setUnitType(tx: Tx, stringId: number, unitTypeId: number): Promise<void> {
  await tx.raw(
    `update string set unit_type_id = t.id, kind = t.kind from unit_type t where t.id = ? and string.id = ?`,
    [unitTypeId, stringId],
  );
  await tx.raw(
    `update unit set unit_type_id = ? where id in (
       select p.unit_id from placement p join slot on slot.id = p.slot_id
       where slot.string_id = ? and p.placed_to is null)`,
    [unitTypeId, stringId],
  );
}

/** Slots that a string would lose and that may not go: a unit sits there, or has reported from there. */
export async function slotsInUse(
  tx: Tx,
  counts: readonly { stringId: number; slots: number }[],
): Promise<{ stringId: number; position: number; serial: string | null }[]> {
  const { rows } = await tx.raw<{ rows: { stringId: number; position: number; serial: string | null }[] }>(
    `select slot.string_id as "stringId", slot.position, u.serial
     from unnest(?::int4[], ?::int4[]) x(string_id, slots)
     join slot on slot.string_id = x.string_id and slot.position > x.slots
     left join placement p on p.slot_id = slot.id and p.placed_to is null
     left join unit u on u.id = p.unit_id
     left join string_state st on st.string_id = slot.string_id
     where u.id is not null or coalesce(st.seen[slot.position], 0) > 0
     order by slot.string_id, slot.position`,
    [counts.map((c) => c.stringId), counts.map((c) => c.slots)],
  );
  return rows;
}

/** Gives strings so many slots; new ones get a module type, those above go with their past. */
export async function setSlots(
  tx: Tx,
  siteId: number,
  counts: readonly { stringId: number; slots: number; moduleTypeId: number }[],
): Promise<void> {
  const args = [counts.map((c) => c.stringId), counts.map((c) => c.slots)];
  const above = `select slot.id from unnest(?::int4[], ?::int4[]) x(string_id, slots)
    join slot on slot.string_id = x.string_id and slot.position > x.slots`;
  await tx.raw(`delete from placement where slot_id in (${above})`, args);
  await tx.raw(`delete from slot where id in (${above})`, args);
  await tx.raw(
    `insert into slot (site_id, string_id, position, module_type_id)
     select ?, x.string_id, n, x.module_type from unnest(?::int4[], ?::int4[], ?::int4[]) x(string_id, slots, module_type)
       cross join lateral generate_series(1, x.slots) n
     on conflict (string_id, position) do nothing`,
    [siteId, ...args, counts.map((c) => c.moduleTypeId)],
  );
  await tx.raw(
    `update string set slots = x.slots from unnest(?::int4[], ?::int4[]) x(string_id, slots) where string.id = x.string_id`,
    args,
  );
}

export interface SlotFactsRow {
  string: string;
  position: number;
  moduleTypeId?: number | undefined;
  roofPlace?: string | undefined;
  /** m; null: not known. */
  roofX?: number | null | undefined;
  roofY?: number | null | undefined;
}
export interface SlotFacts {
  stringId: number;
  stringName: string;
  string: string;
  position: number;
  moduleTypeId: number;
  moduleType: string;
  roofPlace: string;
  roofX: number | null;
  roofY: number | null;
}

/** What is written down of these slots now. */
export async function slotFacts(
  tx: Tx,
  siteId: number,
  slots: readonly { string: string; position: number }[],
): Promise<SlotFacts[]> {
  const { rows } = await tx.raw<{ rows: SlotFacts[] }>(
    `select s.id as "stringId", s.name as "stringName", s.ref as string, slot.position,
            slot.module_type_id as "moduleTypeId", m.name as "moduleType", slot.roof_place as "roofPlace",
            slot.roof_x as "roofX", slot.roof_y as "roofY"
     from unnest(?::uuid[], ?::int4[]) w(string, position)
     join string s on s.ref = w.string and s.site_id = ?
     join slot on slot.string_id = s.id and slot.position = w.position
     join module_type m on m.id = slot.module_type_id`,
    [slots.map((s) => s.string), slots.map((s) => s.position), siteId],
  );
  return rows;
}

/** Writes facts of slots: only what a row names. */
export async function updateSlotFacts(tx: Tx, siteId: number, rows: readonly SlotFactsRow[]): Promise<void> {
  await tx.raw(
    `update slot set
       module_type_id = coalesce((x.row ->> 'moduleTypeId')::int4, slot.module_type_id),
       roof_place = coalesce(x.row ->> 'roofPlace', slot.roof_place),
       roof_x = case when jsonb_exists(x.row, 'roofX') then (x.row ->> 'roofX')::real else slot.roof_x end,
       roof_y = case when jsonb_exists(x.row, 'roofY') then (x.row ->> 'roofY')::real else slot.roof_y end
     from jsonb_array_elements(?::jsonb) x(row) join string s on s.ref = (x.row ->> 'string')::uuid and s.site_id = ?
     where slot.string_id = s.id and slot.position = (x.row ->> 'position')::int2`,
    [JSON.stringify(rows), siteId],
  );
}

/** Has the database check now what it else checks when the transaction ends. */
export const checkNow = (tx: Tx): Promise<unknown> => tx.raw('set constraints all immediate');

/** A new site's row, in the stage that every site begins in. */
export function insertSite(
  tx: Tx,
  organisationId: number,
  v: Readonly<Record<string, unknown>>,
): Promise<{ id: number; ref: string }> {
  return insertPart(tx, 'site', {
    organisation_id: organisationId,
    name: v.name,
    place: v.place,
    latitude: v.latitude,
    longitude: v.longitude,
    altitude: v.altitude,
    time_zone: v.timeZone,
    rule_set: v.ruleSet,
    structure: v.structure,
    report_interval_s: v.reportIntervalS,
    temperature_min: v.temperatureMin,
    temperature_max: v.temperatureMax,
    shutdown_switch_place: v.shutdownSwitchPlace,
    contact_name: v.contactName,
    contact_phone: v.contactPhone,
  });
}
