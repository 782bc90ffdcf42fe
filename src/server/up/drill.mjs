import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import process from 'node:process';
import { drillBaseBackup, drillDump } from './backup.mjs';
import { withClient } from './database.mjs';
import { differences, inventoryOf, sequencesBehind, sequencesOf } from './inventory.mjs';
import { homeOf } from './home.mjs';
import { say, sayAside, Stop } from './say.mjs';
import { stageDatabase } from './stage.mjs';

const WAYS = ['base', 'dump'];

const figure = (name, value, unit, digits = 1) =>
  process.stdout.write(`drill.${name} ${value.toFixed(digits)} ${unit}\n`);

/** Free bytes where the copies will lie. */
const freeBytes = (folder) => {
  const { bavail, bsize } = fs.statfsSync(folder);
  return bavail * bsize;
};

/** Compares, says what is not the same, and prints the figures. @returns whether all is the same */
async function compare(way, { kept, sequences, restoredUrl, figures }) {
  const from = performance.now();
  const { there, behind } = await withClient(restoredUrl, async (db) => {
    await db.query('set statement_timeout = 0');
    return { there: await inventoryOf(db), behind: sequencesBehind(sequences, await sequencesOf(db)) };
  });
  const faults = [...differences(kept, there), ...behind];
  for (const fault of faults) process.stdout.write(`NOT THE SAME: ${fault}\n`);
  const rows = [...kept.tables.values()].reduce((sum, t) => sum + Number(t.rows), 0);
  figure(`${way}.backup_s`, figures.backup_s, 's');
  figure(`${way}.restore_s`, figures.restore_s, 's');
  figure(`${way}.compare_s`, (performance.now() - from) / 1000, 's');
  figure(`${way}.writers_held_ms`, figures.held_ms, 'ms', 0);
  figure(`${way}.tables`, kept.tables.size, 'tables', 0);
  figure(`${way}.rows`, rows, 'rows', 0);
  figure(`${way}.differences`, faults.length, 'things', 0);
  say(`newest reading: ${there.newest.newest ?? 'none'}, of ${there.newest.strings} strings`);
  return faults.length === 0;
}

/**
 * `npm run drill`: backs the installation up while it runs, restores into a second server on this machine, compares
 * everything, prints how long each took, and removes what it made.
 * @returns exit code
 */
export async function drill(args) {
  sayAside();
  const unknown = args.filter((arg) => !WAYS.includes(arg));
  if (unknown.length > 0)
    throw new Stop(
      `Unknown: ${unknown.join(' ')}.`,
      `Ways to back up: ${WAYS.join(', ')}; both unless said.`,
    );
  const stage = await stageDatabase('demo');
  let superUrl = stage.url;
  if (stage.own) {
    const at = new URL(stage.url);
    Object.assign(at, { username: 'postgres', password: stage.state.superPassword });
    superUrl = at.href;
  }
  const account = await withClient(superUrl, async (db) => {
    const { rows } = await db.query(
      `select rolsuper as "isSuper", rolreplication or rolsuper as "mayCopy",
              (select sum(pg_database_size(oid)) from pg_database where datallowconn)::float8 as bytes,
              to_regclass('public.organisation') is not null as made
       from pg_roles where rolname = current_user`,
    );
    return rows[0];
  });
  if (!account.made)
    throw new Stop('This database holds no installation yet.', 'Start Wakeline once, then drill.');
  const chosen = args.length > 0 ? args : account.isSuper ? WAYS : ['dump'];
  if (chosen.includes('base') && !account.isSuper)
    throw new Stop(
      'A base backup and its named moment need a superuser of the server.',
      'Give its address as DATABASE_URL, or drill the other way: npm run drill -- dump',
    );
  const base = stage.own ? homeOf('demo') : os.tmpdir();
  if (freeBytes(base) < 2 * account.bytes)
    throw new Stop(
      `The copies need up to ${Math.ceil((2 * account.bytes) / 1e9)} GB, and ${base} has not as much left.`,
      'Make room, or set WAKELINE_HOME (TMPDIR for a database of yours) to a larger file system.',
    );
  let same = true;
  for (const way of chosen) {
    const folder = fs.mkdtempSync(path.join(base, 'drill-'));
    fs.chmodSync(folder, 0o755); // the server's account must be able to enter; what lies in it is its own
    try {
      say(way === 'base' ? 'a base backup, and the log up to a moment' : 'a dump, and a new cluster');
      const check = async (restored) => {
        same = (await compare(way, restored)) && same;
      };
      if (way === 'base') await drillBaseBackup({ superUrl, folder }, check);
      else await drillDump({ url: superUrl, folder, isSuper: account.isSuper }, check);
    } finally {
      fs.rmSync(folder, { recursive: true, force: true });
    }
  }
  if (!stage.own) return same ? 0 : 1;
  await stage.stop();
  return same ? 0 : 1;
}
