import { QueryClientProvider, useQuery, useQueryClient } from '@tanstack/react-query';
import { lazy, useCallback, useDeferredValue, useMemo, useState } from 'react';
import type { ChartMark } from '../../components/charts/model';
import { ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Heading } from '../../components/ui/Heading';
import { LiveMark } from '../../components/ui/Live';
import { NotRead } from '../../components/ui/NotRead';
import { energy } from '../../drawings/numbers';
import { localDay } from '../../drawings/times';
import { Sheet } from '../../components/ui/Sheet';
import { withQuery } from '../../lib/api';
import { late } from '../../lib/late';
import { later } from '../../lib/later';
import { useLive } from '../../lib/live-hook';
import { unpacking } from '../../lib/packed';
import { tells } from '../../lib/patch';
import { queryClient } from '../../lib/query-client';
import { useViewInUrl } from '../../lib/view-in-url';
import type { StringHistory, StringPage } from '../../schemas/api/string';
import { UNITS_CHOSEN_MOST, type WorkbenchView } from '../../schemas/api/workbench-view';
import { paths } from '../../schemas/paths';
import { cautionOf, nextSteps, readingsOf } from './advice';
import { CopyLink } from './CopyLink';
import { EventsSheet } from './EventsSheet';
import { HistorySheet } from './HistorySheet';
import { NextStrings } from './NextStrings';
import { ReadingsSheet } from './ReadingsSheet';
import { StaircaseSheet } from './StaircaseSheet';
import { UnitTable } from './UnitTable';
import { notesQuery, stringQuery } from './queries';
import { chosenUnits, DEFAULTS, permanentAddress, unitsInAddress } from './view';
import { WhenNear } from './WhenNear';
import { findingOf, type Sentence } from '../../words/strings-sentences';
import { stringView } from '../../words/strings';

const Events = later(
  async () => (await import('./EventsSheet')).EventsSheet,
  import.meta.env.SSR ? EventsSheet : null,
);
const Units = later(
  async () => (await import('./UnitTable')).UnitTable,
  import.meta.env.SSR ? UnitTable : null,
);
const UnitsSheet = lazy(() => import('./UnitsSheet'));
const HeatSheet = lazy(() => import('./HeatSheet'));
const LoopSheet = lazy(() => import('./LoopSheet'));
const ExplanationsSheet = lazy(() => import('./ExplanationsSheet'));
const NotesSheet = lazy(() => import('./NotesSheet'));
const TraceSheet = late(async () => (await import('../../components/trace/TraceSheet')).TraceSheet);

interface Props {
  page: StringPage;
  history: StringHistory;
  view: WorkbenchView;
}

function Words({ sentence }: { sentence: Sentence }) {
  return sentence.map((part, i) =>
    typeof part === 'string' ? part : <strong key={i}>{part.strong}</strong>,
  );
}

/** What /live says of this string replaces what the page said; events come on top. */
function useStringLive(initial: StringPage) {
  const client = useQueryClient();
  const options = stringQuery(initial.string.id);
  const result = useQuery({
    ...options,
    initialData: initial,
    initialDataUpdatedAt: new Date(initial.at).getTime(),
  });
  const status = useLive(`string:${initial.string.id}`, (change) => {
    client.setQueryData(options.queryKey, (page) => {
      if (!page) return page;
      const string = change.strings?.find((s) => s.id === page.string.id) ?? page.string;
      const known = new Set(page.events.map((e) => e.id));
      const fresh = (change.events ?? []).filter((e) => !known.has(e.id)).reverse();
      return {
        ...page,
        string,
        events: [...fresh, ...page.events].slice(0, 60),
        at: new Date().toISOString(),
      };
    });
    // the judgement's evidence comes with the page, not by the wire
    if (tells(change, () => true)) void client.invalidateQueries({ queryKey: options.queryKey, exact: true });
  });
  // what is typed and tapped shows at once, what came follows
  const page = useDeferredValue(result.data);
  return { page, failed: result.isRefetchError ? result.error : null, status };
}

/** The notes as marks on the time axis. */
function useNoteMarks(page: StringPage): ChartMark[] {
  const notes = useQuery(notesQuery(page.site.id, page.string.id));
  return useMemo(
    () =>
      (notes.data ?? []).map((note): ChartMark => ({
        from: Date.parse(note.from) / 1000,
        to: note.to === null ? null : Date.parse(note.to) / 1000,
        words: stringView.noteNote(note.text),
        tone: 'petrol',
      })),
    [notes.data],
  );
}

/** The moment of the staircase: in the address once it is let go, here while it is dragged. */
function useMoment(view: WorkbenchView, setView: (some: Partial<WorkbenchView>) => void) {
  const [dragged, setDragged] = useState<number | null>(null);
  const moment = dragged ?? (view.at === '' ? null : Number(view.at));
  const onMoment = useCallback(
    (at: number | null, done: boolean) => {
      const minute = at === null ? null : Math.floor(at / 60) * 60;
      setDragged(done ? null : minute);
      if (done && (minute === null ? '' : String(minute)) !== view.at)
        setView({ at: minute === null ? '' : String(minute) });
    },
    [view.at, setView],
  );
  return { moment, onMoment };
}

function Page({ page: initial, history, view: initialView }: Props) {
  const { page, failed, status } = useStringLive(initial);
  const [view, setView] = useViewInUrl(initialView, DEFAULTS);
  const { moment, onMoment } = useMoment(view, setView);
  const notes = useNoteMarks(page);
  const { string, site } = page;
  const when = { now: page.at, timeZone: site.timeZone };
  const nowS = Math.floor(new Date(page.at).getTime() / 1000);
  const finding = findingOf(string, when);
  const readings = readingsOf(page, finding);
  const steps = nextSteps(page, finding);
  const caution = cautionOf(finding);
  const told = string.kind !== 'shutdown_only';
  const chosen = useMemo(() => chosenUnits(view, string.slots), [view, string.slots]);
  const address = () =>
    permanentAddress(paths.string(site.id, string.id), view, {
      day: localDay(page.at, site.timeZone),
      atS: nowS,
      units: chosen,
    });
  const chooseCell = (at: number, position: number) => {
    const units =
      chosen.includes(position) || chosen.length >= UNITS_CHOSEN_MOST ? chosen : [...chosen, position];
    setView({ at: String(at), units: unitsInAddress(units) });
  };
  return (
    <>
      <Heading
        crumbs={[
          { label: stringView.fleet, href: paths.fleet() },
          { label: site.name, href: paths.site(site.id) },
          { label: stringView.stringWhich(string.name) },
        ]}
        finding={finding.heading}
        sentence={<Words sentence={finding.sentence} />}
        actions={
          <>
            <NextStrings page={page} />
            <CopyLink address={address} />
            {page.openCase ? (
              <ButtonLink weight="primary" href={paths.caseFile(page.openCase.id)}>
                {stringView.caseOpenCase(page.openCase.number)}
              </ButtonLink>
            ) : (
              <ButtonLink weight="primary" href={paths.caseNew({ string: string.id })}>
                {stringView.openACase}
              </ButtonLink>
            )}
          </>
        }
      />
      <div className="-mt-3 mb-3 flex flex-col gap-2 empty:hidden">
        <LiveMark
          lostSince={!status.live && status.since ? status.since.toISOString() : null}
          timeZone={site.timeZone}
        />
        <NotRead error={failed} title={stringView.theNewestFiguresCould} />
      </div>
      <p className="sr-only" role="status">
        {finding.heading}
      </p>
      {/* on a phone one column, what the readings say first */}
      <div className="flex flex-col gap-5 lg:grid lg:grid-cols-[minmax(0,1fr)_minmax(280px,28%)]">
        <div className="contents lg:flex lg:min-w-0 lg:flex-col lg:gap-5">
          <div className="order-2 min-w-0 lg:order-none">
            <StaircaseSheet page={page} moment={moment} onNow={() => onMoment(null, true)} />
          </div>
          <div className="order-5 min-w-0 lg:order-none">
            <HistorySheet
              page={page}
              view={view}
              onView={setView}
              initial={history}
              initialView={initialView}
              notes={notes}
              moment={moment}
              onMoment={onMoment}
            />
          </div>
          <div className="order-6 min-w-0 lg:order-none">
            <WhenNear height={420}>
              <ExplanationsSheet page={page} view={view} />
            </WhenNear>
          </div>
        </div>
        <div className="contents lg:flex lg:min-w-0 lg:flex-col lg:gap-5">
          {readings.main && (
            <div className="order-1 min-w-0 lg:order-none">
              <ReadingsSheet readings={readings} />
            </div>
          )}
          {steps.length > 0 && (
            <div className="order-4 min-w-0 lg:order-none">
              <Sheet title={stringView.doNext} id="next">
                <ol className="list-decimal space-y-1.5 pl-5 text-[15px] leading-[22px]">
                  {steps.map((step) => (
                    <li key={step}>{step}</li>
                  ))}
                </ol>
                <p className="no-print mt-3">
                  <ButtonLink href={withQuery(paths.walk(site.id), { string: string.name })}>
                    {stringView.walkAndLadderCard}
                  </ButtonLink>
                </p>
              </Sheet>
            </div>
          )}
          <div className="order-3 min-w-0 lg:order-none">
            <Caution strong={caution.strong}>{caution.rest}</Caution>
          </div>
          {page.lostToday && (
            <div className="order-4 min-w-0 lg:order-none">
              <Sheet title={stringView.lostHereToday} id="lost">
                <p className="text-[28px] font-semibold leading-8 tracking-[-0.02em]">
                  {energy(page.lostToday.wh)}
                </p>
                <p className="mt-2 text-sm text-ink-2">
                  {stringView.sinceAgainst(page.lostToday.since, site.timeZone, page.lostToday.against)}
                </p>
              </Sheet>
            </div>
          )}
          <div className="order-7 min-w-0 lg:order-none">
            <WhenNear height={160}>
              <NotesSheet page={page} atS={moment ?? nowS} onMoment={(at) => onMoment(at, true)} />
            </WhenNear>
          </div>
          <div className="order-8 min-w-0 lg:order-none">
            <Events page={page} />
          </div>
        </div>
        <div className="order-9 flex min-w-0 flex-col gap-5 lg:order-none lg:col-span-2">
          {told && (
            <>
              <WhenNear height={430}>
                <UnitsSheet
                  page={page}
                  view={view}
                  chosen={chosen}
                  onView={setView}
                  moment={moment}
                  onMoment={onMoment}
                />
              </WhenNear>
              <WhenNear height={400}>
                <HeatSheet page={page} view={view} onView={setView} moment={moment} onChoose={chooseCell} />
              </WhenNear>
              <WhenNear height={480}>
                <LoopSheet page={page} view={view} />
              </WhenNear>
            </>
          )}
          <WhenNear>
            <TraceSheet siteId={site.id} stringId={string.id} timeZone={site.timeZone} />
          </WhenNear>
          <Units page={page} className="min-w-0" />
        </div>
      </div>
    </>
  );
}

/** The page of one string, rendered on the server and then kept live. */
export const StringView = unpacking((props: Props) => (
  <QueryClientProvider client={queryClient()}>
    <Page {...props} />
  </QueryClientProvider>
));
