import type pg from 'pg';
import type { InForce, InverterStatus } from '../../domain/verdicts/codes';

/**
 * What loggers report besides frames. Each function makes one batch durable in one statement (autocommit) and is
 * harmless when repeated. A newer report than the newest kept also becomes the present state. Times: epoch seconds.
 */

export interface InputRow {
  inputId: number;
  siteId: number;
  at: number;
  /** dV */
  voltage: number | null;
  /** cA */
  current: number | null;
}

export async function writeInputs(client: pg.ClientBase, rows: readonly InputRow[]): Promise<void> {
  await client.query({
    name: 'write_inputs',
    text: `with x as materialized (
        select distinct on (input_id, at) input_id, site_id, to_timestamp(at) at, voltage, current
        from unnest($1::int4[], $2::int4[], $3::int4[], $4::int4[], $5::int4[]) x(input_id, site_id, at, voltage, current)),
      kept as (insert into input_frame (at, input_id, voltage, current)
        select at, input_id, voltage, current from x order by input_id, at on conflict do nothing)
      insert into input_state as l (input_id, site_id, at, voltage, current)
      select distinct on (input_id) input_id, site_id, at, voltage, current from x order by input_id, at desc
      on conflict (input_id) do update set at = excluded.at, voltage = excluded.voltage, current = excluded.current
      where excluded.at > l.at`,
    values: [
      rows.map((r) => r.inputId),
      rows.map((r) => r.siteId),
      rows.map((r) => r.at),
      rows.map((r) => r.voltage),
      rows.map((r) => r.current),
    ],
  });
}

export interface InverterRow {
  inverterId: number;
  siteId: number;
  at: number;
  /** W */
  acPower: number | null;
  /** Wh, counter */
  energy: number | null;
  status: InverterStatus;
  /** W */
  powerLimit: number | null;
  /** kohm */
  insulation: number | null;
  arcFlag: boolean;
  earthFaultFlag: boolean;
}

/** Returns the sites where a status changed; each change is an event. */
export async function writeInverters(client: pg.ClientBase, rows: readonly InverterRow[]): Promise<number[]> {
  const { rows: told } = await client.query<{ site_id: number }>({
    name: 'write_inverters',
    text: `with x as materialized (
        select distinct on (inverter_id, at) inverter_id, site_id, to_timestamp(at) at, ac_power, energy, status, power_limit,
          insulation, arc_flag, earth_fault_flag
        from unnest($1::int4[], $2::int4[], $3::int4[], $4::int4[], $5::int8[], $6::text[], $7::int4[], $8::int4[], $9::bool[], $10::bool[])
          x(inverter_id, site_id, at, ac_power, energy, status, power_limit, insulation, arc_flag, earth_fault_flag)),
      kept as (insert into inverter_frame (at, inverter_id, ac_power, energy, status, power_limit, insulation, arc_flag, earth_fault_flag)
        select at, inverter_id, ac_power, energy, status, power_limit, insulation, arc_flag, earth_fault_flag
        from x order by inverter_id, at on conflict do nothing),
      changed as (
        select x.inverter_id, x.at, x.status, coalesce(lag(x.status) over (partition by x.inverter_id order by x.at), l.status) before
        from x left join inverter_state l using (inverter_id) where l.at is null or x.at > l.at),
      told as (insert into event (at, organisation_id, site_id, kind, detail)
        select c.at, s.organisation_id, s.id, 'inverter_status',
          jsonb_build_object('inverter', v.name, 'status', c.status, 'before', c.before)
        from changed c join inverter v on v.id = c.inverter_id join site s on s.id = v.site_id
        where c.before <> c.status order by c.at returning site_id),
      newest as (insert into inverter_state as l (inverter_id, site_id, at, ac_power, energy, status, power_limit, insulation, arc_flag, earth_fault_flag)
        select distinct on (inverter_id) inverter_id, site_id, at, ac_power, energy, status, power_limit, insulation, arc_flag, earth_fault_flag
        from x order by inverter_id, at desc
        on conflict (inverter_id) do update set at = excluded.at, ac_power = excluded.ac_power, energy = excluded.energy,
          status = excluded.status, power_limit = excluded.power_limit, insulation = excluded.insulation,
          arc_flag = excluded.arc_flag, earth_fault_flag = excluded.earth_fault_flag
        where excluded.at > l.at)
      select distinct site_id from told`,
    values: [
      rows.map((r) => r.inverterId),
      rows.map((r) => r.siteId),
      rows.map((r) => r.at),
      rows.map((r) => r.acPower),
      rows.map((r) => r.energy),
      rows.map((r) => r.status),
      rows.map((r) => r.powerLimit),
      rows.map((r) => r.insulation),
      rows.map((r) => r.arcFlag),
      rows.map((r) => r.earthFaultFlag),
    ],
  });
  return told.map((t) => t.site_id);
}

export interface WeatherRow {
  sensorId: number;
  siteId: number;
  at: number;
  /** W/m² */
  irradiance: number | null;
  /** 0.1 °C */
  temperatureAir: number | null;
  /** 0.1 °C */
  temperatureModule: number | null;
  /** 0.1 m/s */
  windSpeed: number | null;
}

export async function writeWeather(client: pg.ClientBase, rows: readonly WeatherRow[]): Promise<void> {
  await client.query({
    name: 'write_weather',
    text: `with x as materialized (
        select distinct on (sensor_id, at) sensor_id, site_id, to_timestamp(at) at, irradiance, temperature_air, temperature_module, wind_speed
        from unnest($1::int4[], $2::int4[], $3::int4[], $4::int2[], $5::int2[], $6::int2[], $7::int2[])
          x(sensor_id, site_id, at, irradiance, temperature_air, temperature_module, wind_speed)),
      kept as (insert into weather_frame (at, sensor_id, irradiance, temperature_air, temperature_module, wind_speed)
        select at, sensor_id, irradiance, temperature_air, temperature_module, wind_speed from x order by sensor_id, at
        on conflict do nothing)
      insert into weather_state as l (sensor_id, site_id, at, irradiance, temperature_air, temperature_module, wind_speed)
      select distinct on (sensor_id) sensor_id, site_id, at, irradiance, temperature_air, temperature_module, wind_speed
      from x order by sensor_id, at desc
      on conflict (sensor_id) do update set at = excluded.at, irradiance = excluded.irradiance,
        temperature_air = excluded.temperature_air, temperature_module = excluded.temperature_module, wind_speed = excluded.wind_speed
      where excluded.at > l.at`,
    values: [
      rows.map((r) => r.sensorId),
      rows.map((r) => r.siteId),
      rows.map((r) => r.at),
      rows.map((r) => r.irradiance),
      rows.map((r) => r.temperatureAir),
      rows.map((r) => r.temperatureModule),
      rows.map((r) => r.windSpeed),
    ],
  });
}

export interface CommandRow {
  siteId: number;
  zoneId: number | null;
  transmitterId: number | null;
  inForce: InForce;
  since: number;
  by: string;
}

/** True when it was not known before: it is an event then. */
export async function writeCommand(client: pg.ClientBase, row: CommandRow): Promise<boolean> {
  const { rowCount } = await client.query(
    `with c as (
       insert into command (site_id, zone_id, transmitter_id, in_force, since, said_by)
       values ($1, $2, $3, $4, to_timestamp($5::int4), $6) on conflict do nothing
       returning site_id, zone_id, transmitter_id, in_force, since, said_by)
     insert into event (at, organisation_id, site_id, kind, detail)
     select c.since, s.organisation_id, s.id, 'command', jsonb_strip_nulls(jsonb_build_object('inForce', c.in_force,
       'zone', (select name from zone where id = c.zone_id), 'transmitter', (select name from transmitter where id = c.transmitter_id),
       'since', to_char(c.since at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS"Z"'), 'saidBy', c.said_by))
     from c join site s on s.id = c.site_id`,
    [row.siteId, row.zoneId, row.transmitterId, row.inForce, row.since, row.by],
  );
  return rowCount === 1;
}

export interface TraceRow {
  siteId: number;
  stringId: number;
  startedAt: number;
  measuringPoint: string;
  /** V */
  accuracy: number;
  /** dV, one a second */
  voltage: (number | null)[];
  /** cV per slot, per second */
  unitVoltage: (number | null)[][] | null;
}

/** A longer trace of the same start replaces a shorter one: a logger may send it while it grows. */
export async function writeTrace(client: pg.ClientBase, row: TraceRow): Promise<void> {
  await client.query(
    `insert into trace as t (site_id, string_id, started_at, measuring_point, accuracy, voltage, unit_voltage)
     values ($1, $2, to_timestamp($3::int4), $4, $5, $6::int4[], $7::jsonb)
     on conflict (string_id, started_at, measuring_point) do update
       set accuracy = excluded.accuracy, voltage = excluded.voltage, unit_voltage = excluded.unit_voltage
     where cardinality(excluded.voltage) > cardinality(t.voltage)`,
    [
      row.siteId,
      row.stringId,
      row.startedAt,
      row.measuringPoint,
      row.accuracy,
      row.voltage,
      row.unitVoltage && JSON.stringify(row.unitVoltage),
    ],
  );
}

/** Gateways are learned from what is heard; their names come from people later. */
export async function learnGateways(
  client: pg.ClientBase,
  rows: readonly { siteId: number; loggerId: number; number: number; heardAt: number }[],
): Promise<void> {
  await client.query({
    name: 'learn_gateways',
    text: `insert into gateway as g (site_id, logger_id, number, name, last_heard_at)
      select site_id, logger_id, number, 'Gateway ' || number, to_timestamp(max(heard_at))
      from unnest($1::int4[], $2::int4[], $3::int2[], $4::int4[]) x(site_id, logger_id, number, heard_at)
      group by 1, 2, 3 order by 2, 3
      on conflict (logger_id, number) do update set last_heard_at = greatest(g.last_heard_at, excluded.last_heard_at)`,
    values: [
      rows.map((r) => r.siteId),
      rows.map((r) => r.loggerId),
      rows.map((r) => r.number),
      rows.map((r) => r.heardAt),
    ],
  });
}
