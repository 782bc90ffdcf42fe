import { afterAll, beforeAll, expect, it, describe } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { database } from '../../src/server/db/pools';
import { askV1, tokenFor, writeFrames } from '../support/api-v1';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';

const CLINIC = 'Weirside Clinic';
const FROM = new Date(Math.floor(Date.now() / 86_400_000) * 86_400_000 - 86_400_000);
const MINUTES = 180;

let db: TestDatabase;
let fleet: TestFleet;
let manager: Actor;
let token: string;

const framesPath = (more: Record<string, string> = {}): string =>
  `/telemetry/frames?${new URLSearchParams({
    from: FROM.toISOString(),
    to: new Date(FROM.getTime() + MINUTES * 60_000).toISOString(),
    site: fleet.site(CLINIC).ref,
    ...more,
  }).toString()}`;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC]);
  manager = await fleet.actor('manager@lowfield.example');
  await writeFrames(db.owner, fleet.site(CLINIC).id, FROM, MINUTES);
  ({ token } = await tokenFor(manager));
});
afterAll(() => db.drop());

describe('a stream of readings', () => {
  it('brings each report once, in order, as NDJSON and as CSV, by string and by unit', async () => {
    const strings = [...fleet.site(CLINIC).strings.values()];
    const lines = (await (await askV1(framesPath(), { token })).text()).trim().split('\n');
    expect(lines).toHaveLength(strings.length * MINUTES);
    const records = lines.map(
      (l) => JSON.parse(l) as { at: string; voltage: number; units: { voltage: number[] } },
    );
    expect(records[0]?.units.voltage[0]).toBe(39);
    expect(records.map((r) => r.at)).toEqual(records.map((r) => r.at).sort());
    const csv = await (await askV1(framesPath({ by: 'unit', format: 'csv' }), { token })).text();
    const rows = csv.split('\r\n');
    expect(rows[0]).toContain('position,voltage (V)');
    const { rows: slots } = await db.owner.query<{ n: number }>(
      'select sum(slots)::int as n from string where site_id = $1',
      [fleet.site(CLINIC).id],
    );
    expect(rows.length).toBe(2 + (slots[0]?.n ?? 0) * MINUTES);
  });

  it('reads no further than it is taken, and ends when its reader leaves', async () => {
    let taken = () => {};
    const gate = new Promise<void>((resolve) => (taken = resolve));
    const response = await askV1(framesPath(), { token, drained: () => gate });
    const reader = response.body?.getReader();
    const piece = reader?.read();
    const early = await Promise.race([
      piece?.then(() => 'read'),
      new Promise((r) => setImmediate(() => r('waits'))),
    ]);
    expect(early).toBe('waits');
    taken();
    const first = await piece;
    expect(first?.done).toBe(false);
    expect(first?.value?.byteLength ?? 0).toBeLessThan(2_000_000);
    await reader?.cancel();
    const { rows } = await db.owner.query<{ n: number }>(
      `select count(*)::int as n from pg_stat_activity
       where datname = current_database() and state like 'idle in transaction%'`,
    );
    expect(rows[0]?.n).toBe(0);
    const pool = (database('web').client as { pool: { numUsed: () => number } }).pool;
    expect(pool.numUsed()).toBe(0);
  });

  it('is one of few at a time, and gives its place back however it ends', async () => {
    const never = () => new Promise<void>(() => undefined);
    const open = await Promise.all([0, 1].map(() => askV1(framesPath(), { token, drained: never })));
    const third = await askV1(framesPath(), { token });
    expect(third.status).toBe(429);
    expect(Number(third.headers.get('retry-after'))).toBeGreaterThan(0);
    for (const o of open) await o.body?.cancel();
    const again = await askV1(framesPath(), { token });
    expect(again.status).toBe(200);
    await again.text();
    const head = await askV1(framesPath(), { token, method: 'HEAD' });
    expect(head.headers.get('content-type')).toBe('application/x-ndjson');
  });

  it('shows no older reports than the organisation does', async () => {
    await db.owner.query(`update organisation set hide_raw_after_days = 1 where id = $1`, [
      manager.organisationId,
    ]);
    try {
      const text = await (await askV1(framesPath(), { token })).text();
      const shownFrom = new Date(Date.now() - 86_400_000 - 5_000).toISOString();
      for (const line of text.split('\n').filter(Boolean))
        expect((JSON.parse(line) as { at: string }).at >= shownFrom).toBe(true);
    } finally {
      await db.owner.query(`update organisation set hide_raw_after_days = null where id = $1`, [
        manager.organisationId,
      ]);
    }
  });
});
