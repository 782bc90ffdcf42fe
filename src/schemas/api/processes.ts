import { z } from 'zod';

const figure = z.number().nullable().default(null);

/** What a process measured of itself in a span of time. Null: there was nothing to measure, or it does no such work. */
export const processFigures = z.object({
  /** Made durable. */
  readingsPerS: figure,
  refused: figure,
  connections: figure,
  /** The most readings that waited at once. */
  waitingReadings: figure,
  /** Times that sockets had to be paused. */
  pauses: figure,
  commitP95Ms: figure,
  ackP95Ms: figure,
  /** From COMMIT to verdicts. */
  judgedP95Ms: figure,
  liveClients: figure,
  liveSent: figure,
  liveSlow: figure,
  jobsRun: figure,
  jobsFailed: figure,
  oldestDueS: figure,
  requestsPerS: figure,
  requestP95Ms: figure,
  requestsFailed: figure,
  loopP50Ms: figure,
  loopP99Ms: figure,
  rssBytes: figure,
  handles: figure,
  poolUsed: figure,
  poolWaiting: figure,
});
export type ProcessFigures = z.infer<typeof processFigures>;

export interface ProcessSample {
  /** The end of the span, epoch s. */
  at: number;
  spanS: number;
  figures: ProcessFigures;
}

export interface ProcessHistory {
  process: string;
  host: string;
  pid: number;
  roles: string[];
  startedAt: string;
  samples: ProcessSample[];
}

/** Hours that the status page looks back. */
export const HISTORY_HOURS = [6, 24, 72] as const;
export type HistoryHours = (typeof HISTORY_HOURS)[number];
