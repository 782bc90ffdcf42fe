import fs from 'node:fs';
import path from 'node:path';
import process from 'node:process';
import { setTimeout as sleep } from 'node:timers/promises';
import { buildIfStale } from './build.mjs';
import { withClient } from './database.mjs';
import { root } from './place.mjs';
import { run } from './processes.mjs';
import { ensurePostgres } from './programs.mjs';
import { say, sayAside, Stop } from './say.mjs';
import { prepareDatabase, stageDatabase } from './stage.mjs';

/**
 * Runs tests/bench/NAME.ts against a database of its own on a cluster with all its guarantees on, and passes
 * its figures through: one a line, `name value unit`. Progress goes to the error stream.
 */
export async function bench([name, ...rest]) {
  sayAside();
  const folder = new URL('tests/bench/', root);
  const names = fs.existsSync(folder)
    ? fs
        .readdirSync(folder)
        .filter((file) => file.endsWith('.ts'))
        .map((file) => file.slice(0, -3))
    : [];
  if (!name || !names.includes(name))
    throw new Stop(
      name ? `There is no bench "${name}".` : 'Say which bench: npm run bench -- NAME',
      `There are: ${names.join(', ') || 'none'}.`,
    );
  const stage = await stageDatabase('bench');
  if (stage.own) await dropLeftBehind(stage.url);
  const database = `wakeline_bench_${process.pid}`;
  await withClient(stage.url, (db) => db.query(`create database "${database}"`));
  try {
    const url = new URL(stage.url);
    url.pathname = `/${database}`;
    const addresses = await prepareDatabase({ ...stage, url: url.href });
    await buildIfStale();
    say(`measuring ${name}`);
    const result = await run(process.execPath, ['--import', 'tsx', `tests/bench/${name}.ts`, ...rest], {
      cwd: root,
      env: {
        ...process.env,
        DATABASE_URL: url.href,
        DATABASE_URL_APP: addresses.oneRole ? '' : addresses.appUrl,
        DATABASE_URL_INGEST: addresses.oneRole ? '' : addresses.ingestUrl,
        DATABASE_ONE_ROLE: addresses.oneRole ? '1' : '0',
        WAKELINE_PSQL: path.join(await ensurePostgres(), 'psql'),
        LOG_LEVEL: process.env.LOG_LEVEL || 'warn',
      },
      onLine: (line) =>
        (/^[\w.]+ -?[\d.]+(e[+-]?\d+)? \S+$/.test(line) ? process.stdout : process.stderr).write(`${line}\n`),
    });
    return result.code ?? 1;
  } finally {
    await dropDatabase(stage.url, database);
  }
}

/** Autovacuum may be at work in a large one: that leaves by itself, and the database's owner can't end it. */
async function dropDatabase(url, database) {
  for (let tries = 0; ; tries++)
    try {
      await withClient(url, (db) => db.query(`drop database if exists "${database}" with (force)`));
      return;
    } catch (error) {
      if (error.code !== '42501' || tries >= 150) throw error;
      await sleep(200);
    }
}

/** Databases of benches that ended without a chance to drop theirs. */
async function dropLeftBehind(url) {
  const { rows } = await withClient(url, (db) =>
    db.query(`select datname from pg_database where datname ~ '^wakeline_bench_[0-9]+$'`),
  );
  for (const { datname } of rows)
    if (!fs.existsSync(`/proc/${datname.split('_').at(-1)}`)) await dropDatabase(url, datname);
}
