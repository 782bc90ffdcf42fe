import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import pg from 'pg';
import { checkpoint, copySeconds, writeNarrowFile } from './ingest/copy';
import { measureLive } from './ingest/live';
import { cpuOfServer, usedBy } from './fleet/process';
import { connectLogger } from './ingest/loggers';
import { plantFleet } from './ingest/plant';
import { framesMessage } from './ingest/readings';
import { serve } from './ingest/server';

/**
 * What ingest can take: readings made durable through the WebSocket of one process, verdicts and events included,
 * beside psql \copy of the same readings as narrow rows into a table without an index, in the same run. And how long
 * a unit's change takes from the wire to a browser at 2,000 readings a second.
 */
const PORT = Number(process.env.BENCH_PORT ?? 4440);
const SITES = 40;
const STRINGS = 25;
const UNITS = 20;
const MINUTES = Number(process.env.BENCH_MINUTES ?? 120);
const WARM_UP_MINUTES = 3;
/** Messages of each logger on the way without an answer: fewer than the site can have in work leave it waiting. */
const WINDOW = 8;

const say = (text: string) => process.stderr.write(`${text}\n`);
const figure = (name: string, value: number, unit: string, digits = 3) =>
  process.stdout.write(`${name} ${value.toFixed(digits)} ${unit}\n`);

const db = new pg.Client(process.env.DATABASE_URL);
await db.connect();
const folder = await mkdtemp(path.join(tmpdir(), 'wakeline-bench-'));
try {
  const plant = await plantFleet(db, SITES, STRINGS, UNITS);
  const readings = SITES * STRINGS * UNITS * MINUTES;
  const startS = Math.floor(Date.now() / 60_000) * 60 - 60 * (MINUTES + 5);
  const day = (s: number) => new Date(s * 1000).toISOString().slice(0, 10);
  await db.query('select ensure_days($1::date, $2::date)', [day(startS), day(Date.now() / 1000)]);
  const file = path.join(folder, 'narrow.txt');
  say(`writing ${readings} readings as rows`);
  await writeNarrowFile(file, plant, MINUTES, startS);
  const copies = [await copySeconds(db, file), await copySeconds(db, file)];

  const server = await serve(PORT, 'ingest,web');
  try {
    const loggers = await Promise.all(plant.sites.map((s) => connectLogger(`ws://127.0.0.1:${PORT}`, s)));
    say('making messages');
    const messages = loggers.map((l, site) =>
      Array.from({ length: MINUTES }, (_, m) => framesMessage(plant, site, m, startS + 60 * m, l.roster)),
    );
    // the first frames of every string begin its judgement: that happens once in its life
    const first = WARM_UP_MINUTES;
    await Promise.all(loggers.map((l, i) => l.sendAll(messages[i]!.slice(0, first), WINDOW)));
    await checkpoint(db);
    say('sending');
    const { rows: backends } = await db.query<{ pid: number }>('select pg_backend_pid() as pid');
    const used = () => ({
      site: usedBy(server.pid).cpuS,
      database: cpuOfServer(backends[0]!.pid),
      loggers: usedBy(process.pid).cpuS,
    });
    const before = used();
    const start = performance.now();
    await Promise.all(loggers.map((l, i) => l.sendAll(messages[i]!.slice(first), WINDOW)));
    const seconds = (performance.now() - start) / 1000;
    const after = used();
    copies.push(await copySeconds(db, file));
    const { rows } = await db.query<{ frames: number; judged: number; events: number; changes: number }>(
      `select (select count(*) from string_frame)::int4 as frames,
         (select count(*) from string_judgement where stuck > 0)::int4 as judged,
         (select count(*) from event)::int4 as events, (select count(*) from unit_event)::int4 as changes`,
    );
    const got = rows[0]!;
    if (got.frames !== SITES * STRINGS * MINUTES)
      throw new Error(`${got.frames} frames are in the database instead of ${SITES * STRINGS * MINUTES}`);
    if (got.changes === 0 || got.events === 0) throw new Error('no verdicts came with the readings');
    const copyRate = readings / copies.sort((a, b) => a - b)[1]!;
    const rate = (readings * (MINUTES - first)) / MINUTES / seconds;
    figure('ingest.readings_per_s', rate, '1/s', 0);
    figure('ingest.copy_rows_per_s', copyRate, '1/s', 0);
    for (const who of ['site', 'database', 'loggers'] as const)
      figure(`ingest.cpu_${who}_us`, ((after[who] - before[who]) * 1e6) / (rate * seconds), 'us');
    figure('ingest.unit_events', got.changes, 'rows', 0);
    figure('ingest.events', got.events, 'rows', 0);
    figure('ingest.ratio_to_copy', rate / copyRate, 'ratio');
    const { rows: sizes } = await db.query<{ bytes: string }>(
      `select sum(pg_total_relation_size(inhrelid)) as bytes from pg_inherits where inhparent = 'string_frame'::regclass`,
    );
    figure('ingest.bytes_per_reading', Number(sizes[0]!.bytes) / readings, 'B', 1);
    for (const l of loggers) l.close();
    // a fleet that has run for a while has statistics: autovacuum would make them within minutes
    await db.query('analyze');
    await measureLive({ db, plant, port: PORT, say, figure });
  } finally {
    await server.stop();
  }
} finally {
  await db.end();
  await rm(folder, { recursive: true });
}
