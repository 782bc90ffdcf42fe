import pg from 'pg';
import { migrate } from '../../../src/server/up/database.mjs';
import { copyOrganisation, holdingsOf, ownedTables, takeNumbersOf } from '../../support/groups';
import { plantFleet } from '../ingest/plant';
import { median, milliseconds, type Three } from './three';
import type { Foreign } from './foreign';

/** The other way: a whole database for each group of organisations. Nothing is shared but a directory of who lives where. */
const SITES = 8;
const STRINGS = 25;
const UNITS = 20;
const MINUTES = 720;
const ROUNDS = 100;

export async function tryGroups(three: Three, { figure, say }: Foreign): Promise<void> {
  const { db, url } = three;
  say('groups: the product’s schema on two servers');
  for (const [group, at] of (['left', 'right'] as const).entries()) {
    await migrate(url[at]);
    await db[at].query('reset search_path'); // of the trial before
    await takeNumbersOf(db[at], group);
  }
  await db.front.query('create table directory (organisation uuid primary key, address text not null)');
  await db.right.query(`insert into organisation (name) values ('Lives on the right')`);
  // the bench's plant names organisation 1: it lives in the group whose numbers begin there
  const plant = await plantFleet(db.left, SITES, STRINGS, UNITS);
  const { rows } = await db.left.query<{ ref: string; id: number }>('select ref, id from organisation');
  const [organisation] = rows;
  if (!organisation) throw new Error('The plant has no organisation.');
  await db.front.query('insert into directory values ($1, $2)', [organisation.ref, url.left]);
  await db.left.query(`select ensure_days('2026-06-01', '2026-06-01')`);
  const written = await milliseconds(() =>
    db.left.query(
      `insert into string_frame (at, string_id, mask, voltage_sum, power_sum, voltage, current, temperature, signal, via, state)
       select timestamptz '2026-06-01 06:00Z' + make_interval(mins => m), s.id, (1::int8 << ${UNITS}) - 1, 64000, 5000,
         array_fill(3200::int2, array[${UNITS}]), array_fill(8000::int2, array[${UNITS}]), array_fill(400::int2, array[${UNITS}]),
         array_fill(-60::int2, array[${UNITS}]), array_fill(1::int2, array[${UNITS}]), array_fill(1::int2, array[${UNITS}])
       from string s, generate_series(0, ${MINUTES - 1}) m`,
    ),
  );
  const frames = SITES * STRINGS * MINUTES;
  figure('groups.insert_straight', frames / (written / 1000), 'rows/s', 0);
  await db.left.query('analyze');

  const string = plant.sites[0]?.strings[0]?.id ?? 0;
  const took: number[] = [];
  const looked: number[] = [];
  for (let i = 0; i < ROUNDS; i++) {
    looked.push(
      await milliseconds(() =>
        db.front.query('select address from directory where organisation = $1', [organisation.ref]),
      ),
    );
    took.push(
      await milliseconds(() =>
        db.left.query(
          `select at, voltage_sum, power_sum from string_frame where string_id = $1
             and at >= '2026-06-01 00:00Z' and at < '2026-06-02 00:00Z' order by at`,
          [string],
        ),
      ),
    );
  }
  figure('groups.directory_lookup', median(looked), 'ms');
  figure('groups.day', median(took), 'ms');

  say('groups: moving the organisation to the other server');
  await db.right.query(`select ensure_days('2026-06-01', '2026-06-01')`);
  const { owned } = await ownedTables(db.left);
  const before = await holdingsOf(db.left, owned, organisation.id);
  const from = new pg.Client(url.left);
  const to = new pg.Client(url.right);
  await Promise.all([from.connect(), to.connect()]);
  try {
    let moved = 0;
    const ms = await milliseconds(
      async () => (moved = await copyOrganisation(from, to, owned, organisation.id)),
    );
    const after = await holdingsOf(db.right, owned, organisation.id);
    const differ = [...before].filter(([table, of]) => after.get(table) !== of);
    if (differ.length > 0)
      throw new Error(`Not the same after the move: ${differ.map(([t]) => t).join(', ')}`);
    await db.front.query('update directory set address = $2 where organisation = $1', [
      organisation.ref,
      url.right,
    ]);
    figure('groups.moved_rows', moved, 'rows', 0);
    figure('groups.moved_unit_readings', frames * UNITS, 'readings', 0);
    figure('groups.move', ms / 1000, 's', 1);
    figure('groups.move_rate', (frames * UNITS) / (ms / 1000), 'readings/s', 0);
    figure('groups.move_differences', differ.length, 'tables', 0);
  } finally {
    await Promise.all([from.end(), to.end()]);
  }
}
