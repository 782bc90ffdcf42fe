import type { LoopReading } from '../../domain/output/loop-samples';
import type { UnitType } from '../../domain/equipment/unit-type';
import type { Tx } from '../db/transaction';
import { anyString, framesOf, SPAN } from './frames';

/** What the night's judgements read of a site. Instants are epoch seconds; spans include `from` and exclude `to`. */

export interface Span {
  from: Date;
  to: Date;
}

export interface OutputString {
  id: number;
  ref: string;
  name: string;
  planeId: number;
  inverterId: number;
  inputId: number;
  zoneId: number;
  transmitterIds: number[];
  kind: UnitType['kind'];
  measures: UnitType['measures'];
  unitTypeId: number;
  slots: number;
  /** In slot order, since when each slot's unit sits there, epoch s; null: no unit. */
  placedS: (number | null)[];
  serials: (string | null)[];
  cableOhm: number;
  /** W at STC of all its modules; of the first module's type the rest. */
  powerRef: number;
  gammaPmp: number;
  bypassGroups: number;
}

export async function outputStrings(tx: Tx, siteId: number): Promise<OutputString[]> {
  const { rows } = await tx.raw<{ rows: OutputString[] }>(
    `select s.id, s.ref, s.name, s.plane_id as "planeId", i.inverter_id as "inverterId", s.input_id as "inputId",
            s.zone_id as "zoneId", s.kind, ut.measures, s.unit_type_id as "unitTypeId", s.slots,
            coalesce((select array_agg(transmitter_id) from transmitter_string t where t.string_id = s.id), '{}') as "transmitterIds",
            s.cable_resistance::float8 as "cableOhm", x.power as "powerRef", x.gamma as "gammaPmp", x.groups as "bypassGroups",
            x.placed as "placedS", x.serials
     from string s join input i on i.id = s.input_id join unit_type ut on ut.id = s.unit_type_id
     cross join lateral (
       select sum(m.vmp_ref::float8 * m.imp_ref) as power, avg(m.gamma_pmp)::float8 as gamma, min(m.bypass_groups)::int4 as groups,
              array_agg(extract(epoch from p.placed_from)::float8 order by sl.position) as placed,
              array_agg(u.serial order by sl.position) as serials
       from slot sl join module_type m on m.id = sl.module_type_id
       left join placement p on p.slot_id = sl.id and p.placed_to is null left join unit u on u.id = p.unit_id
       where sl.string_id = s.id) x
     where s.site_id = ? and x.power > 0 order by s.id`,
    [siteId],
  );
  return rows;
}

export interface QuarterRow {
  atS: number;
  stringId: number;
  frames: number;
  /** dW·min */
  energy: number;
  /** cV, of the string. */
  voltageAvg: number;
  /** cV, mA, in slot order; null: single units were not kept. */
  voltage: (number | null)[] | null;
  current: (number | null)[] | null;
}

export async function stringQuarters(
  tx: Tx,
  stringIds: readonly number[],
  span: Span,
): Promise<QuarterRow[]> {
  const { rows } = await tx.raw<{ rows: QuarterRow[] }>(
    `select extract(epoch from at)::float8 as "atS", string_id as "stringId", frames, energy,
            voltage_avg as "voltageAvg", unit_voltage as voltage,
            unit_current as current
     from string_quarter where string_id = any (:ids::int4[]) and at >= :from and at < :to`,
    { ids: [...stringIds], ...span },
  );
  return rows;
}

/** Voltages of the module side, cV by unit, over quarters: what optimizing units don't move. */
export async function quartersIn(
  tx: Tx,
  stringIds: readonly number[],
  span: Span,
): Promise<{ atS: number; stringId: number; voltage: (number | null)[] }[]> {
  const { rows } = await tx.raw<{ rows: { atS: number; stringId: number; voltage: (number | null)[] }[] }>(
    `select extract(epoch from at)::float8 as "atS", string_id as "stringId", array_agg(v::float8 order by o) as voltage
     from (select date_bin('15 min', f.at, '2000-01-01Z') as at, f.string_id, u.o, avg(u.v) as v
           from ${framesOf({ columns: ['voltage_in'], strings: anyString, ...SPAN })} f
             cross join lateral unnest(f.voltage_in) with ordinality u(v, o) group by 1, 2, 3) q
     group by at, string_id`,
    { ids: [...stringIds], ...span },
  );
  return rows;
}

/** Of inverter inputs, over quarters: V, A, and how many reports. */
export async function inputQuarters(
  tx: Tx,
  inputIds: readonly number[],
  span: Span,
): Promise<
  {
    atS: number;
    inputId: number;
    voltage: number | null;
    current: number | null;
    power: number | null;
    frames: number;
  }[]
> {
  const { rows } = await tx.raw<{
    rows: {
      atS: number;
      inputId: number;
      voltage: number | null;
      current: number | null;
      power: number | null;
      frames: number;
    }[];
  }>(
    `select extract(epoch from date_bin('15 min', at, '2000-01-01Z'))::float8 as "atS", input_id as "inputId",
            avg(voltage)::float8 / 10 as voltage, avg(current)::float8 / 100 as current,
            avg(voltage::float8 * current)::float8 / 1000 as power, count(*)::int as frames
     from input_frame where input_id = any (:ids::int4[]) and at >= :from and at < :to group by 1, 2`,
    { ids: [...inputIds], ...span },
  );
  return rows;
}

/** What kept inverters from giving what they could, over quarters. */
export async function inverterQuarters(
  tx: Tx,
  siteId: number,
  span: Span,
): Promise<{ atS: number; inverterId: number; curtailed: boolean; gridLost: boolean; clipped: boolean }[]> {
  const { rows } = await tx.raw<{
    rows: { atS: number; inverterId: number; curtailed: boolean; gridLost: boolean; clipped: boolean }[];
  }>(
    `select extract(epoch from date_bin('15 min', f.at, '2000-01-01Z'))::float8 as "atS", v.id as "inverterId",
            bool_or(f.status = 'curtailed') as curtailed, bool_or(f.status in ('grid_lost', 'fault')) as "gridLost",
            bool_or(f.status = 'derated' or f.ac_power >= 0.99 * v.ac_power_max) as clipped
     from inverter v join inverter_frame f on f.inverter_id = v.id
     where v.site_id = :siteId and f.at >= :from and f.at < :to group by 1, 2
     having bool_or(f.status in ('curtailed', 'grid_lost', 'fault', 'derated') or f.ac_power >= 0.99 * v.ac_power_max)`,
    { siteId, ...span },
  );
  return rows;
}

/** Light in each plane with a sensor, W/m², and temperature of its modules, °C, over quarters. */
export async function lightQuarters(
  tx: Tx,
  siteId: number,
  span: Span,
): Promise<{ atS: number; planeId: number; poaGlobal: number | null; temperatureModule: number | null }[]> {
  const { rows } = await tx.raw<{
    rows: { atS: number; planeId: number; poaGlobal: number | null; temperatureModule: number | null }[];
  }>(
    `select extract(epoch from date_bin('15 min', f.at, '2000-01-01Z'))::float8 as "atS", n.plane_id as "planeId",
            avg(f.irradiance)::float8 as "poaGlobal", avg(f.temperature_module)::float8 / 10 as "temperatureModule"
     from sensor n join weather_frame f on f.sensor_id = n.id
     where n.site_id = :siteId and n.kind = 'poa_global' and f.at >= :from and f.at < :to group by 1, 2`,
    { siteId, ...span },
  );
  return rows;
}

/** What was in force in zones and at transmitters from before a span to its end, oldest first. */
export async function commandsIn(
  tx: Tx,
  siteId: number,
  span: Span,
): Promise<{ zoneId: number | null; transmitterId: number | null; released: boolean; sinceS: number }[]> {
  const { rows } = await tx.raw<{
    rows: { zoneId: number | null; transmitterId: number | null; released: boolean; sinceS: number }[];
  }>(
    `select zone_id as "zoneId", transmitter_id as "transmitterId", in_force = 'released' as released,
            extract(epoch from since)::float8 as "sinceS"
     from command c where site_id = :siteId and since < :to and since >= coalesce(
       (select max(b.since) from command b where b.site_id = c.site_id and b.zone_id is not distinct from c.zone_id
        and b.transmitter_id is not distinct from c.transmitter_id and b.since <= :from), '-infinity')
     order by since`,
    { siteId, ...span },
  );
  return rows;
}

/** Planned works that touch a span; strings null: all. */
export async function worksIn(
  tx: Tx,
  siteId: number,
  span: Span,
): Promise<{ stringIds: number[] | null; fromS: number; toS: number }[]> {
  const { rows } = await tx.raw<{ rows: { stringIds: number[] | null; fromS: number; toS: number }[] }>(
    `select string_ids as "stringIds", extract(epoch from starts_at)::float8 as "fromS",
            extract(epoch from ends_at)::float8 as "toS"
     from planned_work where site_id = :siteId and starts_at < :to and ends_at > :from`,
    { siteId, ...span },
  );
  return rows;
}

/** Where each of a site's local days begins, `count` of them up to `last` (yyyy-mm-dd), and the end of the last. */
export async function dayBounds(
  tx: Tx,
  siteId: number,
  last: string,
  count: number,
): Promise<{ day: string; fromS: number }[]> {
  const { rows } = await tx.raw<{ rows: { day: string; fromS: number }[] }>(
    `select to_char(d, 'YYYY-MM-DD') as day, extract(epoch from d::timestamp at time zone site.time_zone)::float8 as "fromS"
     from site, generate_series(:last::date - (:count::int - 1), :last::date + 1, interval '1 day') d
     where site.id = :siteId order by d`,
    { siteId, last, count },
  );
  return rows;
}

export interface LoopRow {
  stringId: number;
  atS: number;
  /** cV, mA, in slot order. */
  voltage: (number | null)[];
  current: (number | null)[];
  /** dV, cA */
  inputVoltage: number | null;
  inputCurrent: number | null;
}

/** A row in V and A. */
export const loopReading = (r: LoopRow): LoopReading => ({
  atS: r.atS,
  voltage: r.voltage.map((cV) => (cV === null ? null : cV / 100)),
  current: r.current.map((mA) => (mA === null ? null : mA / 1000)),
  inputV: r.inputVoltage === null ? null : r.inputVoltage / 10,
  inputA: r.inputCurrent === null ? null : r.inputCurrent / 100,
});

/** Reports of strings five minutes apart with the input's report of that moment, oldest first. */
export async function loopRows(
  tx: Tx,
  stringIds: readonly number[],
  span: Span,
  togetherS: number,
): Promise<LoopRow[]> {
  const { rows } = await tx.raw<{ rows: LoopRow[] }>(
    `select f.string_id as "stringId", extract(epoch from f.at)::float8 as "atS", f.voltage, f.current,
            n.voltage as "inputVoltage", n.current as "inputCurrent"
     from (select distinct on (string_id, date_bin('5 min', at, '2000-01-01Z')) string_id, at, voltage, current
           from ${framesOf({ columns: ['power_sum', 'voltage', 'current'], strings: anyString, ...SPAN })} r
           where power_sum > 0
           order by string_id, date_bin('5 min', at, '2000-01-01Z'), at) f
     join string s on s.id = f.string_id
     cross join lateral (
       select i.voltage, i.current from input_frame i
       where i.input_id = s.input_id and i.at >= f.at - make_interval(secs => :togetherS)
         and i.at <= f.at + make_interval(secs => :togetherS)
       order by abs(extract(epoch from i.at - f.at)) limit 1) n
     order by f.string_id, f.at`,
    { ids: [...stringIds], ...span, togetherS },
  );
  return rows;
}
