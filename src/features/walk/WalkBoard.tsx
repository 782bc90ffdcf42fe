import { useQuery } from '@tanstack/react-query';
import { ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { LiveHeading } from '../../components/ui/LiveHeading';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Walk } from '../../drawings/Walk';
import { counted, number } from '../../drawings/numbers';
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
import { walkHeading, walkSentence } from './words';

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
          { label: 'Commissioning', href: paths.commissioning() },
          { label: page.site.name, href: paths.commissioningSite(id) },
        ]}
        finding={{ heading: walkHeading(page, stops), sentence: walkSentence(page, stops) }}
        status={status}
        timeZone={timeZone}
      />
      <NotRead
        error={error}
        title="The walk could not be read again"
        onRetry={() => refetch()}
        className="mb-5"
      >
        Where the stops are still holds.
      </NotRead>
      <div className="grid gap-5 lg:grid-cols-[minmax(0,1fr)_minmax(360px,420px)]">
        <div className="grid min-w-0 content-start gap-5 self-start lg:sticky lg:top-4">
          {stops.length > 0 && drawable && (
            <Sheet
              id="roof"
              title="The roof"
              flush
              aside={metres > 0 ? `about ${number(metres)} m from the first stop to the last` : undefined}
            >
              <div className="hidden sm:block">
                <Walk {...roof} width={760} />
              </div>
              <div className="sm:hidden">
                <Walk {...roof} width={340} close />
              </div>
              <p className="mt-2 text-sm text-ink-2">
                A square is a stop, with its position counted from the negative end: filled, stuck or not
                shutting down; dashed, unheard or without a unit; crossed, silent. Dotted: the way.
              </p>
            </Sheet>
          )}
          {stops.length > 0 && !drawable && (
            <Notice
              kind="empty"
              title="No place on the roof is drawn for these strings"
              action={
                <a className="text-petrol hover:underline" href={paths.roofPlan(id)}>
                  Draw them
                </a>
              }
            />
          )}
          <Caution strong="Shutdown is not isolation.">
            Each module and its leads to its unit stay at module voltage in light. Never open a connector
            under load. Isolate, lock out, prove dead with a rated meter; local code first, qualified people
            only.
          </Caution>
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
            <Sheet id="card" title="Ladder card">
              <p className="mb-3 text-ink-2">
                One screen for the pocket: places,{' '}
                {spares.units.map((u) => counted(u.count, 'spare unit')).join(', ')}, connector types, what
                the meter should read.
              </p>
              <ButtonLink
                weight="primary"
                className="w-full"
                href={withQuery(paths.walk(id), { stops: view.stops, string: view.string, view: 'card' })}
              >
                Open the ladder card
              </ButtonLink>
            </Sheet>
          )}
        </div>
      </div>
    </>
  );
}
