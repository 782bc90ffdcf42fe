import type { FleetLine } from './list';
import { openAt } from './need';

/** The fleet's table as a download: what the screen shows, and the counts behind its bars. */
export const fleetColumns = (
  now: Date,
): { header: string; value: (line: FleetLine) => string | number | null }[] => [
  { header: 'site', value: ({ site }) => site.name },
  { header: 'place', value: ({ site }) => site.place },
  { header: 'stage', value: ({ site }) => site.stage },
  { header: 'time zone', value: ({ site }) => site.timeZone },
  { header: 'strings', value: ({ site }) => site.strings },
  { header: 'units', value: ({ site }) => site.counts.units },
  { header: 'passing', value: ({ site }) => site.counts.passing },
  { header: 'in shutdown', value: ({ site }) => site.counts.shutdown },
  { header: 'unheard', value: ({ site }) => site.counts.unheard },
  { header: 'silent', value: ({ site }) => site.counts.silent },
  { header: 'dark', value: ({ site }) => site.counts.dark },
  { header: 'stuck', value: ({ site }) => site.counts.stuck },
  { header: 'not shutting down', value: ({ site }) => site.counts.notShuttingDown },
  { header: 'unconfirmed', value: ({ site }) => site.counts.unconfirmed },
  { header: 'open', value: ({ site, causes }) => openAt(site, causes, now, null) },
  { header: 'in shutdown since (UTC)', value: ({ site }) => site.inShutdownSince },
  {
    header: 'performance ratio 30 d (%)',
    value: ({ site }) =>
      site.performanceRatio30d === null ? null : Math.round(site.performanceRatio30d * 1000) / 10,
  },
  { header: 'power (W)', value: ({ site }) => site.power },
  { header: 'AC capacity (W)', value: ({ site }) => site.acPowerMax },
  { header: 'newest report (UTC)', value: ({ site }) => site.reportedAt },
];
