import { useInfiniteQuery } from '@tanstack/react-query';
import { memo, useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { eventWords, KINDS } from '../../domain/verdicts/event-words';
import { withQuery } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { EventItem } from '../../schemas/api/now';
import type { EventsPage } from '../../schemas/api/site';
import { paths } from '../../schemas/paths';
import { eventsQuery, type KindWanted } from './query';
import { eventsSheet } from '../../words/site';

/** Recorded this much later than it happened, an event was replayed. */
const LATE_FROM_S = 300;

function Line({
  event,
  now,
  timeZone,
  zone,
}: {
  event: EventItem;
  now: string;
  timeZone: string;
  zone: boolean;
}) {
  const lateS = (Date.parse(event.recordedAt) - Date.parse(event.at)) / 1000;
  return (
    <li className="grid grid-cols-[auto_1fr] gap-x-4 border-b border-rule-faint py-2 last:border-b-0 sm:grid-cols-[150px_1fr]">
      <span className="text-sm text-ink-2">
        <SiteTime at={event.at} now={now} timeZone={timeZone} zone={zone} />
      </span>
      <span>
        {event.stringId && event.stringName && (
          <>
            <a href={paths.string(event.siteId, event.stringId)} className="link font-semibold">
              {event.stringName}
            </a>
            :{' '}
          </>
        )}
        {eventWords(event.kind, event.detail).words}
        {lateS > LATE_FROM_S && (
          <span className="text-sm text-ink-2">{eventsSheet.reportedLater(lateS)}</span>
        )}
      </span>
    </li>
  );
}

interface Props {
  site: string;
  initial: EventsPage;
  now: string;
  timeZone: string;
  zone: boolean;
  kind: KindWanted;
  onKind: (kind: KindWanted) => void;
}

/** What happened, newest first; one kind or all; older ones on demand. */
export const EventsSheet = memo(function EventsSheet({
  site,
  initial,
  now,
  timeZone,
  zone,
  kind,
  onKind,
}: Props) {
  const [first] = useState(kind);
  const { data, error, fetchNextPage, hasNextPage, isFetching, refetch } = useInfiniteQuery(
    eventsQuery(site, kind, kind === first ? initial : undefined),
    queryClient(),
  );
  const events = data?.pages.flatMap((p) => p.events) ?? [];
  return (
    <Sheet
      id="events"
      title={eventsSheet.events}
      aside={
        <span className="no-print flex flex-wrap items-center gap-2">
          <Choice
            inline
            label={eventsSheet.kind}
            value={kind}
            options={[{ value: 'all', label: eventsSheet.all }, ...KINDS]}
            onChange={(wanted) => onKind(wanted as KindWanted)}
          />
          <ButtonLink href={withQuery(paths.api.siteEventsCsv(site), { kind })} download>
            CSV
          </ButtonLink>
        </span>
      }
    >
      <NotRead error={error} title={eventsSheet.eventsCouldNotBe} kind="failed" onRetry={() => refetch()} />
      {!error && !isFetching && events.length === 0 && (
        <Notice
          kind="empty"
          title={kind === 'all' ? eventsSheet.nothingHasHappenedYet : eventsSheet.nothingOfThisKind}
        />
      )}
      <ol aria-label={eventsSheet.eventsNewestFirst}>
        {events.map((event) => (
          <Line key={event.id} event={event} now={now} timeZone={timeZone} zone={zone} />
        ))}
      </ol>
      {hasNextPage && (
        <Button className="no-print mt-3" disabled={isFetching} onClick={() => void fetchNextPage()}>
          {isFetching ? eventsSheet.readingOlderOnes : eventsSheet.olderOnes}
        </Button>
      )}
    </Sheet>
  );
});
