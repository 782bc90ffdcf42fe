import path from 'node:path';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { drillBaseBackup, drillDump, type Restored } from '../../src/server/up/backup.mjs';
import { roleAddresses } from '../../src/server/up/database.mjs';
import {
  differences,
  inventoryOf,
  sequencesBehind,
  sequencesOf,
  type Inventory,
} from '../../src/server/up/inventory.mjs';
import { writeFrames } from '../support/api-v1';
import { testFleet } from '../support/fleet';
import { ownCluster, type OwnCluster } from '../support/own-cluster';

/** Both ways to back up that the README names, each restored into a second server and compared with what was. */
const CLINIC = 'Weirside Clinic';
let cluster: OwnCluster;

beforeAll(async () => {
  cluster = await ownCluster();
  const fleet = await testFleet(cluster, [CLINIC]);
  await writeFrames(cluster.owner, fleet.site(CLINIC).id, new Date(Date.now() - 3_600_000), 30);
  await cluster.owner.query(
    `insert into string_state (string_id, site_id, at, mask, seen) select id, site_id, now(), 0, '{}' from string`,
  );
});
afterAll(() => cluster.drop());

async function using<T>(url: string, work: (db: pg.Client) => Promise<T>): Promise<T> {
  const db = new pg.Client(url);
  db.on('error', () => undefined);
  await db.connect();
  try {
    return await work(db);
  } finally {
    await db.end();
  }
}

const note = (name: string): Promise<unknown> =>
  cluster.owner.query('insert into organisation (name) values ($1)', [name]);
const organisations = (url: string): Promise<string[]> =>
  using(url, async (db) =>
    (await db.query<{ name: string }>('select name from organisation order by name')).rows.map((r) => r.name),
  );
const tablesOf = (kept: Inventory): number => kept.tables.size;

async function expectTheSame({ kept, sequences, restoredUrl }: Restored): Promise<void> {
  expect(tablesOf(kept)).toBeGreaterThan(50);
  expect(kept.tables.get('public.string_frame')?.rows).not.toBe('0');
  expect(kept.newest.newest).not.toBeNull();
  for (const kind of ['policy', 'grant', 'role', 'membership', 'constraint', 'function'])
    expect(kept.rules.get(kind)?.length, kind).toBeGreaterThan(0);
  await using(restoredUrl, async (db) => {
    expect(differences(kept, await inventoryOf(db))).toEqual([]);
    expect(sequencesBehind(sequences, await sequencesOf(db))).toEqual([]);
  });
}

/** The passwords came along: the web's account gets in, and sees nothing that its policies do not show. */
async function expectWalls(restoredUrl: string): Promise<void> {
  const app = new URL(cluster.appUrl);
  app.port = new URL(restoredUrl).port;
  await using(app.href, async (db) => {
    expect((await db.query('select 1 from site')).rowCount).toBe(0);
    await db.query(
      `select set_config('wakeline.organisation', '1', false), set_config('wakeline.sites', '*', false)`,
    );
    expect((await db.query('select 1 from site')).rowCount).toBeGreaterThan(0);
  });
}

describe('a base backup with the log beside it', () => {
  it('comes back as it was at a named moment: with what came after the copy, without what came after the moment', async () => {
    await drillBaseBackup(
      {
        superUrl: cluster.superUrl,
        folder: path.join(cluster.folder, 'base'),
        meanwhile: async (when) => void (await note(when)),
      },
      async (restored) => {
        await expectTheSame(restored);
        const names = await organisations(restored.restoredUrl);
        expect(names).toContain('after the backup');
        expect(names).not.toContain('after the moment');
        await expectWalls(restored.restoredUrl);
        const { appUrl } = await roleAddresses(restored.restoredUrl, 'another secret');
        expect(appUrl).toContain('wakeline_app'); // who lost the secret gives the roles new passwords with the next start
      },
    );
    expect(await organisations(cluster.url)).toContain('after the moment');
    const { rows } = await cluster.owner.query('select slot_name from pg_replication_slots');
    expect(rows).toEqual([]); // a slot that is left holds the log for ever
  });
});

describe('a dump', () => {
  it('comes back in a new cluster with roles, passwords, policies and rights; and what differs is found', async () => {
    await drillDump(
      { url: cluster.superUrl, folder: path.join(cluster.folder, 'dump'), isSuper: true },
      async (restored) => {
        await expectTheSame(restored);
        await expectWalls(restored.restoredUrl);
        await using(restored.restoredUrl, async (db) => {
          await db.query(`update site set name = name || '.' where id = (select min(id) from site)`);
          await db.query('drop policy site_app on site');
          await db.query('grant update on event to wakeline_app');
          await db.query(`select setval(pg_get_serial_sequence('audit_entry', 'id'), 1, false)`);
          await db.query('delete from string_state');
          const found = differences(restored.kept, await inventoryOf(db)).join('\n');
          expect(found).toMatch(/^public\.site: \d+ rows/m);
          expect(found).toMatch(/policy is missing: public\.site site_app/);
          expect(found).toMatch(/grant came from nowhere: public\.event/);
          expect(found).toMatch(/newest reading is of null/);
          const at = new Map([...restored.sequences].map(([name, value]) => [name, value + 1n]));
          expect(sequencesBehind(at, await sequencesOf(db)).length).toBeGreaterThan(0);
        });
      },
    );
  });
});
