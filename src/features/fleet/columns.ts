import type { FleetLine } from './list';
import { openAt } from './need';
import { fleetColumnsWords } from '../../words/fleet';

/** The fleet's table as a download: what the screen shows, and the counts behind its bars. */
export const fleetColumns = (
  now: Date,
): { header: string; value: (line: FleetLine) => string | number | null }[] => [
  { header: 'site', value: ({ site }) => site.name },
  { header: 'place', value: ({ site }) => site.place },
  { header: 'stage', value: ({ site }) => site.stage },
  { header: fleetColumnsWords.timeZone, value: ({ site }) => site.timeZone },
  { header: 'strings', value: ({ site }) => site.strings },
  { header: 'units', value: ({ site }) => site.counts.units },
  { header: 'passing', value: ({ site }) => site.counts.passing },
  { header: fleetColumnsWords.inShutdown, value: ({ site }) => site.counts.shutdown },
  { header: 'unheard', value: ({ site }) => site.counts.unheard },
  { header: 'silent', value: ({ site }) => site.counts.silent },
  { header: 'dark', value: ({ site }) => site.counts.dark },
  { header: 'stuck', value: ({ site }) => site.counts.stuck },
  { header: fleetColumnsWords.notShuttingDown, value: ({ site }) => site.counts.notShuttingDown },
  { header: 'unconfirmed', value: ({ site }) => site.counts.unconfirmed },
  { header: 'open', value: ({ site, causes }) => openAt(site, causes, now, null) },
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
