import { infiniteQueryOptions, queryOptions, type InfiniteData } from '@tanstack/react-query';
import type { EventKind } from '../../domain/verdicts/codes';
import { api } from '../../lib/api';
import { replaced, tells, tellsOfCauses } from '../../lib/patch';
import { causesAfter, received, type Sent } from '../../schemas/api/causes-on-the-way';
import type { AcknowledgeReply } from '../../schemas/api/fleet';
import type { EventItem } from '../../schemas/api/now';
import type { EventsPage, SitePage } from '../../schemas/api/site';
import type { Change } from '../../schemas/live';
import { paths } from '../../schemas/paths';

export const siteKey = (site: string) => ['site', site] as const;

export const siteQuery = (initial: SitePage) =>
  queryOptions({
    queryKey: siteKey(initial.site.id),
    queryFn: ({ signal }) => api<Sent<SitePage>>(paths.api.site(initial.site.id), { signal }).then(received),
    initialData: initial,
    refetchInterval: 120_000,
  });

/** The site after a change from /live, as of `at`. */
export function changedSite(page: SitePage, change: Change, at: string): SitePage {
  return {
    ...page,
    at,
    site: change.site ?? page.site,
    causes: causesAfter(page.causes, change),
    strings: replaced(page.strings, change.strings, (s) => s.id),
    inverters: replaced(page.inverters, change.inverters, (i) => i.name),
    gateways: replaced(page.gateways, change.gateways, (g) => `${g.number} ${g.name}`),
  };
}

/** What a change says that only the whole page tells: who commanded, who took a hazard on, loggers, roll call. */
export const asksForReading = (change: Change): boolean =>
  tellsOfCauses(change) ||
  tells(change, (e) =>
    [
      'command',
      'hazard_acknowledged',
      'logger_connected',
      'logger_lost',
      'roll_call_started',
      'roll_call_stopped',
    ].includes(e.kind),
  );

export const withAcknowledgement = (page: SitePage, reply: AcknowledgeReply): SitePage => ({
  ...page,
  acknowledgements: replaced(page.acknowledgements, [reply.acknowledgement], (a) => a.key),
  contact: reply.contact,
});

export type KindWanted = EventKind | 'all';
/** Of the events of every kind; with the kind after it, of one. */
export const eventsKeys = (site: string) => ['site', site, 'events'] as const;
export const eventsKey = (site: string, kind: KindWanted) => [...eventsKeys(site), kind] as const;
export const EVENTS_AT_ONCE = 20;

export const eventsQuery = (site: string, kind: KindWanted, initial: EventsPage | undefined) =>
  infiniteQueryOptions({
    queryKey: eventsKey(site, kind),
    queryFn: ({ pageParam, signal }) =>
      api<EventsPage>(paths.api.siteEvents(site), {
        query: { kind: kind === 'all' ? null : kind, before: pageParam, limit: EVENTS_AT_ONCE },
        signal,
      }),
    initialPageParam: null as string | null,
    getNextPageParam: (page) => page.before,
    ...(initial && { initialData: { pages: [initial], pageParams: [null] } }),
  });

export type EventsRead = InfiniteData<EventsPage, string | null>;

/**
 * The events read so far with what /live brought, newest first. One that is there already stays where it is; one older
 * than what has been read comes with its own page.
 */
export function withEvents(read: EventsRead, news: readonly EventItem[], kind: KindWanted): EventsRead {
  const first = read.pages[0];
  const known = new Set(read.pages.flatMap((p) => p.events.map((e) => e.id)));
  const oldest = first?.before ? (first.events.at(-1)?.at ?? '') : '';
  const fresh = news.filter((e) => !known.has(e.id) && (kind === 'all' || e.kind === kind) && e.at >= oldest);
  if (fresh.length === 0 || !first) return read;
  const events = [...fresh, ...first.events].sort(
    (a, b) => b.at.localeCompare(a.at) || Number(b.id) - Number(a.id),
  );
  return { ...read, pages: [{ ...first, events }, ...read.pages.slice(1)] };
}
