import { fork } from 'node:child_process';
import { once } from 'node:events';
import path from 'node:path';
import { freePort } from '../../src/server/up/processes.mjs';
import type { TestDatabase } from './database';

const ROOT = path.resolve(import.meta.dirname, '../..');

export interface RunningApp {
  /** Without a slash at the end. */
  url: string;
  port: number;
  /** What it wrote, for a failure's message. */
  output(): string;
  /** Ends it as a service manager would; resolves with its exit code. */
  stop(): Promise<number | null>;
  /** Ends it as a power cut would. */
  kill(): Promise<void>;
}

/** Runs the built site as a process of its own on a free port, against a test database. */
export async function startApp(
  db: Pick<TestDatabase, 'env'>,
  env: Record<string, string> = {},
): Promise<RunningApp> {
  const port = Number(env.PORT ?? (await freePort(0)));
  const app = fork('src/server/serve.mjs', [], {
    cwd: ROOT,
    stdio: ['ignore', 'pipe', 'pipe', 'ipc'],
    execArgv: [],
    env: {
      ...process.env,
      VITEST: '',
      NODE_ENV: 'production',
      LOG_LEVEL: 'warn',
      ...db.env,
      HOST: '127.0.0.1',
      PORT: String(port),
      ...env,
    },
  });
  let text = '';
  for (const stream of [app.stdout, app.stderr])
    stream?.setEncoding('utf8').on('data', (chunk: string) => (text += chunk));
  await new Promise<void>((resolve, reject) => {
    app.once('message', () => resolve());
    app.once('exit', (code) => reject(new Error(`the site ended (${code}) before it listened:\n${text}`)));
  });
  const ended = once(app, 'exit');
  return {
    url: `http://127.0.0.1:${port}`,
    port,
    output: () => text,
    stop: async () => {
      if (app.exitCode === null && app.signalCode === null) app.kill('SIGTERM');
      await ended;
      return app.exitCode;
    },
    kill: async () => {
      app.kill('SIGKILL');
      await ended;
    },
  };
}
