import { daysAlike, isRunning, periodOf } from '../domain/output/period';
import { percent, UNKNOWN } from './numbers';

interface MonthMade {
  /** Days of which there is data; left out where nobody counted. */
  days?: number;
  energyKWh: number;
}

/**
 * "+4 %": a month against the same a year before. A dash while the month runs, and where days without data would be
 * taken for a loss.
 * @param key yyyy-mm
 */
export function yearChange(
  key: string,
  now: MonthMade | undefined,
  before: MonthMade | undefined,
  today: string,
): string {
  const period = periodOf(key);
  if (!now || !before || !(before.energyKWh > 0) || !period || isRunning(period, today)) return UNKNOWN;
  if (!daysAlike(now.days ?? 1, before.days ?? 1)) return UNKNOWN;
  const change = now.energyKWh / before.energyKWh - 1;
  return `${change >= 0 ? '+' : '−'}${percent(Math.abs(change))}`;
}
