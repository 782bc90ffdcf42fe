import { offsetAt } from '../../domain/time/wall-clock';

/**
 * The chart library knows UTC and the reader's zone, not the site's. Instants are therefore moved by the site's offset
 * and the axis is told to read them as UTC.
 */

/** Epoch seconds → ms that read as the site's wall clock in UTC. */
export const toWall = (atS: number, timeZone: string): number => atS * 1000 + offsetAt(atS * 1000, timeZone);
/** The way back; an hour that the clock repeats is taken as its second. */
export function fromWall(wallMs: number, timeZone: string): number {
  const guess = wallMs - offsetAt(wallMs, timeZone);
  return (wallMs - offsetAt(guess, timeZone)) / 1000;
}
