import { execFile } from 'node:child_process';
import fs from 'node:fs';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { promisify } from 'node:util';
import pg from 'pg';
import { postmasterOf, startCluster } from '../../src/server/up/cluster.mjs';
import type { RoundRobin } from '../support/round-robin';
import type { Chance } from './chance';
import type { LoadProcess } from './load-process';
import type { SiteProcess } from './site-process';

/** What is done to the installation while it works. Each deed ends by itself within half a minute. */
export interface Victims {
  home: string;
  chance: Chance;
  sites: readonly SiteProcess[];
  loads: readonly LoadProcess[];
  proxy: RoundRobin;
  /** An address of the owner's, to fill the pool of connections by. */
  url: string;
  /** A small file system that the database lies on; null: this machine allows none. */
  small: SmallDisk | null;
}
export type Deed = (victims: Victims) => Promise<string>;

const STOPPED_MS = 20_000;
const FILLED_MS = 8000;

const postgresPids = (home: string): number[] => {
  const data = fs.realpathSync(path.join(home, 'pgdata'));
  return fs
    .readdirSync('/proc')
    .filter((entry) => /^\d+$/.test(entry))
    .map(Number)
    .filter((pid) => {
      try {
        return fs.readlinkSync(`/proc/${pid}/cwd`) === data;
      } catch {
        return false; // another account's, or gone meanwhile
      }
    });
};
const signal = (pid: number, name: NodeJS.Signals): void => {
  try {
    process.kill(pid, name);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'ESRCH') throw error;
  }
};
const seconds = (ms: number): string => `${(ms / 1000).toFixed(1)} s`;

/** Kills the server as a power cut would, lets it lie, and starts it again. */
async function killPostgres({ home, chance }: Victims): Promise<string> {
  const server = postmasterOf(home);
  if (!server?.ours) return 'the database server was not there to be killed';
  for (const pid of postgresPids(home)) signal(pid, 'SIGKILL');
  const away = chance.between(500, 6000);
  await sleep(away);
  const beganMs = performance.now();
  await startCluster(home);
  return `database server killed, away ${seconds(away)}, recovered in ${seconds(performance.now() - beganMs)}`;
}

async function killSite({ chance, sites }: Victims): Promise<string> {
  const site = chance.one(sites.filter((s) => s.name !== 'b'));
  site.kill();
  await sleep(100);
  return `process ${site.name} killed`;
}

async function killLoggers({ chance, loads }: Victims): Promise<string> {
  const load = chance.one(loads);
  const loggers = await load.killAndRestart();
  return `${loggers} loggers killed, and started again`;
}

async function stopSite({ chance, sites }: Victims): Promise<string> {
  const site = chance.one(sites);
  const { pid } = site;
  if (pid === 0) return `process ${site.name} was not there to be stopped`;
  signal(pid, 'SIGSTOP');
  await sleep(STOPPED_MS);
  signal(pid, 'SIGCONT');
  return `process ${site.name} stood still for ${seconds(STOPPED_MS)}`;
}

async function stopPostgres({ home }: Victims): Promise<string> {
  const pids = postgresPids(home);
  for (const pid of pids) signal(pid, 'SIGSTOP');
  await sleep(STOPPED_MS);
  for (const pid of pids) signal(pid, 'SIGCONT');
  return `database server stood still for ${seconds(STOPPED_MS)}`;
}

/** Takes every connection that the server still gives, ends those at work, and holds the places for a while. */
async function fillPool({ url }: Victims): Promise<string> {
  const held: pg.Client[] = [];
  const take = async (): Promise<boolean> => {
    const client = new pg.Client({
      connectionString: url,
      application_name: 'filler',
      connectionTimeoutMillis: 2000,
    });
    client.on('error', () => undefined);
    try {
      await client.connect();
      held.push(client);
      return true;
    } catch {
      return false;
    }
  };
  while (held.length < 200 && (await take()));
  await held[0]
    ?.query(
      `select pg_terminate_backend(pid) from pg_stat_activity
       where datname = current_database() and application_name <> 'filler' and pid <> pg_backend_pid()`,
    )
    .catch(() => undefined);
  const until = Date.now() + FILLED_MS;
  while (Date.now() < until && held.length < 200) if (!(await take())) await sleep(100);
  await Promise.all(held.map((client) => client.end().catch(() => undefined)));
  return `${held.length} connections taken, nobody else had one for ${seconds(FILLED_MS)}`;
}

async function cutSockets({ proxy }: Victims): Promise<string> {
  const cut = proxy.cutAll();
  await sleep(2500);
  return `${cut} sockets cut, half of them in the middle of a message`;
}

async function fillDisk({ small, chance }: Victims): Promise<string> {
  if (!small) return 'no small file system on this machine: the full disk was left out';
  const bytes = small.fill();
  await sleep(chance.between(4000, FILLED_MS));
  small.free();
  return `disk full (${Math.round(bytes / 1e6)} MB taken), then free again`;
}

export const DEEDS: Record<string, Deed> = {
  killSite,
  killPostgres,
  killLoggers,
  stopSite,
  stopPostgres,
  fillPool,
  cutSockets,
  fillDisk,
};

/** A file system of a fixed size in memory, for the tablespace of the database. */
export class SmallDisk {
  private constructor(readonly folder: string) {}

  /** Null where this account may not mount. */
  static async make(folder: string, megabytes: number, owner: string): Promise<SmallDisk | null> {
    fs.mkdirSync(folder, { recursive: true });
    await new SmallDisk(folder).remove(); // what a run that was killed left
    try {
      await promisify(execFile)('mount', [
        '-t',
        'tmpfs',
        '-o',
        `size=${megabytes}m,mode=755`,
        'tmpfs',
        folder,
      ]);
    } catch {
      return null;
    }
    const data = path.join(folder, 'data');
    fs.mkdirSync(data, { mode: 0o700 });
    await promisify(execFile)('chown', [owner, data]);
    return new SmallDisk(folder);
  }

  get data(): string {
    return path.join(this.folder, 'data');
  }

  private get filler(): string {
    return path.join(this.folder, 'filler');
  }

  /** Takes all that is left; gives the bytes taken. */
  fill(): number {
    const piece = Buffer.alloc(1 << 20);
    const file = fs.openSync(this.filler, 'w');
    let taken = 0;
    try {
      for (let size = piece.length; size >= 4096;)
        try {
          taken += fs.writeSync(file, piece, 0, size);
        } catch (error) {
          if ((error as NodeJS.ErrnoException).code !== 'ENOSPC') throw error;
          size /= 2;
        }
    } finally {
      fs.closeSync(file);
    }
    return taken;
  }

  free(): void {
    fs.rmSync(this.filler, { force: true });
  }

  async remove(): Promise<void> {
    this.free();
    await promisify(execFile)('umount', ['-l', this.folder]).catch(() => undefined);
  }
}
