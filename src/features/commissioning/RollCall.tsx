import { Suspense, useCallback, useMemo, useRef, useState } from 'react';
import { useQuery } from '@tanstack/react-query';
import type { SlotRef } from '../../components/placements/evidence';
import { StepsBeside } from '../../components/commissioning/StepsBeside';
import { Caution } from '../../components/ui/Caution';
import { Heading } from '../../components/ui/Heading';
import { LiveMark } from '../../components/ui/Live';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { late } from '../../lib/late';
import { later } from '../../lib/later';
import { api } from '../../lib/api';
import { useLive } from '../../lib/live-hook';
import { Meanwhile } from '../../lib/meanwhile';
import { queryClient } from '../../lib/query-client';
import type { Change } from '../../schemas/live';
import type { ChangeKind } from '../../lib/live';
import { paths } from '../../schemas/paths';
import type { Stranger } from '../../domain/commissioning/suggest';
import type { PlaceBody } from '../../schemas/api/placing';
import type { RollCallPage, RollCallView } from '../../schemas/api/roll-call';
import { CurveSheet } from './CurveSheet';
import { GatewaysSheet, MissingSheet, UnknownSheet } from './Lists';
import { RunPanel, type StartTyped } from './RunPanel';
import { WiredSheet } from './WiredSheet';
import { StringsSheet } from './StringsSheet';
import { patchRollCall, runChanged } from './live';
import { deafOf } from './listening';
import { outlookOf, STEP_S } from './outlook';
import { liveSteps, tallyOf } from './tally';
import { useSteps } from './use-steps';
import { rollCallWords } from './words';
import { commissioningRollCall } from '../../words/commissioning';

const Strings = later(
  async () => (await import('./StringsSheet')).StringsSheet,
  import.meta.env.SSR ? StringsSheet : null,
);
const Curve = later(
  async () => (await import('./CurveSheet')).CurveSheet,
  import.meta.env.SSR ? CurveSheet : null,
);
const lists = () => import('./Lists');
const Missing = later(async () => (await lists()).MissingSheet, import.meta.env.SSR ? MissingSheet : null);
const Unknown = later(async () => (await lists()).UnknownSheet, import.meta.env.SSR ? UnknownSheet : null);
const Gateways = later(async () => (await lists()).GatewaysSheet, import.meta.env.SSR ? GatewaysSheet : null);
const Wired = later(
  async () => (await import('./WiredSheet')).WiredSheet,
  import.meta.env.SSR ? WiredSheet : null,
);
const SwapDialog = late(async () => (await import('../../components/placements/SwapDialog')).SwapDialog);
const PlaceDialog = late(async () => (await import('../../components/placements/PlaceDialog')).PlaceDialog);

interface Props {
  initial: RollCallPage;
  mayRun: boolean;
  /** Whether the person may change the as-built. */
  mayPlace: boolean;
  view: RollCallView;
  typed: StartTyped | null;
}

type Open =
  | { kind: 'place'; stranger: Stranger }
  | { kind: 'replace'; slot: SlotRef | null }
  | { kind: 'swap'; first: SlotRef | null; second: SlotRef | null };
const DONE: Record<PlaceBody['kind'], string> = {
  place: commissioningRollCall.theUnitIsPlaced,
  replace: commissioningRollCall.theUnitIsReplaced,
  swap: commissioningRollCall.theTwoUnitsAre,
  move: commissioningRollCall.theUnitIsMoved,
};

/** The roll call of a site, live. */
export function RollCall({ initial, mayRun, mayPlace, view, typed }: Props) {
  const siteId = initial.site.id;
  const key = ['roll-call', siteId];
  const client = queryClient();
  const [meanwhile] = useState(() => new Meanwhile<Change>());
  const { data: page, error } = useQuery(
    {
      queryKey: key,
      queryFn: ({ signal }) =>
        meanwhile.read(() => api<RollCallPage>(paths.api.rollCall(siteId), { signal }), patchRollCall),
      initialData: initial,
      // whether loggers speak is brought by no change
      refetchInterval: ({ state }) => state.data?.run?.stoppedAt === null && 30_000,
    },
    client,
  );
  const again = () => void client.invalidateQueries({ queryKey: key });
  const snapshots = useRef(new Set<string>());
  const heed = useCallback(
    (topic: string) => (change: Change, kind: ChangeKind) => {
      meanwhile.heed(change);
      client.setQueryData<RollCallPage>(['roll-call', siteId], (old) => old && patchRollCall(old, change));
      // a second snapshot means that deltas may have been missed
      const missed = kind === 'snapshot' && snapshots.current.has(topic);
      if (kind === 'snapshot') snapshots.current.add(topic);
      if (missed || (kind === 'delta' && runChanged(change)))
        void client.invalidateQueries({ queryKey: ['roll-call', siteId] });
    },
    [client, siteId, meanwhile],
  );
  const roll = useLive(`roll-call:${siteId}`, heed('roll'));
  const site = useLive(`site:${siteId}`, heed('site'));
  const lost = [roll, site].find((s) => !s.live && s.since);
  const now = useSteps(initial.at, STEP_S * 1000);

  const tally = useMemo(() => tallyOf(page), [page]);
  const running = page.run?.stoppedAt === null;
  const deaf = useMemo(
    () => (!running ? null : lost ? 'page' : deafOf(page, tally, now)),
    [running, lost, page, tally, now],
  );
  const outlook = useMemo(
    () =>
      page.run && running && deaf !== 'page' && !deaf?.all
        ? outlookOf(tally, page.run, now, deaf?.strings ?? undefined)
        : null,
    [tally, page.run, running, now, deaf],
  );
  const [dialog, setDialog] = useState<Open | null>(null);
  const [done, setDone] = useState('');
  const written = (body: PlaceBody) => {
    setDialog(null);
    setDone(DONE[body.kind]);
    again();
  };
  const words = rollCallWords(tally, page.run, outlook, page.site.timeZone, deaf);
  const waits = page.passesUntilHeard.length > 0 && tally.missing.length > 0;
  return (
    <>
      <Heading
        crumbs={[
          { label: commissioningRollCall.commissioning, href: paths.commissioning() },
          { label: page.site.name, href: paths.site(siteId) },
        ]}
        finding={words.heading}
        sentence={
          <>
            {words.strong && <strong>{words.strong}</strong>} {words.rest}
          </>
        }
      />
      <div className="-mt-3 mb-3 min-h-[22px]">
        <LiveMark lostSince={lost?.since ? lost.since.toISOString() : null} timeZone={page.site.timeZone} />
      </div>
      <NotRead error={error} title={commissioningRollCall.theRollCallCould} className="mb-4" />
      <div className="grid gap-5 lg:grid-cols-[minmax(0,1fr)_340px] lg:grid-rows-[auto_auto_1fr] xl:grid-cols-[200px_minmax(0,1fr)_340px] xl:grid-rows-[auto_1fr]">
        <div className="grid content-start gap-5 lg:col-start-2 lg:row-start-2 xl:col-start-3 xl:row-start-1">
          {waits && (
            <Caution strong={commissioningRollCall.untilTheyHaveAnswered}>
              {commissioningRollCall.andDoNotObey}
            </Caution>
          )}
          <RunPanel page={page} mayRun={mayRun} roster={tally.roster} onChanged={again} typed={typed} />
        </div>
        <div className="grid min-w-0 content-start gap-5 lg:col-start-1 lg:row-span-2 lg:row-start-2 xl:col-start-2 xl:row-start-1">
          <Curve className="min-w-0 empty:hidden" page={page} tally={tally} now={now} outlook={outlook} />
          <Strings className="min-w-0 empty:hidden" siteId={siteId} tally={tally} view={view} />
          <Missing
            className="min-w-0 empty:hidden"
            tally={tally}
            started={page.run !== null}
            told={deaf === null}
            siteId={siteId}
            onReplace={mayPlace ? (slot) => setDialog({ kind: 'replace', slot }) : null}
          />
        </div>
        <div className="grid content-start gap-5 lg:col-start-2 lg:row-start-3 xl:col-start-3 xl:row-start-2">
          {done && (
            <Notice kind="done" title={done}>
              {commissioningRollCall.theLoggersGetThe}
              <a href={paths.asBuiltHistory(siteId)} className="text-petrol hover:underline">
                {commissioningRollCall.seeTheHistory}
              </a>
            </Notice>
          )}
          <Unknown
            className="min-w-0 empty:hidden"
            page={page}
            tally={tally}
            onPlace={mayPlace ? ({ answer }) => setDialog({ kind: 'place', stranger: answer }) : null}
          />
          {tally.heard > 0 && (
            <Wired
              className="min-w-0 empty:hidden"
              siteId={siteId}
              onReview={mayPlace ? (first, second) => setDialog({ kind: 'swap', first, second }) : null}
              onReplace={mayPlace ? () => setDialog({ kind: 'replace', slot: null }) : null}
            />
          )}
          <Gateways className="min-w-0 empty:hidden" page={page} tally={tally} />
        </div>
        <div className="lg:col-span-2 lg:row-start-1 xl:col-span-1 xl:col-start-1 xl:row-span-2">
          <StepsBeside site={siteId} steps={liveSteps(page.steps, tally)} here="roll_call" />
        </div>
      </div>
      {dialog?.kind === 'swap' && (
        <Suspense>
          <SwapDialog
            siteId={siteId}
            strings={page.strings}
            first={dialog.first}
            second={dialog.second}
            onClose={() => setDialog(null)}
            onDone={written}
          />
        </Suspense>
      )}
      {(dialog?.kind === 'place' || dialog?.kind === 'replace') && (
        <Suspense>
          <PlaceDialog
            siteId={siteId}
            strings={page.strings}
            answers={page.answers}
            stranger={dialog.kind === 'place' ? dialog.stranger : null}
            slot={dialog.kind === 'replace' ? dialog.slot : null}
            onClose={() => setDialog(null)}
            onDone={written}
          />
        </Suspense>
      )}
    </>
  );
}
