import { setTimeout as pause } from 'node:timers/promises';

/** Longer than the work behind it, so that nobody reads from an answer's time what it does not say. */
export const EVEN_MS = 300;

/** Does the work and answers, or fails, no sooner than after `EVEN_MS`. */
export async function evenly<T>(
  work: () => Promise<T>,
  wait: (ms: number) => Promise<unknown> = pause,
): Promise<T> {
  const [outcome] = await Promise.allSettled([work(), wait(EVEN_MS)]);
  if (outcome.status === 'rejected') throw outcome.reason;
  return outcome.value;
}
