import { SILENT_AFTER_INTERVALS } from '../../domain/verdicts/judge';
import type { Item } from './batch';

/** How far a logger's reports have come, as the process that judges its strings knows it. Epoch seconds. */
export type Progress =
  | {
      served: true;
      /** When it last said anything. */
      spokeS: number;
      /** Its newest report of anything that was judged; 0: none yet. */
      newestS: number;
      /** Something that it reported is not judged yet, or it was told to stop for a while. */
      waiting: boolean;
    }
  /** Not connected here, at least since `sinceS`. */
  | { served: false; sinceS: number };

/** A logger that comes back has so long to do it before its strings are judged without it. */
export const RETURN_WITHIN_S = 60;

/**
 * The instant up to which nothing more is expected, or null where that can't be said yet. A logger that brings what
 * it kept through an outage is followed on its own time, and so is one whose reports wait for the database; one that is
 * connected and quiet, or that stays away, has nothing more to say about the past.
 */
export function eventTime(progress: Progress, reportIntervalS: number, nowS: number): number | null {
  if (!progress.served) return nowS - progress.sinceS >= RETURN_WITHIN_S ? nowS : null;
  const { spokeS, newestS, waiting } = progress;
  const quiet = nowS - spokeS > 1.5 * reportIntervalS;
  const inTime = nowS - newestS < SILENT_AFTER_INTERVALS * reportIntervalS;
  if (!waiting && (quiet || inTime)) return nowS;
  return newestS > 0 ? newestS : null;
}

/** What became of the loggers' reports in this process: those that wait, and how far they were judged. */
export class Reports {
  private readonly waiting = new Map<number, number>();
  private readonly newestS = new Map<number, number>();

  /** A report that joins the queue. */
  joined({ loggerId }: Pick<Item, 'loggerId'>): void {
    this.waiting.set(loggerId, (this.waiting.get(loggerId) ?? 0) + 1);
  }

  /** A report that joined the queue was judged, or refused for good. */
  left({ loggerId, work }: Pick<Item, 'loggerId' | 'work'>): void {
    const waiting = (this.waiting.get(loggerId) ?? 0) - 1;
    if (waiting > 0) this.waiting.set(loggerId, waiting);
    else this.waiting.delete(loggerId);
    // by night only inverters and sensors report: they too show how far this logger's time has come
    let newestS = this.newestS.get(loggerId) ?? 0;
    for (const row of work.rows) if ('at' in row) newestS = Math.max(newestS, row.at);
    this.newestS.set(loggerId, newestS);
  }

  of(loggerId: number): { newestS: number; waiting: boolean } {
    return { newestS: this.newestS.get(loggerId) ?? 0, waiting: this.waiting.has(loggerId) };
  }
}
