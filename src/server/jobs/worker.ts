import { EventEmitter } from 'node:events';
import { parseCronItems, run, runMigrations, type Runner, type WorkerEvents } from 'graphile-worker';
import { config } from '../config';
import { Listener } from '../live/listener';
import { log } from '../log';
import { CHANNELS } from '../queries/live-notices';
import { keepDays } from './keep-days';
import { WorkerLife } from './life';
import { logger } from './logger';
import { CRON, TASKS } from './tasks';
import { TellWatch } from './tell';

/** Background jobs. The library keeps its queue as the database's owner; the jobs themselves work as ingest. */

/** A site's verdicts change in bursts: its causes are looked for so long after the first, once. */
const GATHER_MS = 1000;

interface Working {
  runner: Runner;
  life: WorkerLife;
  listener: Listener;
  telling: TellWatch;
}
// one per process, also when a development server reloads this module
const KEY = Symbol.for('wakeline.worker');
const shared = globalThis as unknown as Record<symbol, Working | undefined>;

export async function startWorker(): Promise<void> {
  if (shared[KEY]) return;
  const connectionString = config().DATABASE_URL;
  await runMigrations({ connectionString, logger });
  await keepDays(new Date());
  const events: WorkerEvents = new EventEmitter();
  let name = '';
  events.once('pool:create', ({ workerPool }) => (name = workerPool.id));
  const runner = await run({
    events,
    connectionString,
    taskList: TASKS,
    parsedCronItems: parseCronItems(CRON),
    concurrency: 2,
    maxPoolSize: 4,
    pollInterval: 5000,
    noHandleSignals: true,
    logger,
  });
  const life = new WorkerLife(name);
  await life.start();
  // a lost wake-up is made good by the sweep
  const listener = new Listener(
    [CHANNELS.judged],
    (_channel, payload) => {
      const siteId = Number(payload);
      if (Number.isInteger(siteId)) void askForCauses(runner, siteId);
    },
    () => undefined,
  );
  await listener.start();
  const telling = new TellWatch();
  await telling.start();
  shared[KEY] = { runner, life, listener, telling };
}

async function askForCauses(runner: Runner, siteId: number): Promise<void> {
  try {
    await runner.addJob(
      'causes',
      { siteId },
      {
        jobKey: `causes:${siteId}`,
        jobKeyMode: 'preserve_run_at',
        runAt: new Date(Date.now() + GATHER_MS),
        queueName: `causes:${siteId}`,
      },
    );
  } catch (error) {
    log.warn({ error, siteId }, 'causes could not be asked for; the sweep looks after them');
  }
}

/** Whether background jobs are done here. */
export const worksJobs = (): boolean => shared[KEY] !== undefined;

/** Lets the jobs that run come to their end. */
export async function stopWorker(): Promise<void> {
  const working = shared[KEY];
  shared[KEY] = undefined;
  await working?.listener.stop();
  await working?.telling.stop();
  await working?.runner.stop();
  await working?.life.stop();
}
