import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { APIContext } from 'astro';
import type { SeededSite } from '../../seeds/plant/seeded';
import type { Actor } from '../../src/domain/access/permissions';
import { guessLayout } from '../../src/domain/history-import/match';
import { HistoryReader } from '../../src/domain/history-import/read';
import {
  POST as importRoute,
  GET as listRoute,
} from '../../src/pages/api/sites/[site]/history-imports/index';
import { POST as undoRoute } from '../../src/pages/api/sites/[site]/history-imports/[import]/undo';
import type { HistoryImportView, HistoryLine } from '../../src/schemas/api/history-import';
import { asActor } from '../../src/server/db/transaction';
import { subjectsOf } from '../../src/server/queries/history-import';
import { importedDays, importedSiteDays, importedSteps } from '../../src/server/queries/history-readings';
import { siteFigures } from '../../src/server/services/figures';
import { readHistory } from '../../src/server/services/string-history';
import { readHeat, readUnits } from '../../src/server/services/string-units';
import { strangerIn } from '../support/as-built';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet } from '../support/fleet';

let db: TestDatabase;
let site: SeededSite;
let analyst: Actor;
let zone: string;

beforeAll(async () => {
  db = await testDatabase();
  const fleet = await testFleet(db, ['Weirside Clinic']);
  site = fleet.site('Weirside Clinic');
  analyst = await fleet.actor('analyst@lowfield.example');
  zone = (
    await db.owner.query<{ zone: string }>('select time_zone as zone from site where id = $1', [site.id])
  ).rows[0]!.zone;
});
afterAll(() => db.drop());

const names = () => [...site.strings.keys()];
const idOf = (name: string) => site.strings.get(name)?.id ?? 0;
interface Problem {
  status: number;
  detail: string;
  fields: { field: string; message: string }[];
  current?: { import: string };
}

/** What the browser would send of this text. */
async function orderFor(text: string, more: object = {}) {
  const separator = text.includes(';') ? ';' : ',';
  const rows = text
    .trim()
    .split('\n')
    .map((line) => line.split(separator));
  const { known } = await asActor(analyst, (tx) => subjectsOf(tx, site.id));
  const layout = guessLayout(rows[0] ?? [], rows.slice(1, 40), known, true, zone);
  const reader = new HistoryReader(layout, known, Date.now() / 1000);
  rows.slice(1).forEach((cells, i) => reader.row(cells, i + 2, () => undefined));
  const seen = { rows: reader.rows, readings: reader.readings, leftOut: reader.leftOut };
  return { fileName: 'old logger.csv', separator, layout, seen, ...more };
}
async function send(
  text: string,
  more: object = {},
  who = analyst,
): Promise<{ lines: HistoryLine[]; made: HistoryImportView | undefined; problem: Problem | undefined }> {
  const body = `${JSON.stringify(await orderFor(text, more))}\n${text}`;
  const request = new Request('http://here/x', {
    method: 'POST',
    headers: { accept: 'application/x-ndjson', 'content-type': 'application/octet-stream' },
    body,
  });
  const context = {
    locals: { requestId: 'test', actor: who, viewer: { id: 'x' } },
    params: { site: site.ref },
    url: new URL(request.url),
    request,
    clientAddress: '127.0.0.1',
  };
  // of the whole context a route of ours reads only these
  const response = await importRoute(context as unknown as APIContext);
  if (!response.ok) return { lines: [], made: undefined, problem: (await response.json()) as Problem };
  const lines = (await response.text())
    .trim()
    .split('\n')
    .map((line) => JSON.parse(line) as HistoryLine);
  const last = lines.at(-1);
  return {
    lines,
    made: last && 'outcome' in last ? last.outcome : undefined,
    problem: last && 'problem' in last ? last.problem : undefined,
  };
}
const undo = (made: string, who = analyst) =>
  ask(undoRoute, {
    actor: who,
    method: 'POST',
    params: { site: site.ref, import: made },
    body: { reason: '' },
  });
const counted = async (table: string): Promise<number> =>
  (await db.owner.query<{ n: number }>(`select count(*)::int as n from ${table}`)).rows[0]!.n;

const two = (n: number) => String(n).padStart(2, '0');
/** A day of quarters of an hour by the site's clock: 10 A at 400 V from 8 to 16 o'clock, comma decimals. */
function day(date: string, name: string, energyOnly = false): string {
  const rows: string[] = [];
  for (let q = 32; q < 64; q++) {
    const time = `${date} ${two(Math.floor(q / 4))}:${two((q % 4) * 15)}`;
    rows.push(energyOnly ? `${time};${name};;;1,0` : `${time};${name};400,5;10,0;`);
  }
  return rows.join('\n');
}
const HEAD = 'Time;String;Voltage (V);Current (A);Energy (kWh)';

describe('an import', () => {
  it('is kept with its progress told, shown by day and step, and taken back without a trace of its readings', async () => {
    const [a, b] = names();
    const text = `${HEAD}\n${day('2024-05-04', a!)}\n${day('2024-05-04', b!, true)}\n2024-05-05 08:00;${a!};no signal;9,5;\n`;
    const { lines, made } = await send(text, { note: 'from the logger before ours' });
    expect(lines.filter((l) => 'progress' in l).map((l) => ('progress' in l ? l.progress.step : ''))).toEqual(
      ['reading', 'adding_up', 'kept'],
    );
    expect(made).toMatchObject({
      fileName: 'old logger.csv',
      rows: 65,
      readings: 65,
      leftOut: 1,
      doubles: 0,
      of: [a, b].sort().map((n) => `string ${n}`),
      note: 'from the logger before ours',
      undoneAt: null,
    });
    const span = { from: new Date('2024-05-03T00:00:00Z'), to: new Date('2024-05-07T00:00:00Z') };
    const [days, steps, ofSite] = await asActor(analyst, async (tx) => [
      await importedDays(tx, { stringId: idOf(a!) }, span, 'voltage', zone),
      await importedSteps(tx, { stringId: idOf(a!) }, span, 'power', 900),
      await importedSiteDays(tx, [site.id], '2024-05-01', '2024-05-31'),
    ]);
    // 400.5 V × 10 A over 32 quarters of an hour
    expect(days[0]).toMatchObject({ value: expect.closeTo(400.5, 3), energy: expect.closeTo(32_040, 0) });
    expect(steps).toHaveLength(33); // the last one has a current and no voltage
    expect(steps[32]?.value).toBeNull();
    expect(steps[0]).toMatchObject({
      value: expect.closeTo(4005, 1),
      energy: expect.closeTo(1001.25, 2),
      stepS: 900,
    });
    expect(ofSite[0]).toMatchObject({
      day: '2024-05-04',
      energyAc: null,
      energyDc: expect.closeTo(64_040, 0),
    });

    // what pages show of it
    const shown = await asActor(analyst, async (tx) => ({
      history: await readHistory(
        tx,
        site.strings.get(a!)?.ref ?? '',
        { range: 'day', quantity: 'voltage', on: '2024-05-04' },
        new Date(),
      ),
      figures: await siteFigures(tx, site.ref, '2024-05', new Date()),
    }));
    expect(shown.history.imported.values.filter((v) => v !== null)).toHaveLength(32);
    expect(shown.history.at).toEqual([]); // nothing of it passes for measured
    expect(shown.figures.imported[0]).toEqual({
      day: '2024-05-04',
      energyKWh: expect.closeTo(64.04, 2),
      side: 'dc',
    });
    expect(shown.figures.now?.energyKWh ?? 0).toBe(0);

    const response = await undo(made!.id);
    expect(response.status).toBe(200);
    expect(await response.json()).toMatchObject({
      undoneBy: expect.any(String),
      undoneAt: expect.any(String),
    });
    expect([await counted('history_reading'), await counted('history_day')]).toEqual([0, 0]);
    expect(
      await asActor(analyst, (tx) => importedSiteDays(tx, [site.id], '2024-05-01', '2024-05-31')),
    ).toEqual([]);
    expect((await undo(made!.id)).status).toBe(409);
    const list = (await (await ask(listRoute, { actor: analyst, params: { site: site.ref } })).json()) as {
      imports: HistoryImportView[];
    };
    expect(list.imports).toHaveLength(1);
    const audit = await db.owner.query<{ action: string }>(
      `select action from audit_entry where action like 'history.%' order by id`,
    );
    expect(audit.rows.map((r) => r.action)).toEqual(['history.imported', 'history.undone']);
  });

  it('of the same file again is told; after it was taken back it is welcome', async () => {
    const text = `${HEAD}\n${day('2024-06-01', names()[0]!)}\n`;
    const first = await send(text);
    expect(first.made?.readings).toBe(32);
    const kept = await counted('history_reading');
    const again = await send(text);
    expect(again.problem).toMatchObject({
      status: 409,
      detail: expect.stringContaining('was imported already'),
    });
    expect(await counted('history_reading')).toBe(kept);
    await undo(first.made!.id);
    expect((await send(text)).made?.readings).toBe(32);
  });

  it('keeps nothing where the server reads otherwise than the page showed, or nothing can be read', async () => {
    const before = await counted('history_reading');
    const text = `${HEAD}\n${day('2024-07-01', names()[0]!)}\n`;
    const other = await send(text, { seen: { rows: 32, readings: 32, leftOut: 3 } });
    expect(other.problem).toMatchObject({ status: 409 });
    const bad = await send(`${HEAD}\nsometime;${names()[0]!};400;1;\n`);
    expect(bad.problem).toMatchObject({ status: 422, fields: [{ field: 'rows.2.0' }] });
    expect(await counted('history_reading')).toBe(before);
    expect(await counted('history_series')).toBeGreaterThan(0);
  });

  it('never stands in for a day that was measured', async () => {
    const text = `${HEAD}\n${day('2024-08-01', names()[0]!)}\n${day('2024-08-02', names()[0]!)}\n`;
    await send(text);
    await db.owner.query(
      `insert into site_day (site_id, day, energy_ac, energy_dc) values ($1, '2024-08-01', 5000, 5200)`,
      [site.id],
    );
    const days = await asActor(analyst, (tx) => importedSiteDays(tx, [site.id], '2024-08-01', '2024-08-31'));
    expect(days.map((d) => d.day)).toEqual(['2024-08-02']);
  });

  it('of single units stands where a string’s units are shown and nothing was reported', async () => {
    const name = names()[2]!;
    const rows = [1, 2].flatMap((position) =>
      [40, 41, 42].map(
        (q) =>
          `2024-09-03 ${two(Math.floor(q / 4))}:${two((q % 4) * 15)};${name};${position};${38 + position},5;9,0`,
      ),
    );
    const { made } = await send(`Time;String;Position;Voltage (V);Current (A)\n${rows.join('\n')}\n`);
    expect(made?.readings).toBe(6);
    const ref = site.strings.get(name)!.ref;
    const query = { on: '2024-09-03', range: 'day', quantity: 'voltage' } as const;
    const units = await asActor(analyst, (tx) => readUnits(tx, ref, query, new Date()));
    expect([units.imported, units.resolution, units.at.length]).toEqual([true, 'quarter', 3]);
    expect(units.lines.slice(0, 3).map((l) => l.values)).toEqual([
      [39.5, 39.5, 39.5],
      [40.5, 40.5, 40.5],
      [null, null, null],
    ]);
    const heat = await asActor(analyst, (tx) => readHeat(tx, ref, query, new Date()));
    expect([heat.imported, heat.stepS, heat.at]).toEqual([true, 900, units.at]);
    expect(heat.rows[1]?.values).toEqual([40.5, 40.5, 40.5]);
    const other = await asActor(analyst, (tx) =>
      readUnits(tx, ref, { ...query, on: '2024-09-05' }, new Date()),
    );
    expect([other.imported, other.at]).toEqual([false, []]);
  });

  it('is nobody else’s: not the technician’s to make, not another organisation’s to see', async () => {
    const text = `${HEAD}\n${day('2024-09-01', names()[0]!)}\n`;
    expect((await send(text, {}, { ...analyst, role: 'technician' })).problem).toMatchObject({ status: 403 });
    const stranger = await strangerIn(db);
    expect((await send(text, {}, stranger)).problem).toMatchObject({ status: 404 });
    const seen = await asActor(stranger, async (tx) => [
      (await tx.raw<{ rows: unknown[] }>('select * from history_import')).rows,
      (await tx.raw<{ rows: unknown[] }>('select * from history_reading')).rows,
      (await tx.raw<{ rows: unknown[] }>('select * from history_day')).rows,
    ]);
    expect(seen).toEqual([[], [], []]);
  });
});

it('60,000 rows are read as a stream, each reading there once', async () => {
  const name = names()[0]!;
  const lines = [HEAD];
  const start = Date.UTC(2018, 0, 1) / 1000;
  for (let i = 0; i < 60_000; i++)
    lines.push(`${new Date((start + i * 900) * 1000).toISOString()};${name};400;5;`);
  lines.push(lines[1]!); // far from its first
  const before = await counted('history_reading');
  const heap = process.memoryUsage().heapUsed;
  const { made, problem } = await send(`${lines.join('\n')}\n`);
  expect(problem).toBeUndefined();
  expect(made).toMatchObject({ rows: 60_001, readings: 60_000, doubles: 1 });
  expect(await counted('history_reading')).toBe(before + 60_000);
  expect(process.memoryUsage().heapUsed - heap).toBeLessThan(200 * 1024 * 1024);
}, 60_000);
