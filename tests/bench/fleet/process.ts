import { readFileSync, readdirSync } from 'node:fs';

/** What a process of this machine has used, as Linux counts it. */
export interface Used {
  /** CPU seconds, in user and kernel. */
  cpuS: number;
  /** Bytes in memory. */
  rss: number;
}

const TICKS_A_S = 100; // USER_HZ, the same on every Linux that Node runs on
const PAGE = 4096;

export function usedBy(pid: number): Used {
  // the name in brackets may hold spaces
  const rest = readFileSync(`/proc/${pid}/stat`, 'utf8').split(') ').at(-1)?.split(' ') ?? [];
  const field = (n: number): number => Number(rest[n - 3]);
  return { cpuS: (field(14) + field(15)) / TICKS_A_S, rss: field(24) * PAGE };
}

const parentOf = (pid: number | string): number =>
  Number(readFileSync(`/proc/${pid}/stat`, 'utf8').split(') ').at(-1)?.split(' ')[1]);

/** CPU seconds of a PostgreSQL server's processes, those that live now; `backend` is the pid of any of them. */
export function cpuOfServer(backend: number): number {
  const postmaster = parentOf(backend);
  let cpuS = usedBy(postmaster).cpuS;
  for (const pid of readdirSync('/proc').filter((name) => /^\d+$/.test(name)))
    try {
      if (parentOf(pid) === postmaster) cpuS += usedBy(Number(pid)).cpuS;
    } catch {
      // it has ended meanwhile: the table of processes changes while it is read
    }
  return cpuS;
}

export const percentile = (values: readonly number[], share: number): number => {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.min(sorted.length - 1, Math.max(0, Math.ceil(share * sorted.length) - 1))] ?? NaN;
};
