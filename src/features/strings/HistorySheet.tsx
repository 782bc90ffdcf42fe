import { useQuery } from '@tanstack/react-query';
import { useCallback, useMemo, useState } from 'react';
import { TimeChart } from '../../components/charts/TimeChart';
import { NotRead } from '../../components/ui/NotRead';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { localDay, longDate, shortDate } from '../../drawings/times';
import type { HistoryRange, StringHistory } from '../../schemas/api/string';
import { historyChart, refined } from './history-model';
import { historyCsvHref, historyQuery, type HistoryView, type Part } from './queries';

const RANGES: readonly { value: HistoryRange; label: string }[] = [
  { value: 'day', label: 'Day' },
  { value: 'week', label: 'Week' },
  { value: 'month', label: 'Month' },
  { value: 'year', label: 'Year' },
];
const STEP_DAYS: Record<HistoryRange, number> = { day: 1, week: 7, month: 31, year: 365 };
/** A part smaller than this share of the range is worth fetching more finely. */
const FINER_BELOW = 0.7;

function shifted(day: string, days: number): string {
  const at = new Date(`${day}T12:00:00Z`);
  at.setUTCDate(at.getUTCDate() + days);
  return at.toISOString().slice(0, 10);
}

function rangeInWords(history: StringHistory): string {
  const last = (history.to - 1) * 1000;
  if (history.range === 'day') return longDate(last, history.timeZone);
  const first = history.range === 'year' ? longDate : shortDate;
  return `${first(history.from * 1000, history.timeZone)} to ${longDate(last, history.timeZone)}`;
}

interface Props {
  id: string;
  /** Whose history: "Old Tannery Market Hall, string B3". */
  subject: string;
  /** The day as the server drew it. */
  initial: StringHistory;
  /** The server's clock. */
  today: string;
}

/** The string's voltage over a day, week, month or year; zooming in fetches finer data. */
export function HistorySheet({ id, subject, initial, today: now }: Props) {
  const [view, setView] = useState<HistoryView>({ range: 'day', on: null });
  const [part, setPart] = useState<Part | null>(null);
  const first = view.range === 'day' && view.on === null;
  const whole = useQuery({
    ...historyQuery(id, view, null),
    ...(first
      ? { initialData: initial, initialDataUpdatedAt: initial.to === 0 ? 0 : new Date(now).getTime() }
      : {}),
  });
  const history = whole.data ?? initial;
  const finer = useQuery({ ...historyQuery(id, view, part), enabled: part !== null });
  const shown = useMemo(
    () => refined(history, part !== null && !finer.isPlaceholderData ? (finer.data ?? null) : null),
    [history, part, finer.data, finer.isPlaceholderData],
  );
  const model = useMemo(() => historyChart(shown, subject), [shown, subject]);
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
  const show = (next: HistoryView) => {
    setPart(null);
    setView(next);
  };
  const today = localDay(now, history.timeZone);
  const last = view.on ?? today;
  const step = (days: number) => {
    const next = shifted(last, days);
    show({ ...view, on: next >= today ? null : next });
  };
  const empty = history.voltage.every((v) => v === null);
  return (
    <Sheet
      id="history"
      title="String voltage"
      aside={
        <Segmented
          label="Range"
          options={RANGES}
          value={view.range}
          onChange={(range) => show({ ...view, range })}
        />
      }
    >
      <NotRead
        error={whole.error}
        title="The history could not be fetched"
        kind="failed"
        onRetry={() => whole.refetch()}
      />
      <div aria-busy={whole.isFetching} className={whole.isPlaceholderData ? 'opacity-60' : ''}>
        <TimeChart
          key={`${from} ${to}`}
          model={model}
          height={330}
          fileName={`string-voltage-${history.range}-${last}`}
          csvHref={historyCsvHref(id, view, part)}
          onZoom={onZoom}
          controls={
            <div className="flex items-center gap-1">
              <button
                type="button"
                className="target px-2 text-ink-2 hover:text-ink"
                aria-label="Earlier"
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
                aria-label="Later"
                disabled={view.on === null}
                onClick={() => step(STEP_DAYS[view.range])}
              >
                →
              </button>
            </div>
          }
        />
      </div>
      {empty && !whole.isFetching && <p className="text-sm text-ink-2">Nothing was reported in this time.</p>}
      <div className="mt-1 space-y-1 text-sm text-ink-2">
        {history.expected.from && <p>Band: expected nine times in ten, from {history.expected.from}.</p>}
        {history.notes.map((note) => (
          <p key={note}>{note}</p>
        ))}
      </div>
    </Sheet>
  );
}
