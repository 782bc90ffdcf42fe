import type { Knex } from 'knex';
import { keyOf, uniform } from '../../simulator/chance';
import { firstReleasedS } from '../../simulator/plant/commands';
import { insertRows, known } from '../plant/rows';
import type { SeededSite } from '../plant/seeded';
import type { SiteHistory } from './site-history';
import { maskOf, sumsOf } from './site-history';

const at = (epochS: number) => new Date(epochS * 1000).toISOString();

/** The newest of everything: what pages show before a logger speaks again. */
export async function writeStates(db: Knex, history: SiteHistory): Promise<void> {
  const { site } = history;
  const smallints = (values: readonly (number | null)[] | undefined) => values ?? null;
  await insertRows(
    db,
    'string_state',
    {
      string_id: 'int4',
      site_id: 'int4',
      at: 'timestamptz',
      mask: 'int8',
      voltage_sum: 'int4',
      power_sum: 'int4',
      voltage: 'int2[]',
      voltage_in: 'int2[]',
      current: 'int2[]',
      power: 'int2[]',
      temperature: 'int2[]',
      signal: 'int2[]',
      via: 'int2[]',
      state: 'int2[]',
      seen: 'int4[]',
    },
    [...history.newest].map(([name, { atS, frame, seen }]) => {
      const sums = sumsOf(frame);
      return {
        string_id: history.stringId(name),
        site_id: site.id,
        at: at(atS),
        mask: maskOf(frame),
        voltage_sum: sums.voltage,
        power_sum: sums.power,
        voltage: smallints(frame.voltageOut),
        voltage_in: smallints(frame.voltageIn),
        current: frame.current,
        power: smallints(frame.powerOut),
        temperature: frame.temperature,
        signal: frame.signal,
        via: frame.via,
        state: frame.state,
        seen,
      };
    }),
    ['string_id'],
  );
}

/** Newest rows of inputs, inverters and sensors, from the frames that were just written. */
export async function writeNewestRows(db: Knex): Promise<void> {
  await db.raw(`
    insert into input_state (input_id, site_id, at, voltage, current)
      select distinct on (f.input_id) f.input_id, i.site_id, f.at, f.voltage, f.current
      from input_frame f join input i on i.id = f.input_id order by f.input_id, f.at desc
      on conflict do nothing`);
  await db.raw(`
    insert into inverter_state (inverter_id, site_id, at, ac_power, energy, status, power_limit, insulation, arc_flag, earth_fault_flag)
      select distinct on (f.inverter_id) f.inverter_id, i.site_id, f.at, f.ac_power, f.energy, f.status, f.power_limit,
        f.insulation, f.arc_flag, f.earth_fault_flag
      from inverter_frame f join inverter i on i.id = f.inverter_id order by f.inverter_id, f.at desc
      on conflict do nothing`);
  await db.raw(`
    insert into weather_state (sensor_id, site_id, at, irradiance, temperature_air, temperature_module, wind_speed)
      select distinct on (f.sensor_id) f.sensor_id, s.site_id, f.at, f.irradiance, f.temperature_air, f.temperature_module,
        f.wind_speed
      from weather_frame f join sensor s on s.id = f.sensor_id order by f.sensor_id, f.at desc
      on conflict do nothing`);
}

/** Roll calls that were finished long ago, with each unit's first answer. */
export async function writeRollCall(
  db: Knex,
  site: SeededSite,
  technician: { id: number; name: string },
  history: SiteHistory,
): Promise<void> {
  const { plan } = site;
  if (plan.switchedOnOn === null) return;
  const startedS = Date.parse(plan.switchedOnOn) / 1000 + 10 * 3600 - plan.longitude * 240;
  const reporting = plan.strings.filter((s) => s.kind !== 'shutdown_only');
  if (reporting.length === 0) return;
  const [rollCall] = await insertRows<{ id: number }>(
    db,
    'roll_call',
    {
      site_id: 'int4',
      started_by: 'int4',
      person_on_site: 'text',
      started_at: 'timestamptz',
      stopped_at: 'timestamptz',
      stopped_by: 'int4',
    },
    [
      {
        site_id: site.id,
        started_by: technician.id,
        person_on_site: technician.name,
        started_at: at(startedS),
        stopped_at: at(startedS + 5400),
        stopped_by: technician.id,
      },
    ],
  );
  await insertRows(
    db,
    'heard',
    {
      site_id: 'int4',
      serial: 'text',
      unit_id: 'int4',
      roll_call_id: 'int4',
      logger_id: 'int4',
      gateway_number: 'int2',
      first_heard_at: 'timestamptz',
      last_heard_at: 'timestamptz',
      signal: 'int2',
      voltage: 'int2',
      current: 'int2',
    },
    reporting.flatMap((s) => {
      const newest = history.newest.get(s.name);
      return s.slots.flatMap((slot, i) => {
        if (slot.serial === null) return [];
        const heardS = startedS + 20 + 2400 * uniform(keyOf(slot.serial), 1) ** 2;
        return [
          {
            site_id: site.id,
            serial: slot.serial,
            unit_id: known(site.units, slot.serial, 'the unit'),
            roll_call_id: rollCall?.id ?? null,
            logger_id: known(site.loggers, s.logger, 'the logger'),
            gateway_number: newest?.frame.via[i] ?? slot.gateway,
            first_heard_at: at(heardS),
            last_heard_at: at(newest?.seen[i] || heardS),
            signal: newest?.frame.signal[i] ?? null,
            voltage: newest?.frame.voltageOut?.[i] ?? null,
            current: newest?.frame.current[i] ?? null,
          },
        ];
      });
    }),
    ['serial'],
  );
}

/** What is in force in each zone and at each transmitter, and since when. */
export async function writeCommands(
  db: Knex,
  site: SeededSite,
  history: SiteHistory,
  sinceS: number,
): Promise<void> {
  const { commands } = history.plant;
  const { plan } = site;
  const columns = {
    site_id: 'int4',
    zone_id: 'int4',
    transmitter_id: 'int4',
    in_force: 'text',
    since: 'timestamptz',
    said_by: 'text',
  };
  const beganS = firstReleasedS(plan, sinceS);
  const rows = [
    ...[...commands.zones].map(([name, c]) => ({ zone_id: known(site.zones, name, 'the zone'), ...c })),
    ...[...commands.transmitters].map(([name, c]) => ({
      transmitter_id: known(site.transmitters, name, 'the transmitter'),
      ...c,
    })),
  ].flatMap(({ inForce, since, by, ...where }) => {
    const row = (in_force: string, sinceS: number, said_by: string) => ({
      site_id: site.id,
      zone_id: null,
      transmitter_id: null,
      ...where,
      in_force,
      since: at(sinceS),
      said_by,
    });
    const released = row('released', beganS, by);
    return inForce === 'released' ? [released] : [released, row(inForce, since, by)];
  });
  await insertRows(db, 'command', columns, rows);
}

/** When loggers and gateways were last heard, by the newest frames. */
export async function writeLastHeard(db: Knex, histories: SiteHistory[]): Promise<void> {
  for (const history of histories) {
    const { site } = history;
    const byGateway = new Map<number, number>();
    for (const { frame, seen } of history.newest.values())
      frame.via.forEach((via, i) => {
        if (via !== null) byGateway.set(via, Math.max(byGateway.get(via) ?? 0, seen[i] ?? 0));
      });
    for (const [number, seenS] of byGateway)
      await db('gateway')
        .where({ site_id: site.id, number })
        .update({ last_heard_at: at(seenS) });
    await db('logger')
      .where({ site_id: site.id })
      .update({ last_spoke_at: at(history.plant.atS) });
  }
}
