import { useQuery } from '@tanstack/react-query';
import { useCallback, useDeferredValue, useMemo } from 'react';
import { CauseSheet } from '../../components/causes/CauseSheet';
import { byGravity } from '../../components/causes/words';
import { Caution } from '../../components/ui/Caution';
import { LiveHeading } from '../../components/ui/LiveHeading';
import { NotRead } from '../../components/ui/NotRead';
import { useNow } from '../../components/ui/Time';
import { clocksDiffer, useReaderZone } from '../../components/ui/reader-zone';
import { later } from '../../lib/later';
import { useLive } from '../../lib/live-hook';
import { unpacking } from '../../lib/packed';
import { queryClient } from '../../lib/query-client';
import { useViewInUrl } from '../../lib/view-in-url';
import { received, type Sent } from '../../schemas/api/causes-on-the-way';
import type { CaseItem } from '../../schemas/api/cases';
import type { AcknowledgeReply } from '../../schemas/api/fleet';
import type { SiteStanding } from '../../schemas/api/causes';
import type { EventsPage, SitePage } from '../../schemas/api/site';
import { paths } from '../../schemas/paths';
import { FurtherSheets } from './FurtherSheets';
import { NowSheet } from './NowSheet';
import { StandingSheet } from './StandingSheet';
import { siteFinding } from './finding';
import {
  asksForReading,
  changedSite,
  eventsKey,
  eventsKeys,
  siteKey,
  siteQuery,
  withAcknowledgement,
  withEvents,
  type EventsRead,
  type KindWanted,
} from './query';
import { siteBoard } from '../../words/site';

const Standing = later(
  async () => (await import('./StandingSheet')).StandingSheet,
  import.meta.env.SSR ? StandingSheet : null,
);
const Further = later(
  async () => (await import('./FurtherSheets')).FurtherSheets,
  import.meta.env.SSR ? FurtherSheets : null,
);

interface Props {
  initial: Sent<SitePage>;
  events: EventsPage;
  kind: KindWanted;
  /** Cases here that are not closed. */
  cases: readonly CaseItem[];
  standing: SiteStanding;
  /** Readings of the time before, from a file. */
  mayImport: boolean;
}
const DEFAULTS: { kind: KindWanted } = { kind: 'all' };

export const SiteBoard = unpacking(function SiteBoard({
  initial: came,
  events,
  kind: initialKind,
  cases,
  standing,
  mayImport,
}: Props) {
  const client = queryClient();
  const initial = useMemo(() => received(came), [came]);
  const { id, timeZone } = initial.site;
  const { data, error, refetch } = useQuery(siteQuery(initial), client);
  // what is typed and tapped shows at once, what came follows
  const page = useDeferredValue(data);
  const start = useMemo(() => ({ kind: initialKind }), [initialKind]);
  const [{ kind }, setView] = useViewInUrl<{ kind: KindWanted }>(start, DEFAULTS);
  const onTaken = useCallback(
    (reply: AcknowledgeReply) =>
      client.setQueryData<SitePage>(siteKey(id), (old) => withAcknowledgement(old ?? initial, reply)),
    [client, id, initial],
  );
  const onKind = useCallback((wanted: KindWanted) => setView({ kind: wanted }), [setView]);
  const status = useLive(`site:${id}`, (change, how) => {
    client.setQueryData<SitePage>(siteKey(id), (old) =>
      changedSite(old ?? initial, change, new Date().toISOString()),
    );
    const news = change.events;
    if (news)
      client.setQueryData<EventsRead>(eventsKey(id, kind), (read) =>
        read ? withEvents(read, news, kind) : read,
      );
    // more came than was sent: the list is read again from its newest on
    if (change.leftOut) void client.invalidateQueries({ queryKey: eventsKeys(id) });
    if (how === 'delta' && asksForReading(change))
      void client.invalidateQueries({ queryKey: siteKey(id), exact: true });
  });
  const clock = useNow(initial.at);
  const now = clock.toISOString();
  const zone = clocksDiffer(clock, timeZone, useReaderZone());
  const finding = siteFinding(page.site, page.causes, clock);
  const causes = [...page.causes].sort(byGravity);

  return (
    <>
      <LiveHeading
        crumbs={[
          { label: siteBoard.fleet, href: paths.fleet() },
          { label: page.site.place ? `${page.site.name}, ${page.site.place}` : page.site.name },
        ]}
        finding={finding}
        status={status}
        timeZone={timeZone}
      />
      <nav aria-label={siteBoard.onTheRoof} className="no-print -mt-3 mb-5 flex flex-wrap gap-x-5 text-sm">
        <a className="target inline-flex items-center text-petrol hover:underline" href={paths.walk(id)}>
          {siteBoard.walkTheRoof}
        </a>
        <a
          className="target inline-flex items-center text-petrol hover:underline"
          href={paths.membership(id)}
        >
          {siteBoard.whoIsInWhich}
        </a>
        <a
          className="target inline-flex items-center text-petrol hover:underline"
          href={paths.siteFigures(id)}
        >
          {siteBoard.figures}
        </a>
        <a
          className="target inline-flex items-center text-petrol hover:underline"
          href={paths.plannedWorks(id)}
        >
          {siteBoard.plannedWorks}
        </a>
        <a className="target inline-flex items-center text-petrol hover:underline" href={paths.loggers(id)}>
          {siteBoard.loggers}
        </a>
        {mayImport && (
          <a
            className="target inline-flex items-center text-petrol hover:underline"
            href={paths.historyImport(id)}
          >
            {siteBoard.earlierReadings}
          </a>
        )}
      </nav>
      <Standing siteId={id} standing={standing} now={now} timeZone={timeZone} />
      <NotRead
        error={error}
        title={siteBoard.theSiteCouldNot}
        kind="failed"
        onRetry={() => refetch()}
        className="mb-6"
      >
        {siteBoard.whatIsShownMay}
      </NotRead>
      {causes.length > 0 && (
        <section aria-labelledby="causes" className="mb-6">
          <h2 id="causes" className="mb-2.5 text-[15px] leading-5 tracking-[-0.01em]">
            {siteBoard.causesToActOn}
          </h2>
          <div className="grid items-stretch gap-4 md:grid-cols-2 xl:grid-cols-3">
            {causes.map((cause) => (
              <CauseSheet
                key={cause.key}
                ofThisSite
                cause={cause}
                timeZone={timeZone}
                now={now}
                contact={page.contact}
                taken={page.acknowledgements.find((a) => a.key === cause.key)}
                onTaken={onTaken}
              />
            ))}
          </div>
        </section>
      )}
      <div className="mb-6">
        <Caution strong={siteBoard.stringsStayDangerousIn}>{siteBoard.shutdownIsNotIsolation}</Caution>
      </div>
      <div className="space-y-6">
        <NowSheet page={page} now={now} zone={zone} />
        <Further
          className="space-y-6"
          page={page}
          events={events}
          cases={cases}
          kind={kind}
          onKind={onKind}
          now={now}
          zone={zone}
        />
      </div>
    </>
  );
});
