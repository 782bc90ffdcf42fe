import { Logger, parseCronItems, run, runMigrations, type Runner, type TaskList } from 'graphile-worker';
import { config } from '../config';
import { log } from '../log';
import { keepDays, mergeLateFrames } from './keep-days';
import { sendDue } from '../mail/send-outbox';
import { rollUpClosed, rollUpDirty } from './roll-up';

/** Background jobs. The library keeps its queue as the database's owner; the jobs themselves work as ingest. */
export const TASKS: TaskList = {
  roll_up: async () => {
    const now = new Date();
    const quarters = await rollUpClosed(now);
    const late = await mergeLateFrames(now);
    const redone = await rollUpDirty();
    if (quarters + late + redone > 0) log.debug({ quarters, late, redone }, 'rolled up');
  },
  send_letters: async () => {
    const { sent } = await sendDue(() => new Date());
    if (sent > 0) log.info({ sent }, 'letters were sent');
  },
  keep_days: async () => {
    const dropped = await keepDays(new Date());
    if (dropped > 0) log.info({ dropped }, 'raw readings past their retention were given up');
  },
};

const CRON = [
  { task: 'roll_up', match: '* * * * *', options: { queueName: 'roll_up', jobKey: 'roll_up' } },
  { task: 'send_letters', match: '* * * * *', options: { queueName: 'letters', jobKey: 'send_letters' } },
  { task: 'keep_days', match: '7 * * * *', options: { queueName: 'keep_days', jobKey: 'keep_days' } },
];

const LEVELS = { error: 'error', warning: 'warn', info: 'debug', debug: 'debug' } as const;
const logger = new Logger(() => (level, message) => {
  log[LEVELS[level]]({ from: 'jobs' }, message);
});

// one per process, also when a development server reloads this module
const KEY = Symbol.for('wakeline.worker');
const shared = globalThis as unknown as Record<symbol, Runner | undefined>;

export async function startWorker(): Promise<void> {
  if (shared[KEY]) return;
  const connectionString = config().DATABASE_URL;
  await runMigrations({ connectionString, logger });
  await keepDays(new Date());
  shared[KEY] = await run({
    connectionString,
    taskList: TASKS,
    parsedCronItems: parseCronItems(CRON),
    concurrency: 2,
    maxPoolSize: 4,
    pollInterval: 5000,
    noHandleSignals: true,
    logger,
  });
}

/** Lets the jobs that run come to their end. */
export async function stopWorker(): Promise<void> {
  const runner = shared[KEY];
  shared[KEY] = undefined;
  await runner?.stop();
}
