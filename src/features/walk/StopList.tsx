import { Button } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { StateTag } from '../../components/states/StateTag';
import { Tag } from '../../components/ui/Tag';
import type { SlotNow } from '../../schemas/api/now';
import type { WalkPage } from '../../schemas/api/walk';
import { paths } from '../../schemas/paths';
import type { Stop } from './stops';
import type { Tick } from './ticks';
import { STOP_TASKS, STOP_WORDS } from '../../words/walk-sentences';
import { stopList } from '../../words/walk';

const slotOf = (page: WalkPage, stringName: string, position: number | null): SlotNow | undefined =>
  page.strings.find((s) => s.name === stringName)?.slots.find((slot) => slot.position === position);

/** What the unit says at this moment: the reason to look at the phone again after the work. */
function Reads({ slot, page }: { slot: SlotNow | undefined; page: WalkPage }) {
  if (!slot?.seen) return <>{stopList.noReportYet}</>;
  return <>{stopList.voltageAtSeen(slot.voltage, slot.seen, page.at, page.site.timeZone)}</>;
}

interface RowProps {
  page: WalkPage;
  stop: Stop;
  number: number;
  tick: Tick | undefined;
  onTick: (on: boolean) => void;
  /** null: it is the only one. */
  onLeaveOut: (() => void) | null;
}

function Row({ page, stop, number, tick, onTick, onLeaveOut }: RowProps) {
  const slot = slotOf(page, stop.stringName, stop.position);
  const { timeZone } = page.site;
  return (
    <li className="border-b border-rule-faint py-3 first:pt-0 last:border-b-0 last:pb-0">
      <div className="flex items-start justify-between gap-3">
        <label className="flex min-w-0 cursor-pointer items-start gap-3">
          <span className="flex h-11 w-11 flex-none items-center justify-center">
            <input
              type="checkbox"
              checked={tick !== undefined}
              onChange={(e) => onTick(e.target.checked)}
              className="h-6 w-6 accent-petrol"
              aria-label={stopList.isDone(stop.key)}
            />
          </span>
          <span className="min-w-0">
            <span className={`block text-[17px] font-semibold ${tick ? 'line-through' : ''}`}>
              {number}. {stop.key}
            </span>
            <span className="block text-ink-2">
              {stop.roofPlace || stopList.placeOnTheRoof}
              {stop.serial && (
                <>
                  {' '}
                  · <span className="whitespace-nowrap">{stop.serial}</span>
                </>
              )}
            </span>
          </span>
        </label>
        {stop.kind === 'unplaced' ? (
          <Tag tone="outline">{stopList.noUnit}</Tag>
        ) : stop.position === null ? (
          <Tag tone={stop.kind === 'not_shutting_down' ? 'crimson' : 'rust'} shape="▼">
            {STOP_WORDS[stop.kind]}
          </Tag>
        ) : (
          <StateTag state={slot?.state ?? null} verdict={slot?.verdict ?? null} />
        )}
      </div>
      <div className="mt-1 flex flex-wrap items-center justify-between gap-x-4 pl-14">
        <p className="min-w-0 flex-1 text-sm text-ink-2">
          {tick ? (
            <>
              {stopList.tickedStillByIts(tick.at, timeZone, STOP_WORDS[stop.kind])}
              <Reads slot={slot} page={page} />.
            </>
          ) : null}
        </p>
        <span className="no-print flex flex-none gap-1">
          <a
            href={paths.string(page.site.id, stop.stringId)}
            className="target inline-flex items-center px-2 text-sm text-petrol hover:underline"
          >
            {stop.stringName}
          </a>
          {onLeaveOut && (
            <button
              type="button"
              onClick={onLeaveOut}
              className="target px-2 text-sm text-ink-2 hover:text-ink hover:underline"
              aria-label={stopList.leaveOut2(stop.key)}
            >
              {stopList.leaveOut}
            </button>
          )}
        </span>
      </div>
    </li>
  );
}

interface Props {
  page: WalkPage;
  stops: readonly Stop[];
  leftOut: readonly Stop[];
  ticks: readonly Tick[];
  onTick: (tick: Tick, on: boolean) => void;
  onLeaveOut: (stop: Stop) => void;
  onPutBack: (stops: readonly Stop[]) => void;
}

/** The stops in their order; each can be ticked, left out, and says by itself when it is in order again. */
export function StopList({ page, stops, leftOut, ticks, onTick, onLeaveOut, onPutBack }: Props) {
  const keys = new Set([...stops, ...leftOut].map((s) => s.key));
  const kinds = [...new Set(stops.map((s) => s.kind))];
  const mended = ticks.filter((t) => !keys.has(t.key));
  return (
    <>
      <Sheet
        id="stops"
        title={stopList.stops}
        aside={
          stops.length > 0 && (
            <>
              {stopList.ofTicked(
                stops.filter((s) => ticks.some((t) => t.key === s.key)).length,
                stops.length,
              )}
              <a href={paths.api.walkCsv(page.site.id)} download className="text-petrol underline">
                {stopList.allAsCsv}
              </a>
            </>
          )
        }
      >
        {stops.length === 0 ? (
          <Notice
            kind={page.rollCalled ? 'done' : 'empty'}
            title={page.rollCalled ? stopList.noStopIsLeft : stopList.theRollCallHas}
            action={
              page.rollCalled ? undefined : (
                <a className="text-petrol hover:underline" href={paths.rollCall(page.site.id)}>
                  {stopList.toTheRollCall}
                </a>
              )
            }
          />
        ) : (
          <>
            <dl className="mb-3 grid gap-1 border-b border-rule pb-3 text-sm text-ink-2">
              {kinds.map((kind) => (
                <div key={kind}>
                  <dt className="inline font-medium text-ink">{STOP_WORDS[kind]}:</dt>{' '}
                  <dd className="inline">{STOP_TASKS[kind]}</dd>
                </div>
              ))}
            </dl>
            <ol>
              {stops.map((stop, i) => (
                <Row
                  key={stop.key}
                  page={page}
                  stop={stop}
                  number={i + 1}
                  tick={ticks.find((t) => t.key === stop.key)}
                  onTick={(on) =>
                    onTick({ key: stop.key, at: new Date().toISOString(), kind: stop.kind }, on)
                  }
                  onLeaveOut={stops.length > 1 ? () => onLeaveOut(stop) : null}
                />
              ))}
            </ol>
          </>
        )}
        {leftOut.length > 0 && (
          <div className="no-print mt-4 border-t border-rule-faint pt-3">
            <p className="text-sm text-ink-2">{stopList.leftOutOfThis}</p>
            <div className="mt-1.5 flex flex-wrap gap-1.5">
              {leftOut.slice(0, 24).map((s) => (
                <Button key={s.key} className="!px-2.5 !text-sm" onClick={() => onPutBack([s])}>
                  + {s.key}
                </Button>
              ))}
              <Button className="!px-2.5 !text-sm" onClick={() => onPutBack(leftOut)}>
                {stopList.putAllBack(leftOut.length)}
              </Button>
            </div>
          </div>
        )}
      </Sheet>
      {mended.length > 0 && (
        <Sheet id="mended" title={stopList.tickedAndInOrder}>
          <ul>
            {mended.map((t) => {
              const [, name, position] = /^(.*)-(\d+)$/.exec(t.key) ?? [];
              const slot = slotOf(page, name ?? '', Number(position));
              return (
                <li
                  key={t.key}
                  className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1 border-b border-rule-faint py-2 last:border-b-0"
                >
                  <span>
                    <span className="font-semibold">{t.key}</span>{' '}
                    <span className="text-ink-2">
                      {stopList.wasTickedNow(STOP_WORDS[t.kind], t.at, page.site.timeZone)}
                      <Reads slot={slot} page={page} />
                    </span>
                  </span>
                  <span className="flex items-center gap-2">
                    {slot && <StateTag state={slot.state} verdict={slot.verdict} />}
                    <button
                      type="button"
                      className="target px-2 text-sm text-ink-2 hover:underline"
                      onClick={() => onTick(t, false)}
                    >
                      {stopList.forget}
                    </button>
                  </span>
                </li>
              );
            })}
          </ul>
        </Sheet>
      )}
    </>
  );
}
