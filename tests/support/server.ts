import { fork } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { freePort } from '../../src/server/up/processes.mjs';
import type { TestDatabase } from './database';

/** Of what a process says: a whole journey at its most talkative. */
const KEPT_CHARACTERS = 4_000_000;
const SERVE = fileURLToPath(new URL('../../src/server/serve.mjs', import.meta.url));

export interface RunningSite {
  /** http://127.0.0.1:PORT; https where it was given a certificate. */
  url: string;
  port: number;
  /** What the process said, for a failing test. */
  output(): string;
  /** Sends the process a signal. */
  signal(name: NodeJS.Signals): void;
  /** Ends it as a service manager would; gives its exit code. */
  stop(): Promise<number | null>;
  /** Ends it as a power cut would. */
  kill(): Promise<void>;
}

/** A port that was free may be somebody's connection a moment later: another one is tried then. */
const TRIES = 4;

/** The built site as a process of its own, on a test's database. Stop it before the database is dropped. */
export async function startSite(db: TestDatabase, env: Record<string, string> = {}): Promise<RunningSite> {
  for (let tries = 1; ; tries++)
    try {
      return await startAt(Number(env.PORT ?? (await freePort(0))), db, env);
    } catch (error) {
      const taken = error instanceof Error && error.message.includes('EADDRINUSE');
      if (!taken || env.PORT !== undefined || tries === TRIES) throw error;
    }
}

async function startAt(port: number, db: TestDatabase, env: Record<string, string>): Promise<RunningSite> {
  const child = fork(SERVE, [], {
    env: {
      ...process.env,
      ...db.env,
      NODE_ENV: 'production',
      HOST: '127.0.0.1',
      PORT: String(port),
      LOG_LEVEL: 'warn',
      VITEST: '',
      ...env,
    },
    silent: true,
    execArgv: [],
  });
  let said = '';
  const hear = (chunk: Buffer) => (said = (said + chunk.toString()).slice(-KEPT_CHARACTERS));
  child.stdout?.on('data', hear);
  child.stderr?.on('data', hear);
  const ended = new Promise<void>((resolve) => child.once('exit', () => resolve()));
  await new Promise<void>((resolve, reject) => {
    child.once('message', () => resolve());
    child.once('exit', (code) => reject(new Error(`The site ended with ${code}:\n${said}`)));
  });
  return {
    url: `${env.TLS_CERT ? 'https' : 'http'}://127.0.0.1:${port}`,
    port,
    output: () => said,
    signal: (name) => void child.kill(name),
    stop: async () => {
      child.kill('SIGTERM');
      await ended;
      return child.exitCode;
    },
    kill: async () => {
      child.kill('SIGKILL');
      await ended;
    },
  };
}

/** Signs in over the API; gives the cookie to send. */
export async function signInAt(url: string, email: string, password: string): Promise<string> {
  const response = await fetch(`${url}/api/sign-in`, {
    method: 'POST',
    headers: { 'content-type': 'application/json', origin: url },
    body: JSON.stringify({ email, password }),
  });
  const cookie = response.headers.get('set-cookie')?.split(';')[0];
  if (!response.ok || !cookie)
    throw new Error(`Sign-in of ${email} gave ${response.status}: ${await response.text()}`);
  return cookie;
}
