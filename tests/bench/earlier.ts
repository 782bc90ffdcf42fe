import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { once } from 'node:events';
import { createReadStream, createWriteStream } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { finished } from 'node:stream/promises';
import { Readable } from 'node:stream';
import pg from 'pg';
import type { Actor } from '../../src/domain/access/permissions';
import { guessLayout } from '../../src/domain/history-import/match';
import { HistoryReader } from '../../src/domain/history-import/read';
import type { HistoryImportView, HistoryLine } from '../../src/schemas/api/history-import';
import { closePools } from '../../src/server/db/pools';
import { asActor } from '../../src/server/db/transaction';
import { subjectsOf } from '../../src/server/queries/history-import';
import { takeImportBack } from '../../src/server/services/history-import';
import { answerHistoryImport } from '../../src/server/services/history-import-stream';
import { plantFleet } from './ingest/plant';

/**
 * How long a file of 200,000 rows of an earlier logger takes to come in and to be taken back, and how much memory it
 * takes the process meanwhile, beside a file of a quarter of it in the same run: what is flat is the same for both.
 */
const ROWS = Number(process.env.BENCH_ROWS ?? 200_000);
const HEAD = 'Time;String;Voltage (V);Current (A);Energy (kWh)';
const STRINGS = 8;
const START_S = Date.UTC(2018, 0, 1) / 1000;

const say = (text: string) => process.stderr.write(`${text}\n`);
const figure = (name: string, value: number, unit: string, digits = 3) =>
  process.stdout.write(`${name} ${value.toFixed(digits)} ${unit}\n`);

const row = (i: number, from: number): string => {
  const at = new Date((from + Math.floor(i / STRINGS) * 900) * 1000).toISOString();
  return `${at};S${(i % STRINGS) + 1};${(380 + (i % 40)).toFixed(1)};${(4 + (i % 7) / 10).toFixed(2)};`;
};

/** Writes a file of rows, with what the page would have seen in it before its text. */
async function writeOrder(
  file: string,
  rows: number,
  from: number,
  actor: Actor,
  site: number,
): Promise<void> {
  const { known } = await asActor(actor, (tx) => subjectsOf(tx, site));
  const first = Array.from({ length: 40 }, (_, i) => row(i, from).split(';'));
  const layout = guessLayout(HEAD.split(';'), first, known, true, 'UTC');
  const reader = new HistoryReader(layout, known, Date.now() / 1000);
  for (let i = 0; i < rows; i++) reader.row(row(i, from).split(';'), i + 2, () => undefined);
  const seen = { rows: reader.rows, readings: reader.readings, leftOut: reader.leftOut };
  await writeFile(
    file,
    `${JSON.stringify({ fileName: path.basename(file), separator: ';', layout, seen })}\n`,
  );
  const out = createWriteStream(file, { flags: 'a' });
  out.write(`${HEAD}\n`);
  for (let i = 0; i < rows; i += 2000)
    if (
      !out.write(Array.from({ length: Math.min(2000, rows - i) }, (_, k) => `${row(i + k, from)}\n`).join(''))
    )
      await once(out, 'drain');
  out.end();
  await finished(out);
}

interface Took {
  made: HistoryImportView;
  seconds: number;
  /** Of heap and buffers beyond what stood before, at most. */
  grownMB: number;
  /** Lines of progress that came. */
  told: number;
}
async function bringIn(actor: Actor, siteRef: string, file: string): Promise<Took> {
  globalThis.gc?.();
  const used = () => {
    const { heapUsed, external } = process.memoryUsage();
    return heapUsed + external;
  };
  const before = used();
  let most = before;
  const watch = setInterval(() => (most = Math.max(most, used())), 20);
  const start = performance.now();
  const request = new Request('http://here/x', {
    method: 'POST',
    headers: { accept: 'application/x-ndjson', 'content-type': 'application/octet-stream' },
    body: Readable.toWeb(createReadStream(file)) as ReadableStream,
    duplex: 'half',
  } as RequestInit);
  const response = await answerHistoryImport(
    actor,
    { siteRef, request, address: '127.0.0.1', requestId: 'bench' },
    new Date(),
  );
  const lines = (await response.text()).trim().split('\n');
  clearInterval(watch);
  const seconds = (performance.now() - start) / 1000;
  const last = JSON.parse(lines.at(-1) ?? '{}') as HistoryLine;
  if (!('outcome' in last)) throw new Error(`the import was refused: ${JSON.stringify(last)}`);
  return { made: last.outcome, seconds, grownMB: (most - before) / 1024 / 1024, told: lines.length - 1 };
}

const db = new pg.Client(process.env.DATABASE_URL);
await db.connect();
const folder = await mkdtemp(path.join(tmpdir(), 'wakeline-bench-'));
try {
  const { sites } = await plantFleet(db, 1, STRINGS, 20);
  const site = sites[0];
  if (!site) throw new Error('no site was made');
  await db.query(
    `insert into person (organisation_id, email, name, role, password_hash) values (1, 'bench@measured.example', 'Bench', 'analyst', 'none')`,
  );
  const actor: Actor = { personId: 1, organisationId: 1, role: 'analyst', sites: 'all' };
  const sizes: [name: string, rows: number, from: number][] = [
    ['quarter', Math.round(ROWS / 4), START_S - 3 * 366 * 86_400],
    ['whole', ROWS, START_S],
  ];
  const took = new Map<string, Took>();
  for (const [name, rows, from] of sizes) {
    const file = path.join(folder, `${name}.csv`);
    await writeOrder(file, rows, from, actor, site.id);
    say(`${rows} rows`);
    took.set(name, await bringIn(actor, site.ref, file));
  }
  const [quarter, whole] = [took.get('quarter'), took.get('whole')];
  if (!quarter || !whole) throw new Error('not both files were imported');
  const count = async () =>
    (await db.query<{ n: number }>('select count(*)::int4 as n from history_reading')).rows[0]?.n ?? 0;
  const both = await count();
  if (whole.made.readings !== ROWS || both !== whole.made.readings + quarter.made.readings)
    throw new Error(`not all readings are there: ${whole.made.readings}, ${both}`);
  const start = performance.now();
  await asActor(actor, (tx) =>
    takeImportBack(tx, actor, { site: site.ref, import: whole.made.id }, '', {
      at: new Date(),
      address: '127.0.0.1',
    }),
  );
  const undone = (performance.now() - start) / 1000;
  if ((await count()) !== quarter.made.readings) throw new Error('the undo left readings behind');
  figure('earlier.seconds', whole.seconds, 's');
  figure('earlier.rows_per_s', ROWS / whole.seconds, '1/s', 0);
  figure('earlier.readings', whole.made.readings, 'rows', 0);
  figure('earlier.progress_lines', whole.told, 'lines', 0);
  figure('earlier.memory_MB', whole.grownMB, 'MB', 1);
  figure('earlier.memory_to_quarter', whole.grownMB / quarter.grownMB, 'ratio');
  figure('earlier.undo_seconds', undone, 's');
} finally {
  await closePools();
  await db.end();
  await rm(folder, { recursive: true });
}
