/** The moments at which the currents of a site's units are held against each other, of all at which they report. */

/** Moments at most: more say nothing new, neighbours repeat each other. */
const MOMENTS_MAX = 240;

/** One moment at which strings reported. */
export interface Heard {
  /** Its beginning, s. */
  atS: number;
  /** How many strings reported in it. */
  strings: number;
}

export interface Moments {
  /** Of each step of so many seconds one moment is taken. */
  stepS: number;
  /** Beginnings of the moments that are taken, s, ascending. */
  atS: number[];
}

/** How long a moment lasts, s, in whole minutes: each string reports in it. Of two reports in it the newer counts. */
export const momentLength = (reportIntervalS: number): number => 60 * Math.ceil(reportIntervalS / 60);

/**
 * All moments, or where they are many one of each step: the one in which most strings reported, for the currents of
 * one moment alone can be compared; of several the newest.
 * @param heard ascending
 */
export function chooseMoments(heard: readonly Heard[], lengthS: number): Moments {
  const first = heard[0]?.atS ?? 0;
  const spanS = heard.length === 0 ? lengthS : heard[heard.length - 1]!.atS - first + lengthS;
  const stepS = Math.ceil(spanS / lengthS / MOMENTS_MAX) * lengthS;
  const best = new Map<number, Heard>();
  for (const moment of heard) {
    const step = Math.floor((moment.atS - first) / stepS);
    if (moment.strings >= (best.get(step)?.strings ?? 0)) best.set(step, moment);
  }
  return { stepS, atS: [...best.values()].map((m) => m.atS) };
}
