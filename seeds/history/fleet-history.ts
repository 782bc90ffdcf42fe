import type { Knex } from 'knex';
import { unitsOf, type FleetPlan } from '../../simulator/plant/plan';
import { known } from '../plant/rows';
import { writeShutdownTests } from '../records/shutdown-tests';
import type { SeededPlant } from '../plant/seeded';
import { CopyInto, copyRows, WaitingRows } from './copy';
import { writeDays } from './days';
import { QUARTER_COLUMNS } from './quarters';
import { writeCommands, writeLastHeard, writeNewestRows, writeRollCall, writeStates } from './records';
import { FRAME_COLUMNS, MINUTES_S, QUARTERS_S, SiteHistory, type Lines } from './site-history';

const DAY_S = 86_400;
const day = (epochS: number) => new Date(epochS * 1000).toISOString().slice(0, 10);

/** Writes the past of every site: months of days, a month of quarters, two days of minutes, and what people did. */
export async function seedHistory(
  tx: Knex.Transaction,
  fleet: FleetPlan,
  plant: SeededPlant,
  say: (line: string) => void = () => undefined,
): Promise<void> {
  await tx.raw('select ensure_days(?::date, ?::date)', [
    day(fleet.since - QUARTERS_S - DAY_S),
    day(fleet.since + 3 * DAY_S),
  ]);
  const lines: Lines = {
    quarters: new WaitingRows(),
    inputs: new WaitingRows(),
    inverters: new WaitingRows(),
    weather: new WaitingRows(),
    siteQuarters: new WaitingRows(),
    stringDays: new WaitingRows(),
    siteDays: new WaitingRows(),
  };
  const histories: SiteHistory[] = [];
  const minutesFromS = Math.floor((fleet.since - MINUTES_S) / 3600) * 3600;
  const untilS = Math.floor(fleet.since / 60) * 60;

  const frames = await CopyInto.open(tx, 'string_frame', FRAME_COLUMNS);
  for (const organisation of fleet.organisations)
    for (const plan of organisation.sites) {
      const history = new SiteHistory(fleet, organisation, known(plant.sites, plan.name, 'the site'), lines);
      history.runMonth(minutesFromS);
      await history.runMinutes(minutesFromS, untilS, frames);
      history.siteRollUp.close();
      writeDays(fleet, organisation, history, lines);
      histories.push(history);
      say(`${plan.name}: ${unitsOf(plan)} units, two days of minutes, a month of quarters`);
    }
  await frames.close();

  say('writing roll-ups, inputs, inverters and weather');
  await copyRows(tx, 'string_quarter', QUARTER_COLUMNS, lines.quarters);
  await copyRows(tx, 'input_frame', ['at', 'input_id', 'voltage', 'current'], lines.inputs);
  await copyRows(
    tx,
    'inverter_frame',
    [
      'at',
      'inverter_id',
      'ac_power',
      'energy',
      'status',
      'power_limit',
      'insulation',
      'arc_flag',
      'earth_fault_flag',
    ],
    lines.inverters,
  );
  await copyRows(
    tx,
    'weather_frame',
    ['at', 'sensor_id', 'irradiance', 'temperature_air', 'temperature_module', 'wind_speed'],
    lines.weather,
  );
  await copyRows(
    tx,
    'string_day',
    ['day', 'string_id', 'site_id', 'frames', 'voltage_avg', 'voltage_max', 'energy', 'unit_energy'],
    lines.stringDays,
  );
  await copyRows(
    tx,
    'site_day',
    [
      'day',
      'site_id',
      'energy_ac',
      'energy_dc',
      'energy_expected',
      'lost_minutes',
      'lost_minutes_grid',
      'complete',
      'nameplate',
      'gamma_pmp',
      'quarters_due',
      'quarters_lit',
      'insolation',
      'energy_ac_lit',
      'energy_dc_lit',
      'quarters_warm',
      'insolation_warm',
      'insolation_temperature',
      'energy_ac_warm',
      'minutes_lit',
      'limited_minutes',
      'lost_energy',
      'lost_energy_grid',
    ],
    lines.siteDays,
  );
  await copyRows(tx, 'site_quarter', ['at', 'site_id', 'ac_power', 'poa_insolation'], lines.siteQuarters);

  for (const organisation of fleet.organisations) {
    const worker = organisation.people.find((p) => p.role === 'technician') ?? organisation.people[0];
    if (!worker) continue;
    const technician = { id: known(plant.people, worker.email, 'the person').id, name: worker.name };
    for (const plan of organisation.sites) {
      const history = histories.find((h) => h.site.plan === plan);
      if (!history) continue;
      await writeStates(tx, history);
      await writeRollCall(tx, history.site, technician, history);
      await writeCommands(tx, history.site, history, fleet.since);
      await writeShutdownTests(tx, fleet, history.site, technician);
    }
  }
  await writeNewestRows(tx);
  await writeLastHeard(tx, histories);
  await tx.raw(
    `insert into rollup_watermark (quarter) values (date_bin('15 min', to_timestamp(?), '2000-01-01Z'))
     on conflict (only_row) do update set quarter = excluded.quarter`,
    [untilS],
  );
}
