import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { loggerToken } from '../../simulator/scenarios/tokens';
import type { Actor } from '../../src/domain/access/permissions';
import { closePools, database, signInPool } from '../../src/server/db/pools';
import { asActor, asIngest, asSignIn, type Tx } from '../../src/server/db/transaction';
import { isDatabaseAway } from '../../src/server/errors';
import { startIngest, stopIngest } from '../../src/server/ingest/service';
import { startWorker, stopWorker } from '../../src/server/jobs/worker';
import { Listener } from '../../src/server/live/listener';
import { CHANNELS, tellSiteChanged } from '../../src/server/queries/live-notices';
import { replicaStatus } from '../../src/server/replica';
import { testDatabase, type TestDatabase } from '../support/database';
import { SECRET, testFleet, type TestFleet } from '../support/fleet';
import { frameOf, nowS, openSockets, TestLogger, until } from '../support/ingest';
import { startPooler, type Pooler } from '../support/pooler';

/** pgbouncer in transaction mode, by the README's recipe, with fewer connections behind it than there are who ask. */
const MARKET = 'Old Tannery Market Hall';
const BEHIND = 2;
let db: TestDatabase;
let fleet: TestFleet;
let pooler: Pooler;
let manager: Actor;
let other: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [MARKET]);
  manager = await fleet.actor('manager@lowfield.example');
  other = await fleet.actor('manager@harbourline.example');
  pooler = await startPooler(db, BEHIND);
  process.env.DATABASE_POOLER_URL = pooler.url;
});
afterAll(async () => {
  await closePools();
  await pooler.stop();
  await db.drop();
});

interface Look {
  pid: number;
  sites: number;
  settings: string;
}
const look = async (tx: Tx): Promise<Look> => {
  const { rows } = await tx.raw<{ rows: Look[] }>(
    `select pg_backend_pid() as pid, (select count(*)::int from site) as sites,
            concat_ws(' ', current_user, current_setting('jit'), current_setting('statement_timeout'), current_setting('lock_timeout')) as settings,
            pg_sleep(0.01)`,
  );
  const [row] = rows;
  if (!row) throw new Error('the database does not say');
  return row;
};

describe('behind a pooler', () => {
  it('many transactions share few connections, and none sees with the eyes of the one before', async () => {
    const looks = await Promise.all(
      Array.from({ length: 60 }, (_, i) => asActor(i % 2 ? manager : other, look)),
    );
    expect(new Set(looks.map((l) => l.pid)).size).toBeLessThanOrEqual(BEHIND);
    looks.forEach((l, i) => expect(l.sites, `transaction ${i}`).toBe(i % 2 ? 1 : 0));
    expect(new Set(looks.map((l) => l.settings))).toEqual(new Set(['wakeline_app off 30s 10s']));
    // outside a transaction of an actor nothing is left to see with
    const { rows } = await database('web').raw<{ rows: { n: number }[] }>(
      'select count(*)::int as n from site',
    );
    expect(rows).toEqual([{ n: 0 }]);
    expect((await asIngest(look)).settings).toBe('wakeline_ingest off 30s 10s');
    const { rows: plain } = await database('ingest').raw<{ rows: { t: string }[] }>(
      `select current_setting('statement_timeout') as t`,
    );
    expect(plain).toEqual([{ t: '30s' }]); // the recipe's connect_query
  });

  it('signing in keeps connections of its own, whose purpose no pooled one has', async () => {
    const people = (tx: Tx) => tx.raw<{ rows: { n: number }[] }>('select count(*)::int as n from person');
    expect((await asSignIn(people)).rows[0]?.n).toBeGreaterThan(3);
    expect(
      (await signInPool().query<{ n: number }>('select count(*)::int as n from person')).rows[0]?.n,
    ).toBeGreaterThan(3);
    const { rows } = await database('web').raw<{ rows: { n: number }[] }>(
      'select count(*)::int as n from person',
    );
    expect(rows[0]?.n).toBe(0);
  });

  it('locks of a transaction go one after the other, and end with it', async () => {
    let inside = 0;
    let most = 0;
    await Promise.all(
      Array.from({ length: 8 }, () =>
        asActor(manager, async (tx) => {
          await tx.raw('select pg_advisory_xact_lock(727999)');
          most = Math.max(most, ++inside);
          await tx.raw('select pg_sleep(0.01)');
          inside--;
        }),
      ),
    );
    expect(most).toBe(1);
    const { rows } = await db.owner.query(
      `select 1 from pg_locks l join pg_database d on d.oid = l.database
       where d.datname = current_database() and locktype = 'advisory' and objid = 727999`,
    );
    expect(rows).toEqual([]);
  });

  it('notices that a pooled transaction sends arrive, for who listens does so past the pooler', async () => {
    const heard: string[] = [];
    const listener = new Listener(
      [CHANNELS.changed],
      (_, payload) => heard.push(payload),
      () => undefined,
    );
    await listener.start();
    try {
      await asActor(manager, (tx) => tellSiteChanged(tx, fleet.site(MARKET).id));
      await expect.poll(() => heard.length).toBe(1);
    } finally {
      await listener.stop();
    }
  });

  it('a logger is served: lease, prepared statements of the lanes, judgement, and the worker beside it', async () => {
    const site = fleet.site(MARKET);
    const [serial = ''] = site.loggers.keys();
    await startWorker();
    await startIngest();
    const sockets = await openSockets();
    try {
      const logger = await TestLogger.arrive(sockets, loggerToken(SECRET, serial), serial);
      const from = nowS() - 600;
      const seqs = Array.from({ length: 10 }, (_, k) =>
        logger.report(
          logger.frames(
            logger.roster.strings.map((s) => ({
              at: from + 60 * k,
              string: s.index,
              frame: frameOf(s.serials.length, 'both'),
            })),
          ),
        ),
      );
      const acked = () => new Set(logger.inbox.all.flatMap((m) => (m.type === 'ack' ? [m.seq] : [])));
      await expect.poll(() => seqs.every((s) => acked().has(s))).toBe(true);
      await until(async () => {
        const { rows } = await db.owner.query<{ n: number }>(
          'select count(*)::int as n from string_judgement',
        );
        return (rows[0]?.n ?? 0) > 0;
      }, 'strings are judged');
      const { rows } = await db.owner.query<{ by: string | null; held: boolean }>(
        'select leased_by as by, leased_until > now() as held from logger where serial = $1',
        [serial],
      );
      expect(rows[0]?.held).toBe(true);
      // connections of the pool have prepared nothing: such a statement would meet another's of its name
      const pooled = await Promise.all(
        Array.from({ length: 6 }, () =>
          database('ingest').raw<{ rows: { n: number }[] }>(
            'select count(*)::int as n, pg_sleep(0.01) from pg_prepared_statements',
          ),
        ),
      );
      expect(pooled.flatMap((p) => p.rows.map((r) => r.n))).toEqual([0, 0, 0, 0, 0, 0]);
    } finally {
      await stopIngest();
      await sockets.close();
      await stopWorker();
    }
  });

  it('a pooler that is gone is a database that is away, not a fault of the request; no replica is asked', async () => {
    await closePools();
    await pooler.stop();
    const error = await asActor(manager, look).then(
      () => undefined,
      (e: unknown) => e,
    );
    expect(isDatabaseAway(error)).toBe(true);
    expect(await replicaStatus()).toMatchObject({ configured: false });
  });
});
