import { spawnSync } from 'node:child_process';
import fs from 'node:fs';
import path from 'node:path';
import process from 'node:process';
import { run } from './processes.mjs';
import { say, Stop } from './say.mjs';

export const isRoot = () => process.getuid?.() === 0;
const BASE = '/usr/lib/postgresql';
const OLDEST = 15;

function versionsUnder(base) {
  if (!fs.existsSync(base)) return [];
  return fs
    .readdirSync(base)
    .filter((v) => fs.existsSync(path.join(base, v, 'bin', 'initdb')))
    .sort((a, b) => Number(b) - Number(a));
}

function fitsVersion(dir, wanted) {
  const { stdout } = spawnSync(path.join(dir, 'initdb'), ['--version'], { encoding: 'utf8' });
  const major = /(\d+)(\.|\s|$)/.exec(stdout ?? '')?.[1];
  return wanted ? major === wanted : Number(major) >= OLDEST;
}

/**
 * The directory with PostgreSQL's server programs, or undefined. `wanted`: the major version of an existing
 * cluster, which only its own programs can open. WAKELINE_PG_BIN names a directory outright.
 */
export function postgresPrograms(wanted) {
  const named = process.env.WAKELINE_PG_BIN;
  if (named) return fs.existsSync(path.join(named, 'initdb')) ? named : undefined;
  const version = versionsUnder(BASE).find((v) => (wanted ? v === wanted : Number(v) >= OLDEST));
  if (version) return path.join(BASE, version, 'bin');
  return (process.env.PATH ?? '')
    .split(path.delimiter)
    .find((dir) => dir && fs.existsSync(path.join(dir, 'initdb')) && fitsVersion(dir, wanted));
}

async function apt(args, what) {
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  const result = await run('apt-get', args, { env, cwd: '/' });
  if (result.code !== 0)
    throw new Stop(
      `Installing ${what} failed:\n${result.out.trim().split('\n').slice(-6).join('\n')}`,
      `Run "apt-get ${args.join(' ')}" by hand, then start again.`,
    );
}

let listsRead;
async function install(packages, what) {
  say(`installing ${what} (Debian package ${packages.join(' ')})`);
  await (listsRead ??= apt(['update', '-qq'], what)); // once a run: it is the longer half
  await apt(['install', '-y', '-qq', '--no-install-recommends', ...packages], what);
}

const hasApt = () => ['/usr/bin/apt-get', '/bin/apt-get'].some((file) => fs.existsSync(file));

/** The same as `postgresPrograms`, but installs Debian's package where that is possible. */
export async function ensurePostgres(wanted) {
  const found = postgresPrograms(wanted);
  if (found) return found;
  const named = process.env.WAKELINE_PG_BIN;
  if (named)
    throw new Stop(
      `WAKELINE_PG_BIN is ${named}, and PostgreSQL's server programs (initdb, postgres) are not there.`,
      'Correct it, or unset it to let them be found.',
    );
  const name = wanted ? `postgresql-${wanted}` : 'postgresql';
  const missing = wanted
    ? `The database here was made by PostgreSQL ${wanted}, whose server programs are not installed.`
    : `PostgreSQL's server programs are not installed.`;
  const instead = 'or set DATABASE_URL to a server of yours';
  if (!hasApt())
    throw new Stop(
      missing,
      `Install PostgreSQL ${wanted ?? `${OLDEST} or newer`}, ${instead}, then start again.`,
    );
  // Debian's package would make and start a cluster of its own on port 5432
  const conf = '/etc/postgresql-common/createcluster.d';
  const setting = `${conf}/wakeline.conf`;
  if (!isRoot())
    throw new Stop(
      missing,
      `Run this once, ${instead}, then start again:\n` +
        `  sudo sh -c 'mkdir -p ${conf} && echo create_main_cluster = false > ${setting} && apt-get update && apt-get install -y ${name}'`,
    );
  fs.mkdirSync(conf, { recursive: true });
  fs.writeFileSync(setting, 'create_main_cluster = false\n');
  await install([name], 'PostgreSQL');
  const now = postgresPrograms(wanted);
  if (!now)
    throw new Stop(
      `Debian's package ${name} is installed, but not PostgreSQL ${wanted ?? `${OLDEST} or newer`}.`,
    );
  return now;
}

/** Debian's Chromiums. The shell draws no window around its pages: a page costs half of what it does in the other. */
const SHELL = '/usr/bin/chromium-headless-shell';
const WHOLE = '/usr/bin/chromium';

/** The Chromium that browser journeys run in: the one that is named, else the leanest that is here. */
export const chromiumAt = () =>
  process.env.WAKELINE_CHROMIUM ?? [SHELL, WHOLE].find((file) => fs.existsSync(file)) ?? WHOLE;

/** Debian's Chromium for the browser journeys; where its shell can't be had, the whole one does. */
export async function ensureChromium() {
  const named = process.env.WAKELINE_CHROMIUM;
  if (!named && !fs.existsSync(SHELL) && isRoot() && hasApt())
    try {
      await install(['chromium-headless-shell', 'fonts-liberation'], "Chromium's shell");
    } catch (error) {
      if (!(error instanceof Stop)) throw error;
      say(`without Chromium's shell: ${error.message}`);
      if (!fs.existsSync(WHOLE)) await install(['chromium', 'fonts-liberation'], 'Chromium');
    }
  const at = chromiumAt();
  if (!fs.existsSync(at))
    throw new Stop(
      `The browser tests need Chromium at ${at}.`,
      'Run "sudo apt-get install -y chromium-headless-shell" once, or set WAKELINE_CHROMIUM to its path, then test again.',
    );
  return at;
}

/** Debian's policy file of services: while it says 101, a package that is installed starts nothing. */
const POLICY = '/usr/sbin/policy-rc.d';
async function withoutServices(work) {
  if (fs.existsSync(POLICY)) return work();
  fs.writeFileSync(POLICY, '#!/bin/sh\nexit 101\n', { mode: 0o755 });
  try {
    return await work();
  } finally {
    fs.rmSync(POLICY, { force: true });
  }
}

/** A Debian package that tests and benches start themselves; its own service is not begun. */
async function ensureServer(name, { setting, at, what }) {
  if (fs.existsSync(at)) return at;
  if (isRoot() && hasApt()) await withoutServices(() => install([name], name));
  if (!fs.existsSync(at))
    throw new Stop(
      `${what} needs ${name} at ${at}.`,
      `Run "sudo apt-get install -y ${name}" once, or set ${setting} to its path, then begin again.`,
    );
  return at;
}

/** Debian's nginx, for the test of the recipe that puts it in front of the site. */
export const ensureNginx = () =>
  ensureServer('nginx', {
    setting: 'WAKELINE_NGINX',
    at: process.env.WAKELINE_NGINX ?? '/usr/sbin/nginx',
    what: 'The test of the reverse proxy',
  });

/** Debian's pgbouncer, for the test of the recipe that puts it in front of the database. */
export const ensurePgbouncer = () =>
  ensureServer('pgbouncer', {
    setting: 'WAKELINE_PGBOUNCER',
    at: process.env.WAKELINE_PGBOUNCER ?? '/usr/sbin/pgbouncer',
    what: 'The test of the connection pooler',
  });

/** Debian's InfluxDB 1.6, a general store of time series, for the bench beside it. */
export const ensureInflux = () =>
  ensureServer('influxdb', {
    setting: 'WAKELINE_INFLUXD',
    at: process.env.WAKELINE_INFLUXD ?? '/usr/bin/influxd',
    what: 'The bench against a general time-series store',
  });

/**
 * initdb and postgres refuse to run as root: then they get the ids of the postgres account (without su, so
 * without PAM and a terminal). Null for everybody else.
 */
export function serverAccount() {
  if (!isRoot()) return null;
  const line = fs
    .readFileSync('/etc/passwd', 'utf8')
    .split('\n')
    .find((entry) => entry.startsWith('postgres:'));
  if (!line)
    throw new Stop(
      'PostgreSQL may not run as root, and there is no account "postgres" to run it as.',
      'Run "adduser --system --group postgres" once, or start as a normal user.',
    );
  const [, , uid, gid] = line.split(':');
  return { uid: Number(uid), gid: Number(gid) };
}
