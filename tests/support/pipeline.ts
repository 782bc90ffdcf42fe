import knexFactory from 'knex';
import pg from 'pg';
import { seedPlant } from '../../seeds/plant/seed-plant';
import type { SeededSite } from '../../seeds/plant/seeded';
import type { SitePlan } from '../../simulator/plant/plan';
import { MODULE_TYPES, UNIT_TYPES } from '../../simulator/scenarios/catalogue';
import { writeFrames } from '../../src/server/queries/ingest-frames';
import type { FrameRow } from '../../src/server/queries/ingest-rows';
import { writeInputs, writeInverters, writeWeather } from '../../src/server/queries/ingest-reports';
import { database } from '../../src/server/db/pools';
import { quarterOf, rollDay, rollStringQuarter, setRollupWatermark } from '../../src/server/queries/rollup';
import type { Reports } from '../bench/diagnosis/output-series';
import { EXCLUDED } from '../../src/domain/output/plane-reference';
import { PASSWORD, SECRET } from './fleet';
import type { TestDatabase } from './database';

/** A drawn plant written into the database, and what it reports put where ingest puts it, at made-up times. */

export async function seedDrawn(
  db: TestDatabase,
  plans: readonly SitePlan[],
  sinceS: number,
): Promise<SeededSite[]> {
  const knex = knexFactory({ client: 'pg', connection: db.url, pool: { min: 0, max: 1 } });
  try {
    const seeded = await knex.transaction((tx) =>
      seedPlant(
        tx,
        {
          seed: 1,
          since: sinceS,
          organisations: [
            {
              name: 'Tollbar Roofs',
              timeZone: 'UTC',
              phone: '+00 555 0100',
              people: [
                { email: 'manager@tollbar.example', name: 'Mara Tollbar', role: 'manager', sites: [] },
                { email: 'analyst@tollbar.example', name: 'Anselm Reed', role: 'analyst', sites: [] },
              ],
              moduleTypes: [...MODULE_TYPES],
              unitTypes: [...UNIT_TYPES],
              sites: [...plans],
            },
          ],
        },
        { secret: SECRET, password: PASSWORD },
      ),
    );
    return plans.map((p) => {
      const site = seeded.sites.get(p.name);
      if (!site) throw new Error(`${p.name} was not written`);
      return site;
    });
  } finally {
    await knex.destroy();
  }
}

/** A connection as ingest has it. */
export async function ingestClient(db: TestDatabase): Promise<pg.Client> {
  const client = new pg.Client(db.ingestUrl);
  await client.connect();
  return client;
}

const STEP_S = 300;
const scaled = (x: number, by: number): number | null => (Number.isNaN(x) ? null : Math.round(x * by));
const READ_AT = 200;

/**
 * Writes a run's reports from step `from` to `to`, the first step being at `fromS`, and rolls up their quarters and
 * days. The site's days are taken to begin at UTC midnight.
 */
export async function writeReports(
  client: pg.Client,
  site: SeededSite,
  reports: Reports,
  fromS: number,
  to: number,
): Promise<void> {
  const { plan } = site;
  const frames: FrameRow[] = [];
  const inputs: Parameters<typeof writeInputs>[1][number][] = [];
  const inverters: Parameters<typeof writeInverters>[1][number][] = [];
  const weather: Parameters<typeof writeWeather>[1][number][] = [];
  const sensor = [...site.sensors.values()][0];
  for (let q = 0; q < to; q++) {
    if (reports.dayOf[q]! < 0) continue;
    const at = fromS + q * STEP_S;
    plan.strings.forEach((s, k) => {
      const r = reports.strings[k]!;
      const heard = r.current.some((c) => !Number.isNaN(c[q]!));
      const empty = s.slots.map(() => null);
      if (s.kind !== 'shutdown_only' && heard)
        frames.push({
          stringId: site.strings.get(s.name)!.id,
          siteId: site.id,
          at,
          voltage: r.voltageOut.map((c) => scaled(c[q]!, 100)),
          voltageIn: r.voltageIn.some((c) => !Number.isNaN(c[q]!))
            ? r.voltageIn.map((c) => scaled(c[q]!, 100))
            : null,
          current: r.current.map((c) => scaled(c[q]!, 1000)),
          power: null,
          temperature: empty,
          signal: empty,
          via: empty,
          state: r.current.map((c) => (Number.isNaN(c[q]!) ? null : 1)),
        });
      inputs.push({
        inputId: site.inputs.get(`${s.inverter}/${s.input}`)!,
        siteId: site.id,
        at,
        voltage: scaled(r.inputV[q]!, 10),
        current: scaled(r.inputA[q]!, 100),
      });
    });
    for (const i of plan.inverters) {
      const k = plan.strings.findIndex((s) => s.inverter === i.name);
      const e = reports.strings[k]?.excluded[q] ?? 0;
      inverters.push({
        inverterId: site.inverters.get(i.name)!,
        siteId: site.id,
        at,
        acPower: 1000,
        energy: null,
        status:
          e & EXCLUDED.curtailed
            ? 'curtailed'
            : e & EXCLUDED.gridLost
              ? 'grid_lost'
              : e
                ? 'derated'
                : 'running',
        powerLimit: null,
        insulation: null,
        arcFlag: false,
        earthFaultFlag: false,
      });
    }
    if (sensor !== undefined)
      weather.push({
        sensorId: sensor,
        siteId: site.id,
        at,
        irradiance: scaled(reports.poaGlobal[q]!, 1),
        temperatureAir: null,
        // what was made of it is a cell's temperature
        temperatureModule: scaled(reports.temperatureCell[q]! - 1.5, 10),
        windSpeed: null,
      });
  }
  const before = new Date(0);
  await client.query('select ensure_days($1::date, $2::date)', [
    new Date(fromS * 1000),
    new Date((fromS + to * STEP_S) * 1000),
  ]);
  for (let i = 0; i < frames.length; i += READ_AT)
    await writeFrames(client, frames.slice(i, i + READ_AT), before);
  for (let i = 0; i < inputs.length; i += 2000) await writeInputs(client, inputs.slice(i, i + 2000));
  for (let i = 0; i < inverters.length; i += 2000) await writeInverters(client, inverters.slice(i, i + 2000));
  for (let i = 0; i < weather.length; i += 2000) await writeWeather(client, weather.slice(i, i + 2000));
  await rollUp(
    site,
    [...frames, ...inputs].map((f) => f.at),
  );
}

/** Rolls up the quarters that these instants lie in, then their UTC days. */
async function rollUp(site: SeededSite, times: readonly number[]): Promise<void> {
  const knex = database('ingest');
  const quarters = [...new Set(times.map((s) => quarterOf(new Date(s * 1000)).getTime()))];
  for (let i = 0; i < quarters.length; i += 4)
    await Promise.all(
      quarters.slice(i, i + 4).map((ms) => rollStringQuarter(knex, new Date(ms), { siteId: site.id })),
    );
  for (const day of new Set(quarters.map((ms) => new Date(ms).toISOString().slice(0, 10))))
    await rollDay(knex, site.id, day);
  const last = Math.max(...quarters);
  await setRollupWatermark(knex, new Date(Math.ceil((last + 1) / 86_400_000) * 86_400_000));
}
