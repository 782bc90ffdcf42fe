import { randomUUID } from 'node:crypto';
import os from 'node:os';

/** This process among several on one database. */
export interface ThisProcess {
  readonly id: string;
  readonly host: string;
  readonly pid: number;
  readonly startedAt: Date;
}

// one per process, also when a development server reloads this module
const KEY = Symbol.for('wakeline.process');
const shared = globalThis as unknown as Record<symbol, ThisProcess | undefined>;

export const thisProcess = (): ThisProcess =>
  (shared[KEY] ??= {
    id: randomUUID(),
    host: os.hostname(),
    pid: process.pid,
    startedAt: new Date(Date.now() - process.uptime() * 1000),
  });
