import { Suspense, useCallback, useEffect, useRef, useState, type RefObject } from 'react';
import { overlaid } from '../../lib/capture-records';
import { ofPerson } from '../../lib/capture-queue';
import { late, useSoon } from '../../lib/late';
import { useViewInUrl } from '../../lib/view-in-url';
import type { CaptureSnapshot } from '../../schemas/api/capture';
import { Segmented } from '../../components/ui/Segmented';
import { Head } from './Head';
import { StringList } from './StringList';
import { useCaptureWorker } from './use-worker';
import { usePhone } from './use-phone';
import { VIEW_DEFAULTS, forString, viewOf, type CaptureView } from './view';
import { countAndKind } from './words';
import { capture } from '../../words/capture';

const reading = async () => (await import('./ReadingScreen')).ReadingScreen;
const checks = async () => (await import('./CheckScreen')).CheckScreen;
const waiting = async () => (await import('./WaitingScreen')).WaitingScreen;
const KeptSites = late(async () => (await import('./Shell')).KeptSites);
const NotHere = late(async () => (await import('./Shell')).NotHere);
const ReadingScreen = late(reading);
const CheckScreen = late(checks);
const WaitingScreen = late(waiting);
const SCREENS = [reading, checks, waiting];

interface Props {
  /** From the server; null: this is the shell, and what the phone keeps has to do. */
  initial: CaptureSnapshot | null;
  /** The address's query, where the server drew the page. */
  search?: string;
}

/** The site that the address names, in the shell. */
const siteInAddress = (): string | null =>
  /^\/capture\/([0-9a-f-]{36})\/?$/.exec(window.location.pathname)?.[1] ?? null;

/** The phone's clock, a tick each half minute. The first paint agrees with the server's. */
function useClock(first: string | null): Date {
  const [clock, setClock] = useState(() => (first ? new Date(first) : new Date()));
  useEffect(() => {
    const tick = () => setClock(new Date());
    const soon = setTimeout(tick, 0);
    const timer = setInterval(tick, 30_000);
    return () => {
      clearTimeout(soon);
      clearInterval(timer);
    };
  }, []);
  return clock;
}

/** Another screen is there: it begins at its top, for the keyboard as well. */
function Arrival({ place, screen }: { place: string; screen: RefObject<HTMLDivElement | null> }) {
  const shown = useRef(place);
  useEffect(() => {
    if (shown.current === place) return;
    shown.current = place;
    window.scrollTo({ top: 0 });
    screen.current?.querySelector<HTMLElement>('h1')?.focus({ preventScroll: true });
  }, [place, screen]);
  return null;
}

/** The phone's page of a site: readings and install checks, with and without a network. */
export function Capture({ initial, search }: Props) {
  const [site] = useState(() => initial?.site.id ?? siteInAddress());
  const [first] = useState(() => viewOf(search ?? window.location.search));
  const [view, changeView] = useViewInUrl<CaptureView>(first, VIEW_DEFAULTS);
  const { phone, state } = usePhone(site, initial);
  const clock = useClock(initial?.at ?? null);
  const [said, say] = useState('');
  useCaptureWorker();
  useSoon(SCREENS);

  const screen = useRef<HTMLDivElement>(null);
  const change = useCallback(
    (some: Partial<CaptureView>, how: 'typed' | 'chosen' = 'chosen') => changeView(some, how),
    [changeView],
  );
  const place = `${view.string} ${view.part}`;
  const { snapshot, here } = state;
  if (!snapshot) {
    return (
      <div className="mx-auto max-w-[560px] px-4 pb-8">
        <Head
          phone={phone}
          state={state}
          title={capture.wakelineOnThisPhone}
          aside=""
          change={change}
          clock={clock}
          said=""
        />
        <main id="main" tabIndex={-1} className="pt-5 outline-none" ref={screen}>
          <Suspense>{site ? <NotHere state={state} /> : <KeptSites phone={phone} state={state} />}</Suspense>
        </main>
      </div>
    );
  }
  const mine = here ? ofPerson(state.records, here.person) : [];
  const whole = overlaid(snapshot, mine);
  const string = whole.strings.find((s) => s.id === view.string) ?? null;
  const part = view.part === 'waiting' ? 'waiting' : string ? view.part : 'list';
  const props = { phone, state, site: whole, view, change, clock, say };
  return (
    <div className="mx-auto max-w-[560px] px-4 pb-8">
      <Head
        phone={phone}
        state={state}
        title={
          part === 'waiting'
            ? capture.waiting
            : string
              ? capture.stringWhich(string.name)
              : snapshot.site.name
        }
        aside={string && part !== 'waiting' ? countAndKind(whole, string) : ''}
        change={change}
        clock={clock}
        said={said}
      />
      <main id="main" tabIndex={-1} className="pt-2 outline-none" ref={screen}>
        {string && part !== 'waiting' && (
          <div className="mb-1 flex items-center justify-between gap-2">
            <Segmented
              label={capture.whatIsRecorded}
              name="part"
              value={view.part === 'checks' ? 'checks' : 'readings'}
              options={[
                { value: 'readings', label: capture.readings },
                { value: 'checks', label: capture.checks },
              ]}
              onChange={(next) => change({ part: next, fix: '', draft: '' })}
            />
            <button
              type="button"
              className="min-h-[44px] shrink-0 text-[15px] text-petrol underline underline-offset-[3px]"
              onClick={() => change(forString(view, ''))}
            >
              {capture.allStrings}
            </button>
          </div>
        )}
        <Suspense>
          {part === 'list' && <StringList {...props} />}
          {part === 'readings' && string && <ReadingScreen key={string.id} {...props} string={string} />}
          {part === 'checks' && string && <CheckScreen key={string.id} {...props} string={string} />}
          {part === 'waiting' && <WaitingScreen {...props} />}
          <Arrival place={place} screen={screen} />
        </Suspense>
      </main>
    </div>
  );
}
