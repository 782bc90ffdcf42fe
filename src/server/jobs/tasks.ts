import type { CronItem, JobHelpers, Task, TaskList } from 'graphile-worker';
import { z } from 'zod';
import { database } from '../db/pools';
import { sendDue } from '../mail/send-outbox';
import { forgetRunsBefore } from '../queries/job-runs';
import { forgetSamplesBefore } from '../queries/process-samples';
import { writeRoofLetters } from '../services/roof-letters';
import { sendCalls } from '../services/webhook-send';
import { checkClosedCases } from '../services/check-closed-cases';
import { judgeAllCauses, judgeSiteCauses } from './judge-causes';
import { keepDays } from './keep-days';
import { mergeLateFrames } from './late-frames';
import { nightsDue } from './nights-due';
import { judgeNight } from './output-night';
import { packDays } from './pack-days';
import { forgetSuperseded } from './queue';
import { recorded, type Done } from './recorded';
import { rollUpClosed, rollUpDirty } from './roll-up';
import { tell, tellGathered } from './tell';
import { jobTitles } from '../../words/jobs-titles';

/**
 * Every kind of background job: what it does, when, and in which queue (jobs of one queue wait for each other). A job
 * may be run twice, by several workers, and be killed anywhere: its effects are there once.
 */
export interface JobKind {
  /** For people. */
  title: string;
  /** Minutes and hours in UTC, as cron has them; null: only when something asks for it. */
  cron: string | null;
  queue: string | null;
  run: (payload: unknown, helpers: JobHelpers) => Promise<Done>;
}

const RUNS_KEPT_MS = 7 * 86_400_000;
const SAMPLES_KEPT_MS = 4 * 86_400_000;
const ofSite = z.object({ siteId: z.int() });
const ofNight = z.object({ siteId: z.int(), day: z.iso.date() });

const kinds = {
  roll_up: {
    title: jobTitles.sums,
    cron: '* * * * *',
    queue: 'roll_up',
    run: async () => {
      const now = new Date();
      const quarters = await rollUpClosed(now);
      const late = await mergeLateFrames(now);
      return { quarters, late, redone: await rollUpDirty() };
    },
  },
  causes: {
    title: jobTitles.causesOfSite,
    cron: null,
    queue: null,
    run: async (payload) => ({ told: await judgeSiteCauses(ofSite.parse(payload).siteId, new Date()) }),
  },
  causes_sweep: {
    title: jobTitles.causes,
    cron: '* * * * *',
    queue: 'causes_sweep',
    run: () => judgeAllCauses(() => new Date()),
  },
  nights: {
    title: jobTitles.sunsets,
    cron: '*/10 * * * *',
    queue: 'nights',
    run: async (_, helpers) => {
      const due = await nightsDue(new Date());
      for (const night of due)
        await helpers.addJob('output_night', night, {
          jobKey: `night:${night.siteId}:${night.day}`,
          jobKeyMode: 'unsafe_dedupe',
          queueName: `night:${night.siteId}`,
        });
      return { asked: due.length };
    },
  },
  output_night: {
    title: jobTitles.judgeDay,
    cron: null,
    queue: null,
    run: async (payload) => {
      const { siteId, day } = ofNight.parse(payload);
      return judgeNight(siteId, day, new Date());
    },
  },
  tell: {
    title: jobTitles.tell,
    cron: '* * * * *',
    queue: 'tell',
    run: () => tell(() => new Date()),
  },
  tell_gathered: {
    title: jobTitles.gatherLetters,
    cron: '* * * * *',
    queue: 'tell',
    run: () => tellGathered(new Date()),
  },
  send_calls: {
    title: jobTitles.callOthers,
    cron: '* * * * *',
    queue: 'calls',
    run: async () => ({ ...(await sendCalls(() => new Date())) }),
  },
  send_letters: {
    title: jobTitles.sendLetters,
    cron: '* * * * *',
    queue: 'letters',
    run: async () => ({ sent: (await sendDue(() => new Date())).sent }),
  },
  check_cases: {
    title: jobTitles.lookAgain,
    cron: '*/10 * * * *',
    queue: 'check_cases',
    run: () => checkClosedCases(new Date()),
  },
  roof_letters: {
    title: jobTitles.roofLetters,
    cron: '*/10 * * * *',
    queue: 'roof_letters',
    run: () => writeRoofLetters(new Date()),
  },
  keep_days: {
    title: jobTitles.makeRoom,
    cron: '7 * * * *',
    queue: 'keep_days',
    run: async () => {
      const now = new Date();
      const dropped = await keepDays(now);
      const runs = await forgetRunsBefore(database('ingest'), new Date(now.getTime() - RUNS_KEPT_MS));
      const samples = await forgetSamplesBefore(
        database('ingest'),
        new Date(now.getTime() - SAMPLES_KEPT_MS),
      );
      return { dropped, runs, samples, superseded: await forgetSuperseded() };
    },
  },
  pack_days: {
    title: jobTitles.pack,
    cron: '23 0 * * *',
    queue: 'keep_days',
    run: () => packDays(new Date()),
  },
} satisfies Record<string, JobKind>;

export type TaskName = keyof typeof kinds;
export const JOBS: Record<TaskName, JobKind> = kinds;

export const TASKS: TaskList = Object.fromEntries(
  Object.entries(JOBS).map(([task, kind]): [string, Task] => [task, recorded(task, kind.run)]),
);

export const CRON: CronItem[] = Object.entries(JOBS).flatMap(([task, { cron, queue }]) =>
  cron === null
    ? []
    : [{ task, match: cron, options: { ...(queue !== null && { queueName: queue }), jobKey: task } }],
);
