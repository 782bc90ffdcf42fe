import type { FleetLine } from './list';
import { openAt } from './need';
import { fleetColumnsWords } from '../../words/fleet';

/** The fleet's table as a download: what the screen shows, and the counts behind its bars. */
export const fleetColumns = (
  now: Date,
): { header: string; value: (line: FleetLine) => string | number | null }[] => [
  { header: fleetColumnsWords.site, value: ({ site }) => site.name },
  { header: fleetColumnsWords.place, value: ({ site }) => site.place },
  { header: fleetColumnsWords.stage, value: ({ site }) => site.stage },
  { header: fleetColumnsWords.timeZone, value: ({ site }) => site.timeZone },
  { header: fleetColumnsWords.strings, value: ({ site }) => site.strings },
  { header: fleetColumnsWords.units, value: ({ site }) => site.counts.units },
  { header: fleetColumnsWords.passing, value: ({ site }) => site.counts.passing },
  { header: fleetColumnsWords.inShutdown, value: ({ site }) => site.counts.shutdown },
  { header: fleetColumnsWords.unheard, value: ({ site }) => site.counts.unheard },
  { header: fleetColumnsWords.silent, value: ({ site }) => site.counts.silent },
  { header: fleetColumnsWords.dark, value: ({ site }) => site.counts.dark },
  { header: fleetColumnsWords.stuck, value: ({ site }) => site.counts.stuck },
  { header: fleetColumnsWords.notShuttingDown, value: ({ site }) => site.counts.notShuttingDown },
  { header: fleetColumnsWords.unconfirmed, value: ({ site }) => site.counts.unconfirmed },
  { header: fleetColumnsWords.open, value: ({ site, causes }) => openAt(site, causes, now, null) },
  { header: fleetColumnsWords.inShutdownSinceUtc, value: ({ site }) => site.inShutdownSince },
  {
    header: fleetColumnsWords.performanceRatio30D,
    value: ({ site }) =>
      site.performanceRatio30d === null ? null : Math.round(site.performanceRatio30d * 1000) / 10,
  },
  { header: fleetColumnsWords.powerW, value: ({ site }) => site.power },
  { header: fleetColumnsWords.acCapacityW, value: ({ site }) => site.acPowerMax },
  { header: fleetColumnsWords.newestReportUtc, value: ({ site }) => site.reportedAt },
];
