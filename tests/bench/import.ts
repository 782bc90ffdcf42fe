import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { execFile } from 'node:child_process';
import { promisify } from 'node:util';
import pg from 'pg';
import type { Actor } from '../../src/domain/access/permissions';
import type { ImportLine, ImportOrder } from '../../src/schemas/api/import';
import { importBody } from '../../src/schemas/api/import';
import { closePools } from '../../src/server/db/pools';
import { answerImport } from '../../src/server/services/import-as-built-stream';
import { checkpoint } from './ingest/copy';

/**
 * How long an as-built of 10,000 rows takes to come in, from the rows as the browser sends them to the commit: read and
 * checked anew, compared, 250 strings made, slots with their place on the roof, units placed, an entry in the history for
 * each. Beside it psql \copy of the same rows into a bare table without an index, in the same run.
 */
const STRINGS = 250;
const UNITS = 40;
const ROWS = STRINGS * UNITS;
const RUNS = Number(process.env.BENCH_RUNS ?? 3);

const say = (text: string) => process.stderr.write(`${text}\n`);
const figure = (name: string, value: number, unit: string, digits = 3) =>
  process.stdout.write(`${name} ${value.toFixed(digits)} ${unit}\n`);
const median = (list: number[]): number =>
  [...list].sort((a, b) => a - b)[Math.floor(list.length / 2)] ?? NaN;

/** A site with inputs and a catalogue, and no string yet. */
async function plantSite(db: pg.Client, name: string): Promise<string> {
  const { rows } = await db.query<{ id: number; ref: string }>(
    `insert into site (organisation_id, name, latitude, longitude, time_zone) values (1, $1, 51, 0, 'UTC') returning id, ref`,
    [name],
  );
  const site = rows[0];
  if (!site) throw new Error('no site was made');
  await db.query(
    `insert into plane (site_id, name, surface_tilt, surface_azimuth) values ($1, 'South roof', 20, 180)`,
    [site.id],
  );
  await db.query(
    `insert into inverter (site_id, name, ac_power_max) select $1, 'Inverter ' || n, 100000 from generate_series(1, $2::int4) n`,
    [site.id, Math.ceil(STRINGS / 50)],
  );
  await db.query(
    `insert into input (site_id, inverter_id, number) select site_id, id, n from inverter, generate_series(1, 50) n where site_id = $1`,
    [site.id],
  );
  await db.query(`insert into initiator (site_id, name) values ($1, 'Switch')`, [site.id]);
  await db.query(
    `insert into zone (site_id, initiator_id, name) select site_id, id, 'Roof' from initiator where site_id = $1`,
    [site.id],
  );
  await db.query(
    `insert into logger (site_id, serial) select id, 'LG-BENCH-' || id from site where id = $1`,
    [site.id],
  );
  return site.ref;
}

const rowsOf = (run: number): string[][] =>
  Array.from({ length: ROWS }, (_, i) => {
    const s = Math.floor(i / UNITS);
    const p = (i % UNITS) + 1;
    return [
      `S${s + 1}`,
      String(p),
      `UN-${run}-${String(i).padStart(7, '0')}`,
      `Inverter ${Math.floor(s / 50) + 1}`,
      String((s % 50) + 1),
      (1.2 * p).toFixed(2),
      (1.8 * s).toFixed(2),
      `row ${s + 1}, ${p} from the west`,
    ];
  });

const order = (mode: 'check' | 'apply', rows: string[][], seen: string | null): ImportOrder =>
  importBody.parse({
    mode,
    table: {
      columns: ['string', 'position', 'serial', 'inverter', 'input', 'roofX', 'roofY', 'roofPlace'],
      lines: rows.map((_, i) => i + 2),
      rows,
    },
    choices: {
      decimalMark: null,
      fillDown: false,
      meanings: {},
      newStrings: {
        plane: 'South roof',
        input: null,
        zone: 'Roof',
        unitType: 'Reporting unit',
        moduleType: 'Mono 430',
        logger: null,
        transmitters: [],
      },
    },
    reason: 'measured',
    seen,
  });

async function send(actor: Actor, siteRef: string, body: ImportOrder) {
  const response = await answerImport(
    actor,
    { siteRef, order: body, address: '127.0.0.1', requestId: 'bench', accept: 'application/x-ndjson' },
    new Date(),
  );
  const last = JSON.parse((await response.text()).trim().split('\n').at(-1) ?? '{}') as ImportLine;
  if (!('outcome' in last)) throw new Error(`the import was refused: ${JSON.stringify(last)}`);
  return last.outcome;
}

/** Seconds of psql \copy of the same rows into a bare table. */
async function copySeconds(db: pg.Client, file: string): Promise<number> {
  await db.query('drop table if exists bare_rows');
  await db.query(
    `create table bare_rows (string text, position int2, serial text, inverter text, input int2, roof_x real, roof_y real, roof_place text)`,
  );
  await checkpoint(db);
  const start = performance.now();
  await promisify(execFile)(process.env.WAKELINE_PSQL ?? 'psql', [
    process.env.DATABASE_URL ?? '',
    '-q',
    '-v',
    'ON_ERROR_STOP=1',
    '-c',
    `\\copy bare_rows from '${file}'`,
  ]);
  return (performance.now() - start) / 1000;
}

const db = new pg.Client(process.env.DATABASE_URL);
await db.connect();
const folder = await mkdtemp(path.join(tmpdir(), 'wakeline-bench-'));
try {
  await db.query(`insert into organisation (name) values ('Measured Works')`);
  await db.query(
    `insert into person (organisation_id, email, name, role, password_hash) values (1, 'bench@measured.example', 'Bench', 'technician', 'none')`,
  );
  await db.query(
    `insert into module_type (organisation_id, name, voc_ref, isc_ref, vmp_ref, imp_ref, beta_voc, alpha_isc, gamma_pmp, cells_in_series)
     values (1, 'Mono 430', 38.7, 13.95, 32.3, 13.32, -0.0025, 0.00045, -0.003, 54)`,
  );
  await db.query(
    `insert into unit_type (organisation_id, name, kind, out_of_box, released_by, on_command_loss, shutdown_voltage_min,
       shutdown_voltage_max, measures, voltage_in_max, current_max)
     values (1, 'Reporting unit', 'monitored', 'passing', 'logger', 'shuts_down', 0.55, 0.66, 'output', 80, 15)`,
  );
  const actor: Actor = { personId: 1, organisationId: 1, role: 'technician', sites: 'all' };
  const defaults = (ref: string, body: ImportOrder): ImportOrder => ({
    ...body,
    choices: {
      ...body.choices,
      newStrings: body.choices.newStrings && { ...body.choices.newStrings, logger: ref },
    },
  });
  const checks: number[] = [];
  const imports: number[] = [];
  const again: number[] = [];
  const copies: number[] = [];
  for (let run = 0; run < RUNS; run++) {
    const ref = await plantSite(db, `Roof ${run}`);
    const { rows } = await db.query<{ serial: string }>(
      `select l.serial from logger l join site s on s.id = l.site_id where s.ref = $1`,
      [ref],
    );
    const logger = rows[0]?.serial ?? '';
    const cells = rowsOf(run);
    const file = path.join(folder, `rows-${run}.txt`);
    await writeFile(file, `${cells.map((r) => r.join('\t')).join('\n')}\n`);
    await db.query('analyze');
    await checkpoint(db);
    say(`run ${run + 1} of ${RUNS}: ${ROWS} rows`);
    let start = performance.now();
    const seen = await send(actor, ref, defaults(logger, order('check', cells, null)));
    checks.push((performance.now() - start) / 1000);
    if (seen.faultCount > 0) throw new Error(`faults: ${JSON.stringify(seen.faults[0])}`);
    start = performance.now();
    const done = await send(actor, ref, defaults(logger, order('apply', cells, seen.fingerprint)));
    imports.push((performance.now() - start) / 1000);
    start = performance.now();
    const same = await send(actor, ref, defaults(logger, order('check', cells, null)));
    again.push((performance.now() - start) / 1000);
    if (!done.written || done.counts.placed !== ROWS || same.unchanged !== ROWS)
      throw new Error(`not all rows came in: ${JSON.stringify({ done: done.counts, same: same.counts })}`);
    copies.push(await copySeconds(db, file));
  }
  const { rows } = await db.query<{ history: number; placed: number }>(
    `select (select count(*) from audit_entry where action = 'as_built.unit_placed')::int4 as history,
            (select count(*) from placement where placed_to is null)::int4 as placed`,
  );
  if (rows[0]?.history !== ROWS * RUNS || rows[0].placed !== ROWS * RUNS)
    throw new Error(`the history is not whole: ${JSON.stringify(rows[0])}`);
  const seconds = median(imports);
  figure('import.rows_per_s', ROWS / seconds, '1/s', 0);
  figure('import.copy_rows_per_s', ROWS / median(copies), '1/s', 0);
  figure('import.ratio_to_copy', median(copies) / seconds, 'ratio');
  figure('import.seconds', seconds, 's');
  figure('import.check_seconds', median(checks), 's');
  figure('import.unchanged_seconds', median(again), 's');
} finally {
  await closePools();
  await db.end();
  await rm(folder, { recursive: true });
}
