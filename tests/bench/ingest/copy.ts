import { execFile } from 'node:child_process';
import { createWriteStream } from 'node:fs';
import { once } from 'node:events';
import { promisify } from 'node:util';
import type pg from 'pg';
import type { BenchPlant } from './plant';
import { narrowRows } from './readings';

/** Writes the readings as a file for COPY; gives the number of rows. */
export async function writeNarrowFile(
  file: string,
  plant: BenchPlant,
  minutes: number,
  startS: number,
): Promise<void> {
  const out = createWriteStream(file);
  for (const text of narrowRows(plant, minutes, startS)) if (!out.write(text)) await once(out, 'drain');
  out.end();
  await once(out, 'finish');
}

/** Starts a measurement with nothing left to write back, where the account may ask for that. */
export async function checkpoint(db: pg.ClientBase): Promise<void> {
  try {
    await db.query('checkpoint');
  } catch (error) {
    if ((error as { code?: string }).code !== '42501') throw error;
  }
}

/** Seconds that psql \copy needs for the file into a fresh table without an index. */
export async function copySeconds(db: pg.Client, file: string): Promise<number> {
  await db.query('drop table if exists narrow');
  await db.query(
    `create table narrow (at timestamptz not null, unit_id int4 not null, voltage real, current real, temperature real,
       signal int2, via int2, state int2)`,
  );
  await checkpoint(db);
  const start = performance.now();
  await promisify(execFile)(process.env.WAKELINE_PSQL ?? 'psql', [
    process.env.DATABASE_URL ?? '',
    '-q',
    '-v',
    'ON_ERROR_STOP=1',
    '-c',
    `\\copy narrow from '${file}'`,
  ]);
  const seconds = (performance.now() - start) / 1000;
  await db.query('drop table narrow');
  return seconds;
}
