import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Fault } from '../../simulator/faults/kinds';
import { ON_KEEP_ALIVE } from '../../simulator/scenarios/catalogue';
import { Draw, drawPlant } from '../bench/diagnosis/plants';
import { testDatabase, type TestDatabase } from '../support/database';
import { LivePlant, newestEvent, openCauses } from '../support/live-plant';

/** What happens to a plant and is nobody's fault, or not the units': it is told as what it is, and no cause is made of it. */
const drawn = drawPlant(
  {
    n: 9,
    unitType: ON_KEEP_ALIVE,
    strings: 3,
    units: [8, 9],
    perInput: 1,
    reportIntervalS: 60,
    twoZones: false,
    gateways: 1,
    obstacle: false,
    days: 1,
  },
  new Draw(9),
);
const inverter = drawn.plan.inverters[0]!.name;
const MINUTES = 7; // longer than three reports: what is silent would be found by then

let db: TestDatabase;
let live: LivePlant;

beforeAll(async () => {
  db = await testDatabase();
  live = new LivePlant(db, drawn);
  await live.start();
});
afterAll(async () => {
  await live.stop();
  await db.drop();
});

const counts = async () =>
  (
    await db.owner.query<{ silent: number; dark: number; wrong: number }>(
      `select sum(silent)::int as silent, sum(dark)::int as dark,
         sum(stuck + not_shutting_down + unconfirmed)::int as wrong from string_judgement`,
    )
  ).rows[0]!;

/** Lets it happen, then ends it. @returns what the inverter was said to be, and the unit counts while it lasted */
async function happens(fault: Fault) {
  const before = await newestEvent(db);
  const entry = live.plant.faults.add(fault, live.atS + 30);
  await live.minutes(MINUTES);
  expect(await openCauses(db)).toEqual([]);
  const units = await counts();
  const { rows: state } = await db.owner.query<{ status: string; earthFaultFlag: boolean; acPower: number }>(
    `select status, earth_fault_flag as "earthFaultFlag", ac_power as "acPower" from inverter_state`,
  );
  live.plant.faults.clear(entry.id, live.atS + 30);
  await live.minutes(MINUTES);
  expect(await openCauses(db)).toEqual([]);
  const { rows: told } = await db.owner.query<{ status: string }>(
    `select detail ->> 'status' as status from event where kind = 'inverter_status' and id > $1 order by id`,
    [before],
  );
  return { units, inverter: state[0]!, told: told.map((t) => t.status) };
}

describe('is told as what it is, and units are not blamed', { timeout: 300_000 }, () => {
  it('a lost grid', async () => {
    const { units, inverter: its, told } = await happens({ kind: 'grid_lost', inverter });
    expect(its).toMatchObject({ status: 'grid_lost', acPower: 0 });
    expect(told[0]).toBe('grid_lost');
    expect(told.at(-1)).toBe('running');
    expect(units.wrong).toBe(0);
  });

  it('a limit that the grid sets', async () => {
    const { units, inverter: its, told } = await happens({ kind: 'curtailed', inverter, share: 0.3 });
    expect(its.status).toBe('curtailed');
    expect(told).toEqual(['curtailed', 'running']);
    expect(units).toEqual({ silent: 0, dark: 0, wrong: 0 });
  });

  it('an inverter that stops for a fault to earth', async () => {
    const { units, inverter: its, told } = await happens({ kind: 'earth_fault', inverter });
    expect(its).toMatchObject({ status: 'fault', earthFaultFlag: true });
    expect(told[0]).toBe('fault');
    expect(units.wrong).toBe(0);
  });

  it('a morning with snow on the modules: units are dark, not silent, and wake when it is gone', async () => {
    const before = await counts();
    expect(before.dark).toBe(0);
    live.air(-3);
    const { id } = live.plant.faults.add({ kind: 'snow' }, live.atS + 30);
    live.sleepUntil(22);
    await live.minutes(MINUTES);
    expect(await openCauses(db)).toEqual([]);
    expect(await counts()).toEqual({
      silent: 0,
      dark: drawn.plan.strings.flatMap((s) => s.slots).length,
      wrong: 0,
    });
    live.plant.faults.clear(id, live.atS + 30);
    await live.minutes(MINUTES);
    expect(await openCauses(db)).toEqual([]);
    expect(await counts()).toEqual(before);
  });
});
