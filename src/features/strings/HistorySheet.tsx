import { useQuery } from '@tanstack/react-query';
import { useCallback, useMemo, useState } from 'react';
import type { ChartMark } from '../../components/charts/model';
import { TimeChart } from '../../components/charts/TimeChart';
import { NotRead } from '../../components/ui/NotRead';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { localDay, longDate, shortDate } from '../../drawings/times';
import type { HistoryQuantity, HistoryRange, StringHistory, StringPage } from '../../schemas/api/string';
import type { WorkbenchView } from '../../schemas/api/workbench';
import { CompareControls } from './CompareControls';
import { differenceChart, historyChart, refined, type Overlay } from './history-model';
import { MomentBar } from './MomentBar';
import { historyCsvHref, historyQuery, type HistoryView, type Part } from './queries';
import { shifted } from './view';
import { historySheet } from '../../words/string-history';

const RANGES: readonly { value: HistoryRange; label: string }[] = [
  { value: 'day', label: historySheet.day },
  { value: 'week', label: historySheet.week },
  { value: 'month', label: historySheet.month },
  { value: 'year', label: historySheet.year },
];
const QUANTITIES: readonly { value: HistoryQuantity; label: string }[] = [
  { value: 'voltage', label: historySheet.voltage },
  { value: 'current', label: historySheet.current },
  { value: 'power', label: historySheet.power },
];
const TITLE: Record<HistoryQuantity, string> = {
  voltage: historySheet.stringVoltage,
  current: historySheet.stringCurrent,
  power: historySheet.stringPower,
};
const STEP_DAYS: Record<HistoryRange, number> = { day: 1, week: 7, month: 31, year: 365 };
/** A part smaller than this share of the range is worth fetching more finely. */
const FINER_BELOW = 0.7;

function rangeInWords(history: StringHistory): string {
  const last = (history.to - 1) * 1000;
  if (history.range === 'day') return longDate(last, history.timeZone);
  const first = history.range === 'year' ? longDate : shortDate;
  return historySheet.firstToLast(first(history.from * 1000, history.timeZone), last, history.timeZone);
}

interface Props {
  page: StringPage;
  view: WorkbenchView;
  onView: (some: Partial<WorkbenchView>) => void;
  /** The view as the server drew it. */
  initial: StringHistory;
  initialView: WorkbenchView;
  notes: readonly ChartMark[];
  /** Epoch s; null: now. */
  moment: number | null;
  onMoment: (at: number | null, done: boolean) => void;
}

const asHistory = (view: WorkbenchView): HistoryView => ({
  range: view.range,
  quantity: view.quantity,
  on: view.on || null,
  each: view.siblings === 'each',
});

/** The other string's or the other day's history, once it is chosen and fetched. */
function useOverlay(page: StringPage, view: WorkbenchView): { overlay: Overlay | null; error: Error | null } {
  const base = asHistory(view);
  const other = [...page.siblings, page.neighbours.previous, page.neighbours.next].find(
    (s) => s?.id === view.beside,
  );
  const string = useQuery({
    ...historyQuery(view.beside, { ...base, each: false }, null),
    enabled: view.beside !== '',
  });
  const day = useQuery({
    ...historyQuery(page.string.id, { ...base, on: view.day, each: false }, null),
    enabled: view.day !== '' && view.range !== 'year',
  });
  if (view.beside !== '')
    return {
      overlay:
        string.data && !string.isPlaceholderData
          ? { name: historySheet.stringOther(other?.name), history: string.data }
          : null,
      error: string.error,
    };
  if (view.day !== '' && view.range !== 'year')
    return {
      overlay:
        day.data && !day.isPlaceholderData ? { name: rangeInWords(day.data), history: day.data } : null,
      error: day.error,
    };
  return { overlay: null, error: null };
}

/** The string over a day, week, month or year: measured, expected, siblings, and what is laid over it. */
export function HistorySheet({ page, view, onView, initial, initialView, notes, moment, onMoment }: Props) {
  const { id } = page.string;
  const subject = historySheet.siteStringWhich(page.site.name, page.string.name);
  const [part, setPart] = useState<Part | null>(null);
  const shownView = asHistory(view);
  const first = JSON.stringify(shownView) === JSON.stringify(asHistory(initialView));
  const whole = useQuery({
    ...historyQuery(id, shownView, null),
    ...(first
      ? { initialData: initial, initialDataUpdatedAt: initial.to === 0 ? 0 : new Date(page.at).getTime() }
      : {}),
  });
  const history = whole.data ?? initial;
  const finer = useQuery({ ...historyQuery(id, shownView, part), enabled: part !== null });
  const { overlay, error: overlayError } = useOverlay(page, view);
  const shown = useMemo(
    () => refined(history, part !== null && !finer.isPlaceholderData ? (finer.data ?? null) : null),
    [history, part, finer.data, finer.isPlaceholderData],
  );
  const model = useMemo(
    () => historyChart(shown, subject, { siblings: view.siblings, overlay, notes }),
    [shown, subject, view.siblings, overlay, notes],
  );
  const difference = useMemo(
    () => (overlay && view.difference === 'yes' ? differenceChart(shown, overlay, subject) : null),
    [shown, overlay, view.difference, subject],
  );
  const { from, to } = history;
  const onZoom = useCallback(
    (span: Part | null) =>
      setPart(
        span && span.to - span.from < (to - from) * FINER_BELOW
          ? { from: Math.max(from, span.from), to: Math.min(to, span.to) }
          : null,
      ),
    [from, to],
  );
  const show = (some: Partial<WorkbenchView>) => {
    setPart(null);
    onView(some);
  };
  const today = localDay(page.at, history.timeZone);
  const now = Math.floor(new Date(page.at).getTime() / 1000);
  const last = view.on || today;
  const step = (days: number) => {
    const next = shifted(last, days);
    show({ on: next >= today ? '' : next });
  };
  const empty = history.values.every((v) => v === null) && history.imported.at.length === 0;
  // a day of years has no minute: a moment is chosen in a day, a week or a month
  const momentary = history.resolution !== 'day';
  const stepS = history.range === 'day' ? 60 : 900;
  const plain = overlay === null && view.siblings !== 'each' && history.imported.at.length === 0;
  return (
    <Sheet
      id="history"
      title={TITLE[view.quantity]}
      aside={
        <div className="flex flex-wrap items-center gap-x-4">
          <Segmented
            label={historySheet.quantity}
            options={QUANTITIES}
            value={view.quantity}
            onChange={(quantity) => show({ quantity })}
          />
          <Segmented
            label={historySheet.range}
            options={RANGES}
            value={view.range}
            onChange={(range) => show({ range })}
          />
        </div>
      }
    >
      <NotRead
        error={whole.error}
        title={historySheet.theHistoryCouldNot}
        kind="failed"
        onRetry={() => whole.refetch()}
      />
      <CompareControls page={page} view={view} today={today} onChange={show} />
      <NotRead error={overlayError} title={historySheet.whatShouldBeLaid} kind="failed" />
      <div aria-busy={whole.isFetching} className={whole.isPlaceholderData ? 'opacity-60' : ''}>
        <TimeChart
          key={`${view.quantity} ${from} ${to}`}
          model={model}
          height={330}
          fileName={`string-${view.quantity}-${view.range}-${last}`}
          csvHref={plain ? historyCsvHref(id, shownView, part) : undefined}
          onZoom={onZoom}
          moment={momentary ? moment : null}
          onMoment={momentary ? (at, done) => onMoment(Math.min(now, at), done) : undefined}
          controls={
            <div className="flex items-center gap-1">
              <button
                type="button"
                className="target px-2 text-ink-2 hover:text-ink"
                aria-label={historySheet.earlier}
                onClick={() => step(-STEP_DAYS[view.range])}
              >
                ←
              </button>
              <span className="text-sm text-ink-2" role="status">
                {rangeInWords(history)}
              </span>
              <button
                type="button"
                className="target px-2 text-ink-2 hover:text-ink disabled:opacity-40"
                aria-label={historySheet.later}
                disabled={view.on === ''}
                onClick={() => step(STEP_DAYS[view.range])}
              >
                →
              </button>
              <label>
                <span className="sr-only">{historySheet.lastDayShown}</span>
                <input
                  type="date"
                  value={last}
                  max={today}
                  onChange={(event) => {
                    const day = event.target.value;
                    if (day !== '') show({ on: day >= today ? '' : day });
                  }}
                  className="target rounded border border-rule bg-sheet px-2 text-sm text-ink"
                />
              </label>
            </div>
          }
        />
      </div>
      {momentary ? (
        <MomentBar
          from={model.from}
          to={model.to}
          now={now}
          stepS={stepS}
          moment={moment}
          timeZone={history.timeZone}
          onMoment={onMoment}
        />
      ) : (
        <p className="mt-2 text-sm text-ink-2">{historySheet.aYearShowsDays}</p>
      )}
      {difference && overlay && (
        <div className="mt-4 border-t border-rule-faint pt-3">
          <h3 className="text-sm font-medium">
            {historySheet.whichLessOverlay(page.string.name, overlay.name)}
          </h3>
          <TimeChart
            key={`less ${view.quantity} ${from} ${to}`}
            model={difference}
            height={220}
            fileName={`string-${view.quantity}-difference-${last}`}
          />
        </div>
      )}
      {empty && !whole.isFetching && (
        <p className="text-sm text-ink-2">{historySheet.nothingWasReportedIn}</p>
      )}
      <div className="mt-1 space-y-1 text-sm text-ink-2">
        {history.expected.from && <p>{historySheet.bandExpectedNineTimes(history.expected.from)}</p>}
        {overlay && <p>{historySheet.dashedOverlay(overlay.name)}</p>}
        {history.notes.map((note) => (
          <p key={note}>{note}</p>
        ))}
      </div>
    </Sheet>
  );
}
