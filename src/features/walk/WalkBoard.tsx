import { useQuery } from '@tanstack/react-query';
import { ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { LiveHeading } from '../../components/ui/LiveHeading';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Walk } from '../../drawings/Walk';
import { withQuery } from '../../lib/api';
import { useLive } from '../../lib/live-hook';
import { queryClient } from '../../lib/query-client';
import { useViewInUrl } from '../../lib/view-in-url';
import { walkLength } from '../../domain/commissioning/walk';
import type { WalkPage, WalkView } from '../../schemas/api/walk';
import { paths } from '../../schemas/paths';
import { StopList } from './StopList';
import { asBuiltChanged, patchWalk, walkKey, walkQuery } from './query';
import { chosenStops, drawnWalk, sparesOf, stopsOfPage, stopsParam, type Stop } from './stops';
import { useTicks } from './ticks';
import { walkHeading, walkSentence } from '../../words/walk-sentences';
import { walkBoard } from '../../words/walk';

const DEFAULTS: WalkView = { stops: '', view: 'walk', string: '' };

interface Props {
  initial: WalkPage;
  view: WalkView;
}

/** The walk over a roof: strings' paths, the exceptions, and the stops in the order of a short path. */
export function WalkBoard({ initial, view: asked }: Props) {
  const client = queryClient();
  const { data: page, error, refetch } = useQuery(walkQuery(initial), client);
  const [view, change] = useViewInUrl<WalkView>(asked, DEFAULTS);
  const { id, timeZone } = initial.site;
  const status = useLive(`site:${id}`, (news, how) => {
    client.setQueryData<WalkPage>(walkKey(id), (old) =>
      patchWalk(old ?? initial, news, new Date().toISOString()),
    );
    if (how === 'delta' && asBuiltChanged(news))
      void client.invalidateQueries({ queryKey: walkKey(id), exact: true });
  });
  const [ticks, setTick] = useTicks(id);

  const all = stopsOfPage(page);
  const stops = chosenStops(all, view);
  const chosen = new Set(stops.map((s) => s.key));
  const leftOut = all.filter((s) => !chosen.has(s.key));
  const choose = (list: readonly Stop[]) =>
    change({
      string: '',
      stops: list.length === all.length ? '' : stopsParam(list.map((s) => s.key)),
    });
  const drawn = drawnWalk(page, stops);
  const done = new Set(ticks.map((t) => t.key));
  const spares = sparesOf(page, stops);
  const metres = walkLength(stops);
  const roof = { outline: page.outline, ...drawn, done };
  const drawable = page.outline.length > 2 || drawn.route.length > 0;
  return (
    <>
      <LiveHeading
        crumbs={[
          { label: walkBoard.commissioning, href: paths.commissioning() },
          { label: page.site.name, href: paths.commissioningSite(id) },
        ]}
        finding={{ heading: walkHeading(page, stops), sentence: walkSentence(page, stops) }}
        status={status}
        timeZone={timeZone}
      />
      <NotRead error={error} title={walkBoard.theWalkCouldNot} onRetry={() => refetch()} className="mb-5">
        {walkBoard.whereTheStopsAre}
      </NotRead>
      <div className="grid gap-5 lg:grid-cols-[minmax(0,1fr)_minmax(360px,420px)]">
        <div className="grid min-w-0 content-start gap-5 self-start lg:sticky lg:top-4">
          {stops.length > 0 && drawable && (
            <Sheet
              id="roof"
              title={walkBoard.theRoof}
              flush
              aside={metres > 0 ? walkBoard.aboutFromTheFirst(metres) : undefined}
            >
              <div className="hidden sm:block">
                <Walk {...roof} width={760} />
              </div>
              <div className="sm:hidden">
                <Walk {...roof} width={340} close />
              </div>
              <p className="mt-2 text-sm text-ink-2">{walkBoard.aSquareIsA}</p>
            </Sheet>
          )}
          {stops.length > 0 && !drawable && (
            <Notice
              kind="empty"
              title={walkBoard.noPlaceOnThe}
              action={
                <a className="text-petrol hover:underline" href={paths.roofPlan(id)}>
                  {walkBoard.drawThem}
                </a>
              }
            />
          )}
          <Caution strong={walkBoard.shutdownIsNotIsolation}>{walkBoard.eachModuleAndIts}</Caution>
        </div>
        <div className="grid min-w-0 content-start gap-5">
          <StopList
            page={page}
            stops={stops}
            leftOut={leftOut}
            ticks={ticks}
            onTick={setTick}
            onLeaveOut={(stop) => choose(stops.filter((s) => s.key !== stop.key))}
            onPutBack={(back) => choose([...stops, ...back])}
          />
          {stops.length > 0 && (
            <Sheet id="card" title={walkBoard.ladderCard}>
              <p className="mb-3 text-ink-2">
                {walkBoard.oneScreenForThe(
                  spares.units.map((u) => walkBoard.countedCountSpareUnit(u.count)).join(', '),
                )}
              </p>
              <ButtonLink
                weight="primary"
                className="w-full"
                href={withQuery(paths.walk(id), { stops: view.stops, string: view.string, view: 'card' })}
              >
                {walkBoard.openTheLadderCard}
              </ButtonLink>
            </Sheet>
          )}
        </div>
      </div>
    </>
  );
}
