/** How far a logger's reports have come, as the process that judges its strings knows it. Epoch seconds. */
export type Progress =
  | {
      served: true;
      /** When it last said anything. */
      spokeS: number;
      /** Its newest report of anything since it connected; 0: none yet. */
      newestS: number;
    }
  /** Not connected here, at least since `sinceS`. */
  | { served: false; sinceS: number };

/** A logger that comes back has so long to do it before its strings are judged without it. */
export const RETURN_WITHIN_S = 60;

/**
 * The instant up to which nothing more is expected, or null where that can't be said yet. A logger that brings what
 * it kept through an outage is followed on its own time; one that is connected and quiet, or that stays away, has
 * nothing more to say about the past.
 */
export function eventTime(progress: Progress, reportIntervalS: number, nowS: number): number | null {
  if (!progress.served) return nowS - progress.sinceS >= RETURN_WITHIN_S ? nowS : null;
  const { spokeS, newestS } = progress;
  if (nowS - newestS <= 3 * reportIntervalS) return nowS;
  if (nowS - spokeS > 1.5 * reportIntervalS) return nowS;
  return newestS > 0 ? newestS : null;
}
