import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import type { ImportColumn } from '../../src/domain/commissioning/import/columns';
import { NO_CHOICES, type NewStringDefaults } from '../../src/domain/commissioning/import/table';
import { POST as importRoute } from '../../src/pages/api/sites/[site]/as-built/import';
import type { ImportBody, ImportLine, ImportOutcome } from '../../src/schemas/api/import';
import { asActor } from '../../src/server/db/transaction';
import { importAsBuilt, importPage } from '../../src/server/services/import-as-built';
import { answerImport } from '../../src/server/services/import-as-built-stream';
import { importBody } from '../../src/schemas/api/import';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';

const HALL = 'Old Tannery Market Hall';
const OTHER = 'Kestrel Row School';
const BASIC: ImportColumn[] = ['string', 'position', 'serial'];

let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;
let stranger: Actor;
let customer: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, OTHER]);
  technician = await fleet.actor('technician@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  customer = await fleet.actor('customer@lowfield.example');
});
afterAll(async () => {
  await db.drop();
});

const refOf = (name: string): string => fleet.site(name).ref;
type Choices = ImportBody['choices'];
const body = (
  mode: 'check' | 'apply',
  columns: ImportColumn[],
  rows: string[][],
  some: { choices?: Partial<Choices>; seen?: string | null; reason?: string } = {},
): ImportBody => ({
  mode,
  table: { columns, rows, lines: rows.map((_, i) => i + 2) },
  choices: { ...NO_CHOICES, ...some.choices } as Choices,
  reason: some.reason ?? 'As installed',
  seen: some.seen ?? null,
});
const post = (payload: unknown, actor: Actor | null = technician, site = refOf(HALL)) =>
  ask(importRoute, { actor, params: { site }, method: 'POST', body: payload });

async function check(
  ...args: [ImportColumn[], string[][], { choices?: Partial<Choices> }?]
): Promise<ImportOutcome> {
  const response = await post(body('check', ...args));
  expect(response.status).toBe(200);
  return (await response.json()) as ImportOutcome;
}
async function applied(
  columns: ImportColumn[],
  rows: string[][],
  some: { choices?: Partial<Choices> } = {},
): Promise<ImportOutcome> {
  const { fingerprint: seen, faults } = await check(columns, rows, some);
  expect(faults).toEqual([]);
  const response = await post(body('apply', columns, rows, { ...some, seen }));
  const answer: unknown = await response.json();
  expect(response.status, JSON.stringify(answer)).toBe(200);
  return answer as ImportOutcome;
}

/** Who sits where at a site, and all that has been there. */
async function seats(site = HALL): Promise<Map<string, string>> {
  const { rows } = await db.owner.query<{ place: string; serial: string }>(
    `select s.name || '-' || slot.position as place, u.serial from placement p join unit u on u.id = p.unit_id
     join slot on slot.id = p.slot_id join string s on s.id = slot.string_id
     where p.site_id = $1 and p.placed_to is null order by 1`,
    [fleet.site(site).id],
  );
  return new Map(rows.map((r) => [r.place, r.serial]));
}
/** Everything that an import may touch, to compare. */
async function everything(): Promise<string> {
  const { rows } = await db.owner.query<{ all: string }>(
    `select jsonb_build_object(
       'strings', (select jsonb_agg(to_jsonb(s) order by id) from string s),
       'slots', (select jsonb_agg(to_jsonb(s) order by id) from slot s),
       'units', (select jsonb_agg(to_jsonb(u) order by id) from unit u),
       'placements', (select jsonb_agg(to_jsonb(p) order by id) from placement p),
       'audit', (select count(*) from audit_entry))::text as all`,
  );
  return rows[0]?.all ?? '';
}
const asStands = async (string: string): Promise<string[][]> =>
  [...(await seats())]
    .filter(([place]) => place.startsWith(`${string}-`))
    .map(([place, serial]) => [string, place.split('-')[1] ?? '', serial]);

async function defaults(): Promise<NewStringDefaults> {
  const { names } = await asActor(technician, (tx) => importPage(tx, refOf(HALL)));
  return {
    plane: names.planes[0] ?? null,
    input: names.inputs[0] ? `${names.inputs[0].inverter}/${names.inputs[0].number}` : null,
    zone: names.zones[0] ?? null,
    unitType: names.unitTypes.find((t) => t.kind === 'monitored')?.name ?? null,
    moduleType: names.moduleTypes[0] ?? null,
    logger: names.loggers[0] ?? null,
    transmitters: [],
  };
}
const withStrings = async (): Promise<Partial<Choices>> => {
  const d = await defaults();
  return { newStrings: { ...d, transmitters: [...d.transmitters] } };
};

describe('an import', () => {
  it('changes nothing where the file says what stands, whoever wrote it how', async () => {
    const rows = (await asStands('B3')).map(([s = '', p = '', serial = '']) => [
      s.toLowerCase(),
      ` ${p}.0`,
      ` ${serial.toLowerCase()} `,
    ]);
    expect(rows.length).toBeGreaterThan(5);
    const before = await everything();
    const outcome = await applied(BASIC, rows);
    expect(outcome).toMatchObject({ written: false, counts: {}, unchanged: rows.length });
    expect(await everything()).toBe(before);
  });

  it('replaces, moves and swaps with history, names the reason, and is done once', async () => {
    const [first, second, third] = await asStands('B3');
    if (!first || !second || !third) throw new Error('B3 has too few units');
    const rows = [
      ['B3', first[1] ?? '', second[2] ?? ''],
      ['B3', second[1] ?? '', first[2] ?? ''],
      ['B3', third[1] ?? '', 'UN-NEW-0001'],
    ];
    const outcome = await applied(BASIC, rows);
    expect(outcome).toMatchObject({ written: true, counts: { moved: 2, replaced: 1 }, unchanged: 0 });
    const now = await seats();
    expect(now.get(`B3-${first[1]}`)).toBe(second[2]);
    expect(now.get(`B3-${second[1]}`)).toBe(first[2]);
    expect(now.get(`B3-${third[1]}`)).toBe('UN-NEW-0001');
    const { rows: past } = await db.owner.query<{ serial: string }>(
      `select u.serial from placement p join unit u on u.id = p.unit_id where p.placed_to is not null and p.site_id = $1 order by 1`,
      [fleet.site(HALL).id],
    );
    expect(past.map((r) => r.serial)).toEqual([first[2], second[2], third[2]].sort());
    const { rows: told } = await db.owner.query<{
      action: string;
      reason: string;
      person: string;
      source: string;
    }>(
      `select a.action, a.reason, p.email as person, a.after ->> 'source' as source
       from audit_entry a join person p on p.id = a.person_id where a.site_id = $1 and a.action like 'as_built.unit%' order by a.action`,
      [fleet.site(HALL).id],
    );
    expect(told.map((t) => t.action)).toEqual([
      'as_built.unit_moved',
      'as_built.unit_moved',
      'as_built.unit_replaced',
    ]);
    expect(told.every((t) => t.reason === 'As installed' && t.source === 'import')).toBe(true);
    expect(told[0]?.person).toBe('technician@lowfield.example');

    const before = await everything();
    expect(await applied(BASIC, rows)).toMatchObject({ written: false, counts: {}, unchanged: 3 });
    expect(await everything()).toBe(before);
  });

  it('makes strings with slots, places and units, longer ones too', async () => {
    const columns: ImportColumn[] = [...BASIC, 'roofX', 'roofY', 'roofPlace'];
    const rows = [1, 2, 3].map((n) => ['Q1', `${n}`, `UN-Q1-${n}`, `${n},5`, '2', `row one, ${n}`]);
    const choices = await withStrings();
    expect((await check(columns, rows)).faults.map((f) => f.code)).toEqual(['string_unknown']);
    expect(await applied(columns, rows, { choices })).toMatchObject({
      written: true,
      counts: { string_made: 1, placed: 3 },
    });
    const longer = [...rows, ['Q1', '4', 'UN-Q1-4', '4,5', '2', 'row one, 4']];
    expect(await applied(columns, longer, { choices })).toMatchObject({
      written: true,
      counts: { string_grows: 1, placed: 1 },
      unchanged: 3,
    });
    const { rows: slots } = await db.owner.query<{ x: number; place: string; serial: string }>(
      `select slot.roof_x as x, slot.roof_place as place, u.serial from string s join slot on slot.string_id = s.id
       join placement p on p.slot_id = slot.id join unit u on u.id = p.unit_id where s.name = 'Q1' and s.site_id = $1
       order by slot.position`,
      [fleet.site(HALL).id],
    );
    expect(slots).toEqual(
      [1, 2, 3, 4].map((n) => ({ x: n + 0.5, place: `row one, ${n}`, serial: `UN-Q1-${n}` })),
    );
    expect(await applied(columns, longer, { choices })).toMatchObject({ written: false, unchanged: 4 });
  });

  it('is all or nothing: one bad cell, named by row and column, and nothing is written', async () => {
    const elsewhere = [...(await seats(OTHER))][0];
    const before = await everything();
    const rows = [
      ['B4', '1', 'UN-GOOD-1'],
      ['B4', '2', elsewhere?.[1] ?? ''],
      ['B4', '3', 'no serial at all'],
    ];
    const checked = await check(BASIC, rows);
    expect(checked.faults.map((f) => [f.row, f.column, f.code])).toEqual([
      [3, 'serial', 'serial_elsewhere'],
      [4, 'serial', 'serial_format'],
    ]);
    expect(checked.faults[0]?.message).toContain(OTHER);
    const response = await post(body('apply', BASIC, rows, { seen: checked.fingerprint }));
    expect(response.status).toBe(422);
    const told = (await response.json()) as { detail: string; fields: { field: string }[] };
    expect(told.fields.map((f) => f.field)).toEqual(['rows.3.serial', 'rows.4.serial']);
    expect(told.detail).toContain('Nothing was imported');
    expect(await everything()).toBe(before);
  });

  it('refuses to write what the person has not seen', async () => {
    const rows = [['B4', '1', 'UN-LATE-1']];
    const { fingerprint: seen } = await check(BASIC, rows);
    await applied(BASIC, [['B4', '1', 'UN-OTHER-1']]); // somebody else, meanwhile
    const before = await everything();
    const late = await post(body('apply', BASIC, rows, { seen }));
    expect(late.status).toBe(409);
    expect(await everything()).toBe(before);
    expect((await post(body('apply', BASIC, rows, { seen: null }))).status).toBe(422);
    expect((await post(body('apply', BASIC, rows, { seen, reason: ' ' }))).status).toBe(422);
  });

  it('leaves nothing behind when the connection breaks in the middle of it', async () => {
    const rows = Array.from({ length: 40 }, (_, i) => ['R1', `${i + 1}`, `UN-R1-${i + 1}`]);
    const choices = await withStrings();
    const { fingerprint: seen } = await check(BASIC, rows, { choices });
    const before = await everything();
    const order = importBody.parse(body('apply', BASIC, rows, { choices, seen }));
    const asked = {
      siteRef: refOf(HALL),
      order,
      address: '127.0.0.1',
      requestId: 'test',
      accept: 'application/x-ndjson',
    };
    const reader = (await answerImport(technician, asked, new Date())).body?.getReader();
    const steps: string[] = [];
    while (reader && !steps.includes('units')) {
      const { value, done } = await reader.read();
      if (done) break;
      for (const line of new TextDecoder().decode(value).trim().split('\n')) {
        const said = JSON.parse(line) as ImportLine;
        if ('progress' in said) steps.push(said.progress.step);
      }
    }
    expect(steps).toEqual(['reading', 'comparing', 'strings', 'slots', 'units']);
    await reader?.cancel();
    // the transaction is rolled back when its work notices
    await expect
      .poll(async () => {
        const { rows: locks } = await db.owner.query(
          `select from pg_stat_activity where datname = current_database() and state like 'idle in transaction%'`,
        );
        return locks.length;
      })
      .toBe(0);
    expect(await everything()).toBe(before);

    // and the same file goes in afterwards, whole
    const all = await answerImport(technician, asked, new Date());
    const lines = (await all.text())
      .trim()
      .split('\n')
      .map((l) => JSON.parse(l) as ImportLine);
    expect(lines.at(-1)).toMatchObject({
      outcome: { written: true, counts: { placed: 40, string_made: 1 } },
    });
  });

  it('is rolled back when the database connection is killed', async () => {
    const rows = [['B4', '2', 'UN-KILLED-1']];
    const { fingerprint: seen } = await check(BASIC, rows);
    const before = await everything();
    const order = importBody.parse(body('apply', BASIC, rows, { seen }));
    const broken = asActor(technician, async (tx) => {
      const pid = await tx.raw<{ rows: { pid: number }[] }>('select pg_backend_pid() as pid');
      return importAsBuilt(
        tx,
        technician,
        refOf(HALL),
        order,
        { at: new Date(), address: null },
        async (step) => {
          if (step === 'kept') await db.owner.query('select pg_terminate_backend($1)', [pid.rows[0]?.pid]);
        },
      );
    });
    await expect(broken).rejects.toThrow();
    expect(await everything()).toBe(before);
  });

  it('tells its progress in lines, and a problem as a line', async () => {
    const order = importBody.parse(body('check', BASIC, [['B3', '1', '']]));
    const asked = { siteRef: refOf(HALL), address: '', requestId: 'r1', accept: 'application/x-ndjson' };
    const text = await (await answerImport(technician, { ...asked, order }, new Date())).text();
    const lines = text
      .trim()
      .split('\n')
      .map((l) => JSON.parse(l) as ImportLine);
    expect(lines.map((l) => Object.keys(l)[0])).toEqual(['progress', 'progress', 'outcome']);
    const strange = await (await answerImport(stranger, { ...asked, order }, new Date())).text();
    expect(JSON.parse(strange.trim().split('\n').at(-1) ?? '')).toMatchObject({
      problem: { status: 404, requestId: 'r1' },
    });
  });
});

describe('who may', () => {
  const rows = [['B3', '1', '']];
  it('is asked: strangers find no site, customers and people without a session are refused', async () => {
    expect((await post(body('check', BASIC, rows), stranger)).status).toBe(404);
    expect((await post(body('check', BASIC, rows), customer)).status).toBe(403);
    expect((await post(body('check', BASIC, rows), null)).status).toBe(401);
  });
  it('a serial of another organisation is no secret told and no hindrance', async () => {
    await db.owner.query(
      `insert into unit (organisation_id, unit_type_id, serial)
       select o.id, t.id, 'UN-FOREIGN-1' from organisation o join unit_type t on t.organisation_id = o.id
       where o.id <> $1 limit 1`,
      [fleet.site(HALL).organisationId],
    );
    expect(await applied(BASIC, [['B4', '3', 'UN-FOREIGN-1']])).toMatchObject({ written: true });
  });
  it('a body that is no import is refused by field', async () => {
    const wrong = await post({ ...body('check', ['string', 'position'], [['B3', '1']]) });
    expect(wrong.status).toBe(422);
    expect(JSON.stringify(await wrong.json())).toContain('body.table.columns');
    const uneven = body('check', BASIC, rows);
    expect((await post({ ...uneven, table: { ...uneven.table, lines: [] } })).status).toBe(422);
  });
});

it('takes 10,000 rows with all constraints and history', async () => {
  const d = await defaults();
  const rows = Array.from({ length: 10_000 }, (_, i) => [
    `T${Math.floor(i / 50) + 1}`,
    `${(i % 50) + 1}`,
    `UN-T-${String(i).padStart(6, '0')}`,
    `${(i % 50) * 1.2}`,
    `${Math.floor(i / 50) * 1.8}`,
  ]);
  const columns: ImportColumn[] = [...BASIC, 'roofX', 'roofY'];
  const choices: Partial<Choices> = { newStrings: { ...d, transmitters: [] } };
  const outcome = await applied(columns, rows, { choices });
  expect(outcome).toMatchObject({
    written: true,
    rows: 10_000,
    counts: { placed: 10_000, string_made: 200 },
  });
  expect(outcome.changes).toHaveLength(500);
  const { rows: kept } = await db.owner.query<{ n: number }>(
    `select count(*)::int as n from audit_entry where action = 'as_built.unit_placed' and subject like 'unit UN-T-%'`,
  );
  expect(kept[0]?.n).toBe(10_000);
  expect(await applied(columns, rows, { choices })).toMatchObject({ written: false, unchanged: 10_000 });
}, 120_000);
