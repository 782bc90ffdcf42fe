import { toWall } from './local-time';
import type { ChartModel } from './model';

/** The part of a chart's time in sight: begin and end, % of the whole. */
export type Sight = readonly [start: number, end: number];
export const WHOLE: Sight = [0, 100];
/** % */
const LEAST = 1;

/** Where a moment lies in a chart's time, %; without one, the newest reading that is drawn. */
export function shareOf(
  model: Pick<ChartModel, 'from' | 'to' | 'timeZone' | 'lines'>,
  at: number | null,
): number {
  const newest = Math.max(
    ...model.lines.map((line) => line.at.findLast((_, i) => line.values[i] !== null) ?? -Infinity),
  );
  const wall = (t: number): number => toWall(t, model.timeZone);
  return (100 * (wall(at ?? newest) - wall(model.from))) / (wall(model.to) - wall(model.from));
}

/** The sight `factor` times as wide. What lies at `about` stays where it is, or the middle, where that is out of sight. */
export function zoomed([start, end]: Sight, factor: number, about: number): Sight {
  const width = Math.min(100, Math.max(LEAST, (end - start) * factor));
  const fixed = about >= start && about <= end ? about : (start + end) / 2;
  const from = fixed - ((fixed - start) / (end - start)) * width;
  const begin = Math.min(100 - width, Math.max(0, from));
  return [begin, begin + width];
}
