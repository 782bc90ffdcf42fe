import { spawn, type ChildProcess } from 'node:child_process';
import { setTimeout as sleep } from 'node:timers/promises';

export interface LoadPlan {
  url: string;
  secret: string;
  first: number;
  loggers: number;
  interval: number;
  speed: number;
  noonHour: number;
  seed: number;
  ledger: string;
  /** When the loggers end, wall-clock ms. */
  endMs: number;
}

/** Loggers in a process of their own, so that they can be killed. What they were acknowledged is in their ledger. */
export class LoadProcess {
  private child: ChildProcess | undefined;
  private ended: Promise<void> = Promise.resolve();
  said = '';

  constructor(private readonly plan: LoadPlan) {}

  start(): void {
    const { plan } = this;
    const duration = (plan.endMs - Date.now()) / 1000;
    if (duration < 2) return;
    const options = {
      url: plan.url,
      loggers: plan.loggers,
      first: plan.first,
      interval: plan.interval,
      speed: plan.speed,
      duration,
      drain: 90,
      ramp: 2,
      noonHour: plan.noonHour,
      seed: plan.seed,
      ledger: plan.ledger,
      duplicates: 0.03,
      disorder: 0.03,
      slow: 0.1,
      dead: 0.1,
      clockJumps: 0.3,
      outages: 0.1,
      outageS: 20,
    };
    const args = Object.entries(options).flatMap(([name, value]) => [`--${name}`, String(value)]);
    const child = spawn(process.execPath, ['--import', 'tsx', 'simulator/main.ts', 'load', ...args], {
      env: { ...process.env, WAKELINE_DEMO_SECRET: plan.secret },
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    this.child = child;
    for (const stream of [child.stdout, child.stderr])
      stream.on('data', (text: Buffer) => (this.said = (this.said + text.toString()).slice(-20_000)));
    this.ended = new Promise((resolve) => child.once('exit', () => resolve()));
  }

  async killAndRestart(): Promise<number> {
    this.child?.kill('SIGKILL');
    await this.ended;
    await sleep(1000);
    this.start();
    return this.plan.loggers;
  }

  /** Resolves when the loggers have ended by themselves. */
  async done(withinMs: number): Promise<boolean> {
    let timer: NodeJS.Timeout | undefined;
    const late = new Promise<boolean>((resolve) => {
      timer = setTimeout(() => resolve(false), withinMs);
    });
    const there = await Promise.race([this.ended.then(() => true), late]);
    clearTimeout(timer);
    if (!there) this.child?.kill('SIGKILL');
    return there;
  }
}
