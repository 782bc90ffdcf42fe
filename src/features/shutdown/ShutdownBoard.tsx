import { useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { CauseSheet } from '../../components/causes/CauseSheet';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { LiveHeading } from '../../components/ui/LiveHeading';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { ShowMore } from '../../components/ui/ShowMore';
import { useNow } from '../../components/ui/Time';
import { useReaderZone } from '../../components/ui/reader-zone';
import { withQuery } from '../../lib/api';
import { useLive } from '../../lib/live-hook';
import { unpacking } from '../../lib/packed';
import { tellsOfCauses } from '../../lib/patch';
import { queryClient } from '../../lib/query-client';
import { useReadAgain } from '../../lib/read-again';
import { useViewInUrl } from '../../lib/view-in-url';
import { received, type Sent } from '../../schemas/api/causes-on-the-way';
import type { CauseNow } from '../../schemas/api/now';
import type { ShutdownNow, ShutdownView } from '../../schemas/api/shutdown';
import { paths } from '../../schemas/paths';
import { HeldSites } from './HeldSites';
import { UnitsTable } from './UnitsTable';
import { shutdownFinding } from './finding';
import { countOf, type Whole } from './first-page';
import { heldSites, shownOf, shutdownGroups, type Group } from './groups';
import { changedShutdown, shutdownKey, shutdownQuery, withAcknowledgement } from './query';
import { shutdownBoard } from '../../words/shutdown';

export const SHUTDOWN_DEFAULTS: ShutdownView = { q: '', show: 'all' };

const SHOWS = [
  { value: 'all', label: shutdownBoard.all },
  { value: 'not_shutting_down', label: shutdownBoard.notShuttingDown },
  { value: 'stuck', label: shutdownBoard.stuck },
  { value: 'unconfirmed', label: shutdownBoard.unconfirmed },
  { value: 'silent', label: shutdownBoard.silent },
] as const;

const TITLE: Record<CauseNow['verdict'], string> = {
  not_shutting_down: shutdownBoard.keptPassingAfterA,
  stuck: shutdownBoard.stuckInShutdownAfter,
  unconfirmed: shutdownBoard.shutdownCommandedNotConfirmed,
  silent: shutdownBoard.silentWhetherTheyWould,
};

interface Props {
  initial: Sent<ShutdownNow>;
  /** Of a large fleet, of which `initial` is the first page; null: it is all. */
  whole: Whole | null;
  view: ShutdownView;
  timeZone: string;
}

export const ShutdownBoard = unpacking(function ShutdownBoard({
  initial: came,
  whole: first,
  view: initialView,
  timeZone,
}: Props) {
  const client = queryClient();
  const initial = useMemo(() => received(came), [came]);
  const { data: now, error, refetch } = useQuery(shutdownQuery(initial), client);
  const readAgain = useReadAgain(shutdownKey);
  const status = useLive('fleet', (change, kind) => {
    client.setQueryData<ShutdownNow>(shutdownKey, (old) =>
      changedShutdown(old ?? initial, change, new Date().toISOString()),
    );
    if (kind === 'delta' && tellsOfCauses(change)) readAgain();
  });
  const [view, changeView] = useViewInUrl(initialView, SHUTDOWN_DEFAULTS);
  const partly = first !== null && now.causes.length <= initial.causes.length ? first : null;
  // what was counted is what the page was asked for
  const asAsked = view.q === initialView.q && view.show === initialView.show;
  // /live brings the rest of a large fleet within a second; who is quicker, or without it, asks
  const askForRest = () => {
    if (partly) void refetch();
  };
  const change: typeof changeView = (some, how) => {
    askForRest();
    changeView(some, how);
  };
  const clock = useNow(initial.at).toISOString();
  const readerZone = useReaderZone() ?? timeZone;
  const finding = useMemo(
    () => partly?.finding ?? shutdownFinding(now.sites, now.causes),
    [partly, now.sites, now.causes],
  );
  const groups = useMemo(() => shutdownGroups(now.causes, view), [now.causes, view]);
  const held = useMemo(() => heldSites(now.sites), [now.sites]);
  const [whole, setWhole] = useState<ReadonlySet<Group['verdict']>>(new Set());
  const zoneOf = (siteId: string) => now.sites.find((s) => s.id === siteId)?.timeZone ?? timeZone;

  const section = ({ verdict, causes }: Group) => {
    const count = (asAsked && partly?.groups[verdict]) || countOf({ causes });
    const shown = shownOf({ verdict, causes }, whole);
    return (
      <section key={verdict} aria-labelledby={`group-${verdict}`} className="mb-8">
        <div className="mb-2.5 flex flex-wrap items-baseline justify-between gap-x-4">
          <h2 id={`group-${verdict}`} className="text-[15px] leading-5 tracking-[-0.01em]">
            {TITLE[verdict]}
          </h2>
          <p className="text-sm text-ink-2">{shutdownBoard.oldestFirst(count.units, count.causes)}</p>
        </div>
        <div className="space-y-4">
          {shown.map((cause) => (
            <CauseSheet
              key={cause.key}
              cause={cause}
              timeZone={zoneOf(cause.siteId)}
              now={clock}
              contact={now.contacts.find((c) => c.siteId === cause.siteId)}
              taken={now.acknowledgements.find((a) => a.key === cause.key)}
              onTaken={(reply) =>
                client.setQueryData<ShutdownNow>(shutdownKey, (old) => withAcknowledgement(old ?? now, reply))
              }
            >
              <UnitsTable cause={cause} timeZone={zoneOf(cause.siteId)} now={clock} />
            </CauseSheet>
          ))}
        </div>
        <ShowMore
          shown={shown.length}
          of={count.causes}
          what={shutdownBoard.causes}
          onMore={() => {
            setWhole(new Set([...whole, verdict]));
            askForRest();
          }}
        />
      </section>
    );
  };

  return (
    <>
      <LiveHeading finding={finding} status={status} timeZone={readerZone} />
      <div className="mb-6">
        <Caution strong={shutdownBoard.shutdownIsNotIsolation}>{shutdownBoard.eachModuleAndIts}</Caution>
      </div>
      <NotRead
        error={error}
        title={shutdownBoard.theStateOfShutdown}
        kind="failed"
        onRetry={() => refetch()}
        className="mb-6"
      >
        {shutdownBoard.whatIsShownMay}
      </NotRead>
      <form
        action={paths.shutdown()}
        className="no-print mb-6 flex flex-wrap items-center gap-x-5 gap-y-2"
        onSubmit={(event) => event.preventDefault()}
      >
        <SearchInput
          name="q"
          label={shutdownBoard.filterBySitePart}
          value={view.q}
          onChange={(typed) => change({ q: typed }, 'typed')}
          className="sm:w-[290px]"
        />
        <Segmented
          label={shutdownBoard.whichUnits}
          options={SHOWS}
          value={view.show}
          onChange={(show) => change({ show })}
        />
        <ButtonLink href={withQuery(paths.api.shutdownCsv(), view)} download className="ml-auto !text-sm">
          CSV
        </ButtonLink>
      </form>
      {groups.length > 0
        ? groups.map(section)
        : (now.causes.length > 0 || view.q !== '' || view.show !== 'all') && (
            <div className="mb-8">
              <Notice
                kind="empty"
                title={shutdownBoard.nothingMatches}
                action={<Button onClick={() => change(SHUTDOWN_DEFAULTS)}>{shutdownBoard.showAll}</Button>}
              >
                {shutdownBoard.anotherWordOrFilter}
              </Notice>
            </div>
          )}
      {held.lost.length > 0 && (
        <Sheet
          id="lost"
          className="mb-8"
          flush
          title={shutdownBoard.keepAliveOrPower}
          aside={shutdownBoard.longestFirst}
        >
          <HeldSites caption={shutdownBoard.sitesWhoseKeepAlive} held={held.lost} now={clock} />
        </Sheet>
      )}
      <Sheet
        id="purpose"
        flush
        title={shutdownBoard.inShutdownOnPurpose}
        aside={held.purpose.length > 0 ? shutdownBoard.longestFirst : null}
      >
        {held.purpose.length > 0 ? (
          <HeldSites caption={shutdownBoard.sitesInShutdownOn} held={held.purpose} now={clock} />
        ) : (
          <Notice kind="empty" title={shutdownBoard.noInitiatorIsOpen}>
            {shutdownBoard.aSiteWhoseInitiator}
          </Notice>
        )}
      </Sheet>
    </>
  );
});
