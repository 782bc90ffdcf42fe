import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import pg from 'pg';
import { closePools } from '../../src/server/db/pools';
import { asActor } from '../../src/server/db/transaction';
import { stringDays, stringMinutes, type Window } from '../../src/server/queries/string-history';
import { writeFrames } from '../../src/server/queries/ingest-frames';
import type { FrameRow } from '../../src/server/queries/ingest-rows';
import { checkpoint } from './ingest/copy';
import { connectLogger } from './ingest/loggers';
import { plantFleet, type BenchPlant } from './ingest/plant';
import { framesMessage, readingOf } from './ingest/readings';
import { serve } from './ingest/server';
import { lineBodies, startPeer, type Peer } from './peer/influx';

/**
 * Beside a general time-series store, Debian's InfluxDB 1.6, in the same run and on the same disk. The same readings:
 * ours through the WebSocket of one process (checked, merged, judged, events and newest state included), its by line
 * protocol, 5,000 lines a request, eight requests at a time. Both durable: an acknowledgement, an answer, means on disk.
 * The same questions: a string's day from the readings of its units, its year from a daily roll-up that both hold; ours
 * as SQL by the web's account with row-level security, its by HTTP. Each store sleeps while the other is measured.
 */
const PORT = Number(process.env.BENCH_PORT ?? 4441);
const SITES = 40;
const STRINGS = 25;
const UNITS = 20;
const MINUTES = Number(process.env.BENCH_MINUTES ?? 60);
const FIRST = 3; // minutes that make each string known to either
const LINES_A_BODY = 5000;
const ROUNDS = 200;
const WARM_UP = 20;
const DAY_S = 86_400;

const say = (text: string) => process.stderr.write(`${text}\n`);
const figure = (name: string, value: number, unit: string, digits = 3) =>
  process.stdout.write(`peer.${name} ${value.toFixed(digits)} ${unit}\n`);
const timed = async (work: () => Promise<unknown>): Promise<number> => {
  const start = performance.now();
  await work();
  return performance.now() - start;
};

/** Bytes of write-ahead log that the server has ever written. */
async function walAt(db: pg.Client): Promise<number> {
  const { rows } = await db.query<{ bytes: string }>(`select pg_current_wal_lsn() - '0/0' as bytes`);
  return Number(rows[0]?.bytes);
}

async function ourSeconds(
  db: pg.Client,
  plant: BenchPlant,
  startS: number,
): Promise<{ seconds: number; walBytes: number }> {
  const server = await serve(PORT, 'ingest,web');
  try {
    const loggers = await Promise.all(plant.sites.map((s) => connectLogger(`ws://127.0.0.1:${PORT}`, s)));
    const messages = loggers.map((l, site) =>
      Array.from({ length: MINUTES }, (_, m) => framesMessage(plant, site, m, startS + 60 * m, l.roster)),
    );
    await Promise.all(loggers.map((l, i) => l.sendAll(messages[i]?.slice(0, FIRST) ?? [], 4)));
    await checkpoint(db);
    const before = await walAt(db);
    say('sending to ours');
    const ms = await timed(() =>
      Promise.all(loggers.map((l, i) => l.sendAll(messages[i]?.slice(FIRST) ?? [], 4))),
    );
    for (const l of loggers) l.close();
    return { seconds: ms / 1000, walBytes: (await walAt(db)) - before };
  } finally {
    await server.stop();
  }
}

async function itsSeconds(peer: Peer, plant: BenchPlant, startS: number): Promise<number> {
  const sites = plant.sites.map((_, i) => i);
  const bodies = (from: number, to: number) => lineBodies(plant, { sites, from, to, startS }, LINES_A_BODY);
  await peer.writeAll(bodies(0, FIRST), 8);
  const rest = bodies(FIRST, MINUTES);
  say('sending to the other');
  return (await timed(() => peer.writeAll(rest, 8))) / 1000;
}

/** A day of minutes and a year of days of the first site, the same in both. */
async function fillQuestions(db: pg.Client, peer: Peer, plant: BenchPlant, dayS: number): Promise<void> {
  const [site] = plant.sites;
  if (!site) throw new Error('The fleet has no site.');
  const date = new Date(dayS * 1000);
  await db.query('select ensure_days($1::date, $1::date)', [date]);
  for (let minute = 0; minute < 1440; minute += 20) {
    const rows: FrameRow[] = [];
    for (const [s, string] of site.strings.entries())
      for (let m = minute; m < minute + 20; m++) {
        const r = Array.from({ length: UNITS }, (_, u) => readingOf(s * UNITS + u, m));
        rows.push({
          stringId: string.id,
          siteId: site.id,
          at: dayS + 60 * m,
          voltage: r.map((x) => x.voltage),
          voltageIn: null,
          current: r.map((x) => x.current),
          power: null,
          temperature: r.map((x) => x.temperature),
          signal: r.map((x) => x.signal),
          via: r.map((x) => x.via),
          state: r.map((x) => x.state),
        });
      }
    await writeFrames(db, rows, new Date(0));
  }
  await peer.writeAll(lineBodies(plant, { sites: [0], from: 0, to: 1440, startS: dayS }, LINES_A_BODY), 4);
  await db.query(
    `insert into string_day (day, string_id, site_id, frames, voltage_avg, voltage_max, energy)
     select $1::date - n, id, site_id, 720, 64000, 66000, 30000 + (id * 131 + n * 17) % 9000
     from string, generate_series(1, 365) n where site_id = $2`,
    [date, site.id],
  );
  const lines = site.strings.flatMap(({ id }) =>
    Array.from(
      { length: 365 },
      (_, i) =>
        `day,string=${id} energy=${30000 + ((id * 131 + (i + 1) * 17) % 9000)}i ${dayS - (i + 1) * DAY_S}`,
    ),
  );
  await peer.write(lines.join('\n'));
  await db.query('vacuum analyze');
}

interface Question {
  name: string;
  ours: (string: number) => Promise<number[]>;
  its: (string: number) => Promise<number[]>;
}

async function ask(questions: readonly Question[], strings: readonly number[]): Promise<void> {
  for (const { name, ours, its } of questions) {
    const sorted: Record<'ours' | 'its', number[]> = { ours: [], its: [] };
    for (const [who, answer] of [
      ['ours', ours],
      ['its', its],
    ] as const)
      for (let i = 0; i < WARM_UP + ROUNDS; i++) {
        const string = strings[(i * 7) % strings.length] ?? 0;
        const ms = await timed(() => answer(string));
        if (i >= WARM_UP) sorted[who].push(ms);
      }
    const [string = 0] = strings;
    const [a, b] = [await ours(string), await its(string)];
    if (a.length === 0 || a.length !== b.length || a.some((v, i) => Math.abs(v - (b[i] ?? NaN)) > 1e-6))
      throw new Error(`The two do not answer "${name}" alike: ${a.length} and ${b.length} values.`);
    for (const list of Object.values(sorted)) list.sort((x, y) => x - y);
    const at = (list: number[], p: number) => list[Math.floor(list.length * p)] ?? NaN;
    figure(`${name}.values`, a.length, 'values', 0);
    figure(`${name}.ours_p50_ms`, at(sorted.ours, 0.5), 'ms');
    figure(`${name}.ours_p95_ms`, at(sorted.ours, 0.95), 'ms');
    figure(`${name}.its_p50_ms`, at(sorted.its, 0.5), 'ms');
    figure(`${name}.its_p95_ms`, at(sorted.its, 0.95), 'ms');
    figure(`${name}.ratio`, at(sorted.its, 0.5) / at(sorted.ours, 0.5), 'times');
  }
}

const db = new pg.Client(process.env.DATABASE_URL);
await db.connect();
const folder = await mkdtemp(path.join(tmpdir(), 'wakeline-peer-'));
try {
  const plant = await plantFleet(db, SITES, STRINGS, UNITS);
  const nowS = Math.floor(Date.now() / 60_000) * 60;
  const startS = nowS - 60 * (MINUTES + 5);
  const dayS = Math.floor(nowS / DAY_S) * DAY_S - 3 * DAY_S;
  await db.query('select ensure_days($1::date, $2::date)', [new Date(startS * 1000), new Date()]);
  const readings = SITES * STRINGS * UNITS * (MINUTES - FIRST);
  const { seconds, walBytes } = await ourSeconds(db, plant, startS);
  const ours = readings / seconds;
  figure('ours_wal_bytes_per_reading', walBytes / readings, 'bytes', 1);
  const peer = await startPeer(folder);
  try {
    const its = readings / (await itsSeconds(peer, plant, startS));
    figure('ours_readings_per_s', ours, '1/s', 0);
    figure('its_readings_per_s', its, '1/s', 0);
    figure('ingest_ratio', ours / its, 'times');
    say('filling a day and a year');
    await fillQuestions(db, peer, plant, dayS);
    const day: Window = { from: new Date(dayS * 1000), to: new Date((dayS + DAY_S) * 1000) };
    const year: Window = { from: new Date((dayS - 365 * DAY_S) * 1000), to: new Date((dayS - 1) * 1000) };
    const actor = { organisationId: 1, sites: 'all' as const };
    await ask(
      [
        {
          name: 'string_day',
          ours: async (id) =>
            (await asActor(actor, (tx) => stringMinutes(tx, id, day, 60, 'voltage'))).map((p) => p.value),
          its: async (id) =>
            (
              await peer.ask(
                `select sum(voltage) from unit where string = '${id}' and time >= ${dayS}s and time < ${dayS + DAY_S}s group by time(1m)`,
              )
            ).map(([, v]) => (v ?? NaN) / 100),
        },
        {
          name: 'string_year',
          ours: async (id) =>
            (await asActor(actor, (tx) => stringDays(tx, id, year, 'UTC', 'power'))).map((p) => p.value),
          its: async (id) =>
            (
              await peer.ask(
                `select energy from day where string = '${id}' and time >= ${dayS - 365 * DAY_S}s and time < ${dayS}s`,
              )
            ).map(([, v]) => (v ?? NaN) / 1000),
        },
      ],
      plant.sites[0]?.strings.map((s) => s.id) ?? [],
    );
  } finally {
    await peer.stop();
  }
} finally {
  await closePools();
  await db.end();
  await rm(folder, { recursive: true });
}
