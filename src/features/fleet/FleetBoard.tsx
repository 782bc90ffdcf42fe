import { useQuery } from '@tanstack/react-query';
import { useCallback, useDeferredValue, useMemo, useState } from 'react';
import { CauseSheet } from '../../components/causes/CauseSheet';
import { byGravity } from '../../components/causes/words';
import { LiveHeading } from '../../components/ui/LiveHeading';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { ShowMore } from '../../components/ui/ShowMore';
import { useNow } from '../../components/ui/Time';
import { useReaderZone } from '../../components/ui/reader-zone';
import { later } from '../../lib/later';
import { useLive } from '../../lib/live-hook';
import { unpacking } from '../../lib/packed';
import { tellsOfCauses } from '../../lib/patch';
import { queryClient } from '../../lib/query-client';
import { useReadAgain } from '../../lib/read-again';
import { useViewInUrl } from '../../lib/view-in-url';
import { received, type Sent } from '../../schemas/api/causes-on-the-way';
import type { AcknowledgeReply, FleetNow, FleetView, SinceLastLook as Missed } from '../../schemas/api/fleet';
import { FleetFilters } from './FleetFilters';
import { FleetTable } from './FleetTable';
import { SinceLastLook } from './SinceLastLook';
import { fleetFinding } from './finding';
import { causesAtFirst, LINES_AT_ONCE, type Whole } from './first-page';
import { fleetLines } from './list';
import { changedFleet, fleetKey, fleetQuery, withAcknowledgement } from './query';
import { FLEET_DEFAULTS, sortInWords } from './view';
import { fleetBoard } from '../../words/fleet';

const Since = later(
  async () => (await import('./SinceLastLook')).SinceLastLook,
  import.meta.env.SSR ? SinceLastLook : null,
);

const More = later(
  async () => (await import('../../components/ui/ShowMore')).ShowMore,
  import.meta.env.SSR ? ShowMore : null,
);

interface Props {
  initial: Sent<FleetNow>;
  /** Of a large fleet, of which `initial` is the first page; null: it is all. */
  whole: Whole | null;
  view: FleetView;
  missed: Missed | null;
  /** Of the organisation: for times that belong to no site, until the reader's own is known. */
  timeZone: string;
}

/** The fleet: what is found, what to act on, every site by need. Server-rendered, then live. */
export const FleetBoard = unpacking(function FleetBoard({
  initial: came,
  whole,
  view: initialView,
  missed,
  timeZone,
}: Props) {
  const client = queryClient();
  const initial = useMemo(() => received(came), [came]);
  const { data, error, refetch } = useQuery(fleetQuery(initial), client);
  // what is typed and chosen shows at once, the lists follow
  const fleet = useDeferredValue(data);
  const readAgain = useReadAgain(fleetKey);
  const status = useLive('fleet', (change, kind) => {
    client.setQueryData<FleetNow>(fleetKey, (old) =>
      changedFleet(old ?? initial, change, new Date().toISOString()),
    );
    // a cause at a site whose telephone number or acknowledgement is not here yet
    if (kind === 'delta' && tellsOfCauses(change)) readAgain();
  });
  const [asked, changeView] = useViewInUrl(initialView, FLEET_DEFAULTS);
  const view = useDeferredValue(asked);
  const [most, setMost] = useState(LINES_AT_ONCE);
  const [allCauses, setAllCauses] = useState(false);
  const partly = whole !== null && fleet.sites.length <= initial.sites.length ? whole : null;
  // /live brings the rest of a large fleet within a second; who is quicker, or without it, asks
  const askForRest = () => {
    if (partly) void refetch();
  };
  const change: typeof changeView = (some, how) => {
    setMost(LINES_AT_ONCE);
    askForRest();
    changeView(some, how);
  };
  const now = useNow(initial.at);
  const readerZone = useReaderZone() ?? timeZone;

  const finding = useMemo(
    () => partly?.finding ?? fleetFinding(fleet.sites, fleet.causes),
    [partly, fleet.sites, fleet.causes],
  );
  const lines = useMemo(() => fleetLines(fleet.sites, fleet.causes, view), [fleet.sites, fleet.causes, view]);
  const causes = useMemo(() => [...fleet.causes].sort(byGravity), [fleet.causes]);
  const zones = useMemo(() => new Map(fleet.sites.map((s) => [s.id, s.timeZone])), [fleet.sites]);
  const shownCauses = allCauses ? causes : causesAtFirst(causes);
  const taken = useCallback(
    (reply: AcknowledgeReply) =>
      client.setQueryData<FleetNow>(fleetKey, (old) => withAcknowledgement(old ?? initial, reply)),
    [client, initial],
  );

  return (
    <>
      <LiveHeading finding={finding} status={status} timeZone={readerZone} />
      <NotRead
        error={error}
        title={fleetBoard.theFleetCouldNot}
        kind="failed"
        onRetry={() => refetch()}
        className="mb-6"
      >
        {fleetBoard.whatIsShownMay}
      </NotRead>
      {missed && missed.items.length > 0 && <Since missed={missed} now={initial.at} timeZone={readerZone} />}
      {causes.length > 0 && (
        <section aria-labelledby="causes" className="mb-8">
          <h2 id="causes" className="mb-2.5 text-[15px] leading-5 tracking-[-0.01em]">
            {fleetBoard.causesToActOn}
          </h2>
          <div className="grid items-stretch gap-4 md:grid-cols-2 xl:grid-cols-3">
            {shownCauses.map((cause) => (
              <CauseSheet
                key={cause.key}
                cause={cause}
                timeZone={zones.get(cause.siteId) ?? timeZone}
                now={now.toISOString()}
                contact={fleet.contacts.find((c) => c.siteId === cause.siteId)}
                taken={fleet.acknowledgements.find((a) => a.key === cause.key)}
                onTaken={taken}
              />
            ))}
          </div>
          <More
            shown={shownCauses.length}
            of={causes.length}
            what={fleetBoard.causes}
            onMore={() => {
              setAllCauses(true);
              askForRest();
            }}
          />
        </section>
      )}
      {fleet.sites.length === 0 ? (
        <Notice kind="empty" title={fleetBoard.noSiteYet}>
          {fleetBoard.aManagerEntersThe}
        </Notice>
      ) : (
        <section aria-labelledby="sites">
          <div className="mb-2.5 flex flex-wrap items-baseline justify-between gap-x-4">
            <h2 id="sites" className="text-[15px] leading-5 tracking-[-0.01em]">
              {fleetBoard.sites}
            </h2>
            <p className="text-sm text-ink-2" role="status">
              {fleetBoard.viewLinesOfSites(
                sortInWords(view),
                partly?.lines ?? lines.length,
                partly?.sites ?? fleet.sites.length,
              )}
            </p>
          </div>
          <Sheet flush>
            <FleetFilters view={asked} onChange={change} />
            <FleetTable
              lines={lines.slice(0, most)}
              view={view}
              now={now}
              onChange={change}
              onClear={() => change({ q: '', stage: 'any', show: 'all' })}
            />
          </Sheet>
          <More
            shown={Math.min(most, lines.length)}
            of={partly?.lines ?? lines.length}
            what={fleetBoard.sites2}
            onMore={() => {
              setMost(most + 4 * LINES_AT_ONCE);
              askForRest();
            }}
          />
        </section>
      )}
    </>
  );
});
