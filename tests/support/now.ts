import type { CauseNow, Counts, SiteNow } from '../../src/schemas/api/now';

/** A site and a cause as the API gives them, for tests of what is made of them. */

export const counts = (some: Partial<Counts> = {}): Counts => ({
  units: 0,
  passing: 0,
  shutdown: 0,
  unheard: 0,
  silent: 0,
  dark: 0,
  stuck: 0,
  notShuttingDown: 0,
  unconfirmed: 0,
  ...some,
});

/** Stable and shaped like an identifier, different for each name. */
export function idOf(name: string): string {
  let hash = 0;
  for (const c of name) hash = (hash * 31 + c.charCodeAt(0)) >>> 0;
  return `00000000-0000-4000-8000-${hash.toString(16).padStart(12, '0')}`;
}

/** An operating site in daylight at which all is well. */
export function site(name: string, some: Partial<SiteNow> = {}): SiteNow {
  return {
    id: idOf(name),
    name,
    place: 'Tannersbrook',
    timeZone: 'UTC',
    stage: 'operating',
    counts: counts({ units: 100, passing: 100 }),
    strings: 8,
    power: 30_000,
    madeLast: null,
    acPowerMax: 40_000,
    reportedAt: '2026-06-01T13:59:00.000Z',
    daylight: true,
    inShutdownSince: null,
    commands: [],
    silentGateways: 0,
    loggerConnected: true,
    performanceRatio30d: 0.84,
    ...some,
  };
}

export function unitOf(stringName: string, position: number | null): CauseNow['units'][number] {
  return {
    stringId: idOf(stringName),
    stringName,
    position,
    serial: position === null ? null : `AA${stringName}${position}`,
    since: '2026-06-01T13:21:00.000Z',
  };
}

export function cause(
  verdict: CauseNow['verdict'],
  siteName: string,
  units: CauseNow['units'],
  some: Partial<CauseNow> = {},
): CauseNow {
  return {
    key: `${verdict} ${siteName}`,
    verdict,
    siteId: idOf(siteName),
    siteName,
    since: '2026-06-01T13:21:00.000Z',
    sharedPart: null,
    headline: 'Units kept passing after the initiator opened',
    evidence: 'Their outputs stayed at module voltage.',
    alternatives: [],
    confidence: 0.9,
    units,
    lossWhPerDay: null,
    ...some,
  };
}
