import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { loggerToken } from '../../simulator/scenarios/tokens';
import type { SeededSite } from '../../seeds/plant/seeded';
import type { Roster } from '../../src/schemas/ingest';
import { ingest, startIngest, stopIngest } from '../../src/server/ingest/service';
import { testDatabase, type TestDatabase } from '../support/database';
import { SECRET, testFleet } from '../support/fleet';
import { frameOf, nowS, openSockets, TestLogger, until, type Sockets } from '../support/ingest';
import { HttpsLogger } from '../support/ingest-https';

let db: TestDatabase;
let site: SeededSite;
let sockets: Sockets;
let serial: string;
let token: string;
let logger: HttpsLogger;
let roster: Roster;
let seq = 0;

beforeAll(async () => {
  db = await testDatabase();
  const fleet = await testFleet(db, ['Old Tannery Market Hall']);
  site = fleet.site('Old Tannery Market Hall');
  serial = [...site.loggers.keys()][0] ?? '';
  token = loggerToken(SECRET, serial);
  logger = new HttpsLogger(token);
  await startIngest();
  sockets = await openSockets();
  const answer = await logger.roster();
  expect(answer).toMatchObject({ status: 200, body: { listen: false } });
  roster = answer.body.roster;
});
afterAll(async () => {
  await stopIngest();
  await sockets.close();
  await db.drop();
});

const one = async <T>(sql: string, values: unknown[] = []): Promise<T> =>
  (await db.owner.query(sql, values)).rows[0] as T;
const minute = (at: number) => ({
  type: 'frames',
  seq: ++seq,
  roster: roster.version,
  at: roster.strings.map(() => at),
  string: roster.strings.map((s) => s.index),
  frames: roster.strings.map((s) => frameOf(s.serials.length, 'both')),
});
const framesAt = async (from: number, to = from): Promise<number> =>
  (
    await one<{ n: number }>(
      'select count(*)::int as n from string_frame where at between to_timestamp($1::int4) and to_timestamp($2::int4)',
      [from, to],
    )
  ).n;
/** Keeps frames from being written until it is let go. */
async function holdFrames(): Promise<() => Promise<void>> {
  const lock = await db.owner.connect();
  await lock.query('begin; lock table string_frame in access exclusive mode');
  return async () => {
    await lock.query('rollback');
    lock.release();
  };
}
const waiting = () => until(async () => (ingest()?.figures().waitingReadings ?? 0) > 0, 'readings wait');

describe('a batch by HTTPS', () => {
  it('is durable when it is answered, and twice sent is once stored', async () => {
    const at = nowS() - 300;
    const inverter = roster.inverters[0]?.name ?? '';
    const input = roster.inverters[0]?.inputs[0] ?? 0;
    const batch = [
      { type: 'hello', protocol: 1, logger: serial, firmware: 'batch 3', clock: nowS() },
      minute(at),
      { type: 'inputs', seq: ++seq, rows: [{ at, inverter, input, voltage: 6200, current: 480 }] },
    ];
    for (const _ of ['once', 'twice']) {
      const answer = await logger.post(batch);
      expect(answer).toMatchObject({
        status: 200,
        body: { messages: 3, accepted: 3, refused: [], roster: roster.version, listen: false },
      });
      expect(await framesAt(at)).toBe(roster.strings.length);
      const inputs = await one<{ n: number }>(
        'select count(*)::int as n from input_frame where at = to_timestamp($1::int4)',
        [at],
      );
      expect(inputs.n).toBe(1);
    }
    const known = await one(
      `select firmware, last_address as "from", leased_by as by, leased_until > now() as connected,
         (select count(*)::int from event where site_id = logger.site_id and kind = 'logger_connected') as told
       from logger where serial = $1`,
      [serial],
    );
    expect(known).toEqual({ firmware: 'batch 3', from: '192.0.2.7', by: 'https', connected: true, told: 1 });
  });

  it('is taken as JSON too, one message or a list', async () => {
    const at = nowS() - 420;
    expect(await logger.postJson(minute(at))).toMatchObject({ status: 200, body: { accepted: 1 } });
    expect(await logger.postJson([minute(at + 60)])).toMatchObject({ status: 200, body: { accepted: 1 } });
    expect(await framesAt(at, at + 60)).toBe(2 * roster.strings.length);
  });

  it('names what it refuses by index, field and remedy, and takes the rest', async () => {
    const at = nowS() - 540;
    const bad = minute(at + 60);
    const frame = bad.frames[0];
    if (frame) frame.state[2] = 9;
    const answer = await logger.post([
      minute(at),
      bad,
      'this is no JSON',
      { ...minute(at), roster: roster.version + 5 },
      { type: 'hello', protocol: 1, logger: 'LG-SOMEBODY', firmware: 'x', clock: nowS() },
    ]);
    expect(answer.status).toBe(200);
    expect(answer.body).toMatchObject({ messages: 5, accepted: 1 });
    expect(answer.body.refused.map((r) => [r.index, r.field, r.again])).toEqual([
      [1, 'frames[0].state[2]', false],
      [2, 'message', false],
      [3, 'roster', false],
      [4, 'logger', false],
    ]);
    expect(answer.body.refused[0]).toMatchObject({
      seq: bad.seq,
      remedy: expect.stringContaining('Mend it'),
    });
    expect(answer.body.refused[2]?.remedy).toContain('Fetch the roster again');
    expect(await framesAt(at, at + 60)).toBe(roster.strings.length);
    const kinds = await until(async () => {
      const { rows } = await db.owner.query<{ field: string; count: string }>(
        'select field, count from logger_refusal order by field',
      );
      return rows.length === 4 && rows;
    }, 'refusals are counted by what was wrong');
    expect(kinds.map((k) => k.field)).toEqual(['frames[0].state[2]', 'logger', 'message', 'roster']);
  });

  it('answers no success where nothing could be taken', async () => {
    const answer = await logger.post([{ ...minute(nowS()), at: [] }, '{}']);
    expect(answer.status).toBe(422);
    expect(answer.body.fields.map((f) => f.field)).toEqual(['messages[0].at', 'messages[1].type']);
    expect(await logger.send('', { 'content-type': 'application/x-ndjson' })).toMatchObject({ status: 422 });
  });

  it('is refused without a good token, before its body is looked at', async () => {
    const stranger = new HttpsLogger('no-such-token-at-all', '192.0.2.99');
    expect(await stranger.post([minute(nowS())])).toMatchObject({ status: 401 });
    expect(await stranger.roster()).toMatchObject({ status: 401 });
  });
});

describe('when something breaks in between', () => {
  it('a connection to the database: the answer comes late, and everything is there once', async () => {
    const at = nowS() - 900;
    const letGo = await holdFrames();
    const answering = logger.post([minute(at), minute(at + 60)]);
    await waiting();
    expect(await logger.post([minute(at)])).toMatchObject({ status: 429, retryAfter: '1' });
    await db.owner.query(
      `select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database()
         and wait_event_type = 'Lock' and pid <> pg_backend_pid()`,
    );
    await letGo();
    expect(await answering).toMatchObject({ status: 200, body: { accepted: 2 } });
    expect(await framesAt(at, at + 60)).toBe(2 * roster.strings.length);
  });

  it('the process: no success is told, and the same batch again is stored once', async () => {
    const at = nowS() - 1200;
    const batch = [minute(at), minute(at + 60), minute(at + 120)];
    const letGo = await holdFrames();
    const answering = logger.post(batch);
    await waiting();
    const stopped = stopIngest();
    expect(await answering).toMatchObject({ status: 503, retryAfter: '5' });
    expect(await logger.post(batch)).toMatchObject({ status: 503 });
    await letGo();
    await stopped;
    await startIngest();
    expect(await logger.post(batch)).toMatchObject({ status: 200, body: { accepted: 3 } });
    expect(await framesAt(at, at + 120)).toBe(3 * roster.strings.length);
  });

  it('the queue is full: come back later, and nothing is kept in memory meanwhile', async () => {
    const at = nowS() - 9 * 3600;
    const other = await TestLogger.arrive(sockets, token, serial);
    const letGo = await holdFrames();
    for (let k = 0; k < 1000; k++) other.report(minute(at + 30 * k));
    await until(async () => (ingest()?.figures().pauses ?? 0) > 0, 'the queue is full', 15_000);
    const before = ingest()?.figures().waitingReadings;
    expect(await logger.post([minute(at - 60)])).toMatchObject({ status: 503, retryAfter: '2' });
    expect(ingest()?.figures().waitingReadings).toBe(before);
    await letGo();
    await until(async () => ingest()?.figures().waitingReadings === 0, 'the queue is empty again', 30_000);
    expect(await logger.post([minute(at - 60)])).toMatchObject({ status: 200 });
    // the lease is the connection's as long as it stands
    expect(await one('select leased_by from logger where serial = $1', [serial])).not.toEqual({
      leased_by: 'https',
    });
    other.ws.terminate();
  });
});
