import { EventEmitter } from 'node:events';
import { setTimeout as sleep } from 'node:timers/promises';
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
interface State {
  /** Whether jobs are to be done here: a worker that ends meanwhile begins again. */
  wanted: boolean;
  working?: Working | undefined;
}
// one per process, also when a development server reloads this module
const KEY = Symbol.for('wakeline.worker');
const shared = globalThis as unknown as Record<symbol, State | undefined>;
const state: State = (shared[KEY] ??= { wanted: false });

/** Between two tries to begin again, ms. */
const AGAIN_AFTER_MS = 3000;

export async function startWorker(): Promise<void> {
  if (state.wanted) return;
  state.wanted = true;
  try {
    state.working = await begin();
  } catch (error) {
    state.wanted = false;
    throw error;
  }
  void keepWorking(state.working);
}

async function begin(): Promise<Working> {
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
    // what became of a job is otherwise written by a promise that nobody waits for: without a database the process ended
    preset: { worker: { completeJobBatchDelay: 0, failJobBatchDelay: 0 } },
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
  return { runner, life, listener, telling };
}

async function end({ runner, life, listener, telling }: Working): Promise<void> {
  await listener.stop();
  await telling.stop();
  // one that gave up by itself says that it has ended already
  await runner.stop().catch((error: unknown) => log.debug({ error }, 'the worker had ended'));
  await life.stop();
}

/** The library gives up for good where its database is gone for a moment: then the worker begins again. */
async function keepWorking(first: Working): Promise<void> {
  let working = first;
  for (;;) {
    await working.runner.promise.catch(() => undefined); // why is in the library's own words in the log
    if (state.working !== working) return; // told to end
    log.warn('the worker ended without being told to; it begins again');
    state.working = undefined;
    await end(working);
    for (;;) {
      await sleep(AGAIN_AFTER_MS);
      if (!state.wanted) return;
      try {
        working = await begin();
        break;
      } catch (error) {
        log.warn(
          { error: error instanceof Error ? error.message : String(error) },
          'the worker can’t begin again yet',
        );
      }
    }
    if (!state.wanted) return end(working);
    state.working = working;
  }
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
export const worksJobs = (): boolean => state.working !== undefined;

/** Lets the jobs that run come to their end. */
export async function stopWorker(): Promise<void> {
  const { working } = state;
  state.wanted = false;
  state.working = undefined;
  if (working) await end(working);
}
