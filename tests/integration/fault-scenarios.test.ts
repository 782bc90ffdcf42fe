import type pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { SeededSite } from '../../seeds/plant/seeded';
import { frameOf, inputRows, radioOf } from '../../simulator/logger/readings';
import type { Fault } from '../../simulator/faults/kinds';
import type { SitePlant } from '../../simulator/plant/site-plant';
import { ON_KEEP_ALIVE } from '../../simulator/scenarios/catalogue';
import { JudgeWriter } from '../../src/server/ingest/judge-writer';
import { SiteJudge } from '../../src/server/ingest/judge-site';
import { database } from '../../src/server/db/pools';
import { judgeSiteCauses } from '../../src/server/jobs/judge-causes';
import { writeFrames } from '../../src/server/queries/ingest-frames';
import { learnGateways, writeInputs } from '../../src/server/queries/ingest-reports';
import { judgedSite } from '../../src/server/queries/judgement-contexts';
import { build, DAY_S, Draw, drawPlant } from '../bench/diagnosis/plants';
import { testDatabase, type TestDatabase } from '../support/database';
import { ingestClient, seedDrawn } from '../support/pipeline';

/**
 * The simulator's plant at noon, minute by minute by a clock of its own: what it reports is written as ingest writes it,
 * judged, and made causes of. Each fault is found, and over when it is mended.
 */
const drawn = drawPlant(
  {
    n: 7,
    unitType: ON_KEEP_ALIVE,
    strings: 6,
    units: [10, 12],
    perInput: 1,
    reportIntervalS: 60,
    twoZones: true,
    gateways: 2,
    obstacle: false,
    days: 2,
  },
  new Draw(7),
);
const { plan } = drawn;
// the drawn day is put to yesterday by whole days: noon stays noon
const SHIFT_S = Math.floor((Date.now() / 1000 - DAY_S - drawn.fromS) / DAY_S) * DAY_S;
const NOON_S = drawn.fromS + DAY_S / 2;

let db: TestDatabase;
let client: pg.Client;
let site: SeededSite;
let plant: SitePlant;
let judge: SiteJudge;
let atS = NOON_S;
const writer = new JudgeWriter({ lost: () => undefined, heard: () => undefined });
const real = (s: number): number => s + SHIFT_S;

beforeAll(async () => {
  db = await testDatabase();
  [site] = (await seedDrawn(db, [plan], real(NOON_S) - 90 * DAY_S)) as [SeededSite];
  await db.owner.query(`update site set stage = 'operating'`);
  await db.owner.query('select ensure_days($1::date, $2::date)', [
    new Date((real(NOON_S) - DAY_S) * 1000),
    new Date((real(NOON_S) + DAY_S) * 1000),
  ]);
  await db.owner.query(
    `insert into heard (site_id, serial, unit_id, logger_id, gateway_number, first_heard_at, last_heard_at)
     select $1, u.serial, u.id, (select min(id) from logger where site_id = $1), 1, $2, $2
     from placement p join unit u on u.id = p.unit_id where p.site_id = $1 on conflict do nothing`,
    [site.id, new Date((real(NOON_S) - 80 * DAY_S) * 1000)],
  );
  for (const zone of site.zones.values()) await command(zone, 'released', NOON_S - 7200);
  client = await ingestClient(db);
  plant = build(drawn, [], NOON_S - 7200);
  for (let s = NOON_S - 7200; s < NOON_S; s += 60) plant.step(s);
  judge = new SiteJudge((await judgedSite(database('ingest'), site.id))!, [], real(NOON_S));
  await minutes(6);
});
afterAll(async () => {
  await writer.stop();
  await client.end();
  await db.drop();
});

async function command(zone: number, inForce: string, since: number): Promise<void> {
  await db.owner.query(
    `insert into command (site_id, zone_id, in_force, since, said_by) values ($1, $2, $3, $4, 'Initiator')`,
    [site.id, zone, inForce, new Date(real(since) * 1000)],
  );
}

/** The plant goes on for so many minutes; each minute is written, judged, and causes are looked for. */
async function minutes(n: number): Promise<void> {
  const logger = plan.loggers[0]!.serial;
  const loggerId = site.loggers.get(logger)!;
  for (let k = 0; k < n; k++) {
    atS += 60;
    plant.step(atS);
    const at = real(atS);
    const radio = radioOf(plant, logger);
    const rows = plan.strings.flatMap((s) => {
      const frame = frameOf(
        plant,
        radio,
        s.slots.map((slot) => slot.serial),
      );
      if (!frame) return [];
      const empty = s.slots.map(() => null);
      return [
        {
          stringId: site.strings.get(s.name)!.id,
          siteId: site.id,
          at,
          voltage: frame.voltageOut ?? empty,
          voltageIn: frame.voltageIn ?? null,
          current: frame.current ?? empty,
          power: frame.powerOut ?? null,
          temperature: frame.temperature ?? empty,
          signal: frame.signal ?? empty,
          via: frame.via,
          state: frame.state,
        },
      ];
    });
    await writeFrames(client, rows, new Date(0));
    const heard = [...new Set(rows.flatMap((r) => r.via.flatMap((v) => (v === null ? [] : [v]))))];
    await learnGateways(
      client,
      heard.map((number) => ({ siteId: site.id, loggerId, number, heardAt: at })),
    );
    await writeInputs(
      client,
      inputRows(plant, logger).map((r) => ({
        inputId: site.inputs.get(`${r.inverter}/${r.input}`)!,
        siteId: site.id,
        at,
        voltage: r.voltage,
        current: r.current,
      })),
    );
    await db.owner.query(`update logger set connected_at = $1, last_spoke_at = $1`, [new Date(at * 1000)]);
    const outcomes = rows.flatMap((r) => {
      const outcome = judge.frame(r.stringId, {
        atS: at,
        state: r.state,
        voltageOut: r.voltage,
        voltageIn: r.voltageIn ?? undefined,
      });
      return outcome ? [{ site: judge, outcome }] : [];
    });
    for (const judged of judge.strings.values()) {
      const outcome = judge.sweep(judged, at);
      if (outcome) outcomes.push({ site: judge, outcome });
    }
    await writer.write(outcomes);
    writer.checkpoint(judge, true);
    await writer.flush();
    await judgeSiteCauses(site.id, new Date(at * 1000));
  }
}
const open = async () =>
  (
    await db.owner.query<{ kind: string; part: string | null; units: number; key: string }>(
      `select kind, shared_part ->> 'kind' || ' ' || (shared_part ->> 'name') as part, jsonb_array_length(units) as units, key
       from cause where closed_at is null order by kind, id`,
    )
  ).rows;
/** What was told since; the closing of rows whose units another has is none. */
const told = async (sinceId: number) =>
  (
    await db.owner.query<{ line: string }>(
      `select replace(kind, 'cause_', '') || ' ' || (detail ->> 'kind') as line from event
       where kind like 'cause%' and id > $1 order by id`,
      [sinceId],
    )
  ).rows.map((r) => r.line);
const lastEvent = async (): Promise<number> =>
  (await db.owner.query<{ id: number }>('select coalesce(max(id), 0) as id from event')).rows[0]?.id ?? 0;

const zoneOf = (letter: string): string => plan.strings.find((s) => s.name.startsWith(letter))!.zone;
const namesOf = (letter: string): string[] =>
  plan.strings.filter((s) => s.name.startsWith(letter)).map((s) => s.name);

/** Lets a fault be for some minutes, says what is found, mends it, and waits until nothing is open. */
async function scenario(fault: Fault, forMinutes: number, mendedFor: number) {
  expect(await open()).toEqual([]);
  const before = await lastEvent();
  const entry = plant.faults.add(fault, atS + 30);
  await minutes(forMinutes);
  const found = await open();
  plant.faults.clear(entry.id, atS + 30);
  await minutes(mendedFor);
  expect(await open()).toEqual([]);
  return { found, told: await told(before) };
}

describe('the plant’s faults, from its reports to causes and their end', () => {
  const [first, second] = namesOf('A') as [string, string];

  it('a unit stuck in shutdown', async () => {
    const { found, told: events } = await scenario(
      { kind: 'stuck', string: first, position: 3, at: 'now' },
      16,
      12,
    );
    expect(found).toMatchObject([{ kind: 'stuck', units: 1 }]);
    expect(found[0]?.key).toContain(':3@');
    expect(events).toEqual(['opened stuck', 'closed stuck']);
  });

  it('a string that lost the keep-alive', async () => {
    const transmitter = plan.strings.find((s) => s.name === second)!.transmitters[0]!;
    const { found } = await scenario({ kind: 'transmitter_unheard', transmitter, strings: [second] }, 18, 14);
    expect(found).toMatchObject([{ kind: 'stuck', part: `string ${second}` }]);
    expect(found[0]?.units).toBe(plan.strings.find((s) => s.name === second)!.slots.length);
  });

  it('a dead transmitter: one cause, not one for each of its strings', async () => {
    const transmitter = plan.strings.find((s) => s.name.startsWith('B'))!.transmitters[0]!;
    const { found } = await scenario({ kind: 'transmitter_off', transmitter }, 18, 14);
    expect(found).toHaveLength(1);
    expect(found[0]?.kind).toBe('stuck');
    expect([`transmitter ${transmitter}`, `zone ${zoneOf('B')}`]).toContain(found[0]?.part);
  });

  it('a silent gateway: its units together, and the gateway by name', async () => {
    const before = await lastEvent();
    const { found } = await scenario(
      { kind: 'gateway_out', logger: plan.loggers[0]!.serial, gateway: 2, keeps: false },
      14,
      12,
    );
    expect(found).toMatchObject([{ kind: 'silent' }]);
    expect(found[0]?.part).toMatch(/^gateway .*2/);
    const gateway = await db.owner.query<{ kind: string }>(
      `select kind from event where kind like 'gateway%' and id > $1 order by id`,
      [before],
    );
    expect(gateway.rows.map((r) => r.kind)).toEqual(['gateway_silent', 'gateway_back']);
  });

  it('a unit that does not shut down: a hazard at once, over when it is down or shutdown is no longer asked', async () => {
    const before = await lastEvent();
    plant.faults.add({ kind: 'not_shutting_down', string: first, position: 5, claims: 'passing' }, atS);
    const zone = zoneOf('A');
    const initiator = plan.zones.find((z) => z.name === zone)!.initiator;
    const press = async (isOpen: boolean): Promise<void> => {
      plant.commands.setInitiator(initiator, isOpen, atS);
      await command(site.zones.get(zone)!, isOpen ? 'initiator' : 'released', atS);
      judge.setSite((await judgedSite(database('ingest'), site.id))!, real(atS));
    };
    await press(true);
    await minutes(6);
    expect(await open()).toMatchObject([{ kind: 'not_shutting_down', units: 1 }]);
    await press(false);
    await minutes(12);
    expect((await open()).filter((c) => c.kind === 'not_shutting_down')).toEqual([]);
    const events = await told(before);
    expect(events[0]).toBe('opened not_shutting_down');
    expect(events.filter((e) => /opened|closed/.test(e))).toEqual([
      'opened not_shutting_down',
      'closed not_shutting_down',
    ]);
  });
});
