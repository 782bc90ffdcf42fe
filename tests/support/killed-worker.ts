import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { Logger, addJobAdhoc } from 'graphile-worker';
import pg from 'pg';
import { expect } from 'vitest';
import { JOBS, type TaskName } from '../../src/server/jobs/tasks';
import type { TestDatabase } from './database';
import { until } from './ingest';
import { programOf } from './program';

export interface JobToKill {
  task: TaskName;
  payload?: unknown;
  /** Names the job; without it the task does, as where the clock asks for it. */
  key?: string;
  /** Where it is stopped: a table that it needs when half of its work is done. */
  at: string;
  /** `share` stops only whoever changes the table. */
  mode?: 'access exclusive' | 'share';
  /** What happens wakes the worker to the same work beside the queue: whichever was first stands in its middle. */
  woken?: boolean;
}

/** One that the clock asked for a moment before counts as well: a queue does one at a time. */
const justBefore = (from: Date): Date => new Date(from.getTime() - 5000);

/**
 * Waits for a part of a minute in which the clock asks for no jobs: at its turn it would have them do what a test has
 * just prepared, or two others would stand at the locked tables, which is all that a worker does at a time.
 */
export async function betweenMinutes(): Promise<void> {
  const second = (Date.now() / 1000) % 60;
  const wait = second < 5 ? 5 - second : second > 35 ? 65 - second : 0;
  await new Promise((resolve) => setTimeout(resolve, wait * 1000));
}

/** A worker as a process of its own, killed in the middle of jobs; another one then does them again. */
export class KilledWorker {
  /** Kinds of job that were killed and done. */
  readonly seen = new Set<TaskName>();
  private current: ChildProcess | undefined;
  private readonly quiet = new Logger(() => () => undefined);

  constructor(
    private readonly db: TestDatabase,
    private readonly env: Record<string, string>,
  ) {}

  async start(): Promise<void> {
    const child = spawn(process.execPath, [await programOf('job-process')], {
      env: { ...process.env, ...this.db.env, ...this.env, LOG_LEVEL: 'silent' },
      stdio: ['pipe', 'pipe', 'inherit'],
    });
    this.current = child;
    await once(child.stdout, 'data');
  }

  async kill(): Promise<void> {
    const child = this.current;
    if (!child || child.exitCode !== null || child.signalCode !== null) return;
    const gone = once(child, 'exit');
    child.kill('SIGKILL');
    await gone;
  }

  async count(sql: string, values: unknown[] = []): Promise<number> {
    const { rows } = await this.db.owner.query<{ n: number }>(
      `select count(*)::int as n from ${sql}`,
      values,
    );
    return rows[0]?.n ?? 0;
  }

  private runs(task: TaskName, ended: boolean, from: Date): Promise<number> {
    return this.count(
      `job_run where task = $1 and (ended_at is not null) = $2 and failed is null and started_at >= $3`,
      [task, ended, from],
    );
  }

  private async began(jobs: readonly JobToKill[], from: Date): Promise<boolean> {
    for (const { task } of jobs) if ((await this.runs(task, false, justBefore(from))) === 0) return false;
    return true;
  }

  private add({ task, payload = {}, key }: JobToKill): Promise<unknown> {
    const connection = { connectionString: this.db.url, logger: this.quiet };
    return addJobAdhoc(connection, task, payload, {
      jobKey: key ?? task,
      queueName: key ?? JOBS[task].queue ?? task,
    });
  }

  private waiting(): Promise<number> {
    return this.count(`pg_stat_activity where datname = current_database() and wait_event_type = 'Lock'`);
  }

  /**
   * Kills the worker while it stands in the middle of these jobs (two at most: it does no more at a time).
   * @param scene what there is to do; made when nothing can be done any more
   * @param half looks at what the dead worker left, before another one starts
   */
  async inTheMiddle(
    jobs: readonly JobToKill[],
    half: () => Promise<void>,
    scene: () => Promise<void> = () => Promise.resolve(),
  ): Promise<void> {
    const lock = new pg.Client(this.db.url);
    await lock.connect();
    try {
      await lock.query('begin');
      for (const { at, mode = 'access exclusive' } of jobs)
        await lock.query(`lock table ${at} in ${mode} mode`);
      await scene();
      const from = new Date();
      for (const job of jobs) await this.add(job);
      await until(
        // what the clock asked for may wait at the same table: these jobs themselves have begun
        async () => (await this.waiting()) >= jobs.length && (await this.began(jobs, from)),
        'the jobs stand in their middle',
        60_000,
      );
      await this.killed(jobs, from, half, async () => {
        await lock.query('rollback');
      });
    } finally {
      await lock.end();
    }
  }

  /** The same for jobs that are stopped by others: a mail server or a system that is called and does not answer. */
  async whileTheyWait(
    tasks: readonly TaskName[],
    stands: () => boolean,
    half: () => Promise<void>,
  ): Promise<void> {
    const from = new Date();
    const jobs = tasks.map((task): JobToKill => ({ task, at: '', woken: true }));
    for (const job of jobs) await this.add(job);
    await until(() => Promise.resolve(stands()), 'the jobs stand in their middle', 60_000);
    await this.killed(jobs, from, half, () => Promise.resolve());
  }

  private async killed(
    jobs: readonly JobToKill[],
    from: Date,
    half: () => Promise<void>,
    letGo: () => Promise<void>,
  ): Promise<void> {
    for (const { task, woken } of jobs)
      if (!woken) expect([task, await this.runs(task, false, justBefore(from))]).toEqual([task, 1]);
    await this.kill();
    await letGo();
    await until(() => this.waiting().then((n) => n === 0), 'the dead worker is gone from the database');
    try {
      await half();
    } finally {
      await this.start();
    }
    for (const { task } of jobs) {
      await until(
        () => this.runs(task, true, from).then((n) => n > 0),
        `${task} is done by another worker`,
        60_000,
      );
      this.seen.add(task);
    }
  }
}
