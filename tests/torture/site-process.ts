import { fork, type ChildProcess } from 'node:child_process';
import { setTimeout as sleep } from 'node:timers/promises';

/** One process of the built site, started again whenever it ends before its time. */
export class SiteProcess {
  private child: ChildProcess | undefined;
  private ended: Promise<void> = Promise.resolve();
  private stopping = false;
  starts = 0;
  /** Ends of a process at work that nobody here brought about, and starts that came to nothing. */
  fellOver = 0;
  startsInVain = 0;
  private listens = false;
  private newest: string[] = [];
  private killed = false;

  constructor(
    readonly name: string,
    readonly port: number,
    private readonly env: Record<string, string>,
    private readonly hear: (line: string) => void,
    private readonly tell: (text: string) => void,
  ) {}

  get pid(): number {
    return this.child?.pid ?? 0;
  }

  /** Resolves when it listens. */
  async start(): Promise<void> {
    this.starts++;
    const child = fork('src/server/serve.mjs', {
      env: {
        ...process.env,
        ...this.env,
        PORT: String(this.port),
        HOST: '127.0.0.1',
        NODE_ENV: 'production',
      },
      stdio: ['ignore', 'pipe', 'pipe', 'ipc'],
      execArgv: [],
    });
    this.child = child;
    for (const stream of [child.stdout, child.stderr])
      stream?.on('data', (text: Buffer) => {
        for (const line of text.toString().split('\n')) if (line) this.heard(line);
      });
    this.ended = new Promise((resolve) => child.once('exit', () => resolve()));
    this.listens = false;
    const listens = new Promise<void>((resolve) =>
      child.once('message', () => {
        this.listens = true;
        resolve();
      }),
    );
    void this.ended.then(() => this.again());
    await Promise.race([listens, this.ended]);
  }

  private async again(): Promise<void> {
    if (this.stopping) return;
    if (!this.killed && this.listens) {
      this.fellOver++;
      for (const line of this.newest) this.tell(`${this.name} fell over: ${line.slice(0, 600)}`);
    } else if (!this.killed) this.startsInVain++;
    this.killed = false;
    await sleep(1000);
    if (!this.stopping) await this.start();
  }

  private heard(line: string): void {
    this.newest = [...this.newest.slice(-11), line];
    this.hear(`${this.name}: ${line}`);
  }

  kill(): void {
    this.killed = true;
    this.child?.kill('SIGKILL');
  }

  signal(name: NodeJS.Signals): void {
    this.child?.kill(name);
  }

  async stop(): Promise<void> {
    this.stopping = true;
    this.child?.kill('SIGCONT');
    this.child?.kill('SIGTERM');
    await this.ended;
  }

  /** A figure of its own; null: it did not answer, or has none of that name. */
  async figure(series: string): Promise<number | null> {
    try {
      const reply = await fetch(`http://127.0.0.1:${this.port}/metrics`, {
        signal: AbortSignal.timeout(5000),
      });
      const line = (await reply.text()).split('\n').find((l) => l.startsWith(`${series} `));
      return line === undefined ? null : Number(line.slice(series.length + 1));
    } catch {
      return null;
    }
  }

  async ready(withinMs: number): Promise<void> {
    const end = Date.now() + withinMs;
    for (;;) {
      try {
        const reply = await fetch(`http://127.0.0.1:${this.port}/readyz`, {
          signal: AbortSignal.timeout(5000),
        });
        if (reply.ok) return;
        if (Date.now() > end) throw new Error(`${this.name} is not ready: ${await reply.text()}`);
      } catch (error) {
        if (Date.now() > end) throw error;
      }
      await sleep(250);
    }
  }
}
