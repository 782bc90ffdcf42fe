import { fork, type ChildProcess } from 'node:child_process';

export interface Served {
  port: number;
  pid: number;
  stop(): Promise<void>;
}

/** The built site in a process of its own, with the roles given. */
export async function serve(port: number, roles: string): Promise<Served> {
  // started as `npm start` starts it
  const child: ChildProcess = fork('src/server/serve.mjs', {
    env: { ...process.env, PORT: String(port), HOST: '127.0.0.1', WAKELINE_ROLES: roles },
    stdio: ['ignore', 2, 2, 'ipc'],
    execArgv: ['--max-semi-space-size=64'],
  });
  await new Promise<void>((resolve, reject) => {
    child.once('message', () => resolve());
    child.once('exit', (code) => reject(new Error(`the server ended with ${code} before it listened`)));
  });
  return {
    port,
    pid: child.pid ?? 0,
    stop: () =>
      new Promise((resolve) => {
        child.once('exit', () => resolve());
        child.kill('SIGTERM');
      }),
  };
}
