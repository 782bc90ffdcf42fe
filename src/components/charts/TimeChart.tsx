import type { ECharts } from 'echarts/core';
import { lazy, Suspense, useCallback, useRef, useState, type KeyboardEvent, type ReactNode } from 'react';
import type { Span } from './Canvas';
import { ChartLegend } from './ChartLegend';
import { ChartSketch } from './ChartSketch';
import { saveCsv } from './chart-csv';
import { toWall } from './local-time';
import { useNear, useWidth } from './near';
import type { ChartModel } from './model';
import { readout } from './options';
import { shareOf, WHOLE, zoomed } from './sight';
import { late, patiently } from '../../lib/late';
import { timeChart } from '../../words/charts';

const Canvas = lazy(() => import('./Canvas'));
const ChartTable = late(async () => (await import('./ChartTable')).ChartTable);

interface Props {
  model: ChartModel;
  height?: number;
  /** Where the same data comes as CSV; without it the CSV is made here, of what is drawn. */
  csvHref?: string;
  /** Name of the picture, without ending. */
  fileName: string;
  /** The part in sight has changed; null: all of it. Fetch finer data for it. */
  onZoom?: (span: Span | null) => void;
  /** Controls at the left of the chart's own. */
  controls?: ReactNode;
  /** A moment marked in the plot, epoch s. */
  moment?: number | null;
  /** Somebody drags, taps or (Enter) chooses a moment; `done` when they let go. */
  onMoment?: (at: number, done: boolean) => void;
}

const TOOL =
  'target min-w-[28px] rounded px-2 text-sm text-ink-2 underline-offset-2 hover:text-ink hover:underline';

/**
 * The one chart over time: crosshair with a readout, zoom, gaps as gaps, nights, expected band, marks, the figures as a
 * table, PNG and CSV. Keys while it has the focus: t table, ← → crosshair, Enter its moment, + − 0 zoom.
 */
export function TimeChart({
  model,
  height = 300,
  csvHref,
  fileName,
  onZoom,
  controls,
  moment = null,
  onMoment,
}: Props) {
  const figure = useRef<HTMLElement>(null);
  const chart = useRef<ECharts | null>(null);
  const [asTable, setAsTable] = useState(false);
  const [said, setSaid] = useState('');
  const cursor = useRef<number | null>(null);
  const near = useNear(figure);
  const width = useWidth(figure);
  const ready = useCallback((instance: ECharts) => {
    chart.current = instance;
  }, []);
  const hasZoomed = useCallback((span: Span | null) => onZoom?.(span), [onZoom]);
  const cursorAt = () => (cursor.current === null ? null : (model.lines[0]?.at[cursor.current] ?? null));

  const zoomBy = (factor: number | null) => {
    const instance = chart.current;
    if (!instance || instance.isDisposed()) return;
    const zoom = (instance.getOption() as { dataZoom?: { start?: number; end?: number }[] }).dataZoom?.[0];
    const [start, end] = [zoom?.start ?? 0, zoom?.end ?? 100];
    const sight =
      factor === null ? WHOLE : zoomed([start, end], factor, shareOf(model, moment ?? cursorAt()));
    instance.dispatchAction({ type: 'dataZoom', start: sight[0], end: sight[1] });
  };
  const moveCursor = (step: number) => {
    const line = model.lines[0];
    const instance = chart.current;
    if (!line || line.at.length === 0 || !instance) return;
    const last = line.at.length - 1;
    const next = cursor.current === null ? last : Math.min(last, Math.max(0, cursor.current + step));
    cursor.current = next;
    const at = line.at[next] ?? 0;
    const x = instance.convertToPixel({ xAxisIndex: 0 }, toWall(at, model.timeZone));
    instance.dispatchAction({ type: 'showTip', x, y: height / 2 });
    const r = readout(model, at);
    setSaid(
      `${r.title}: ${r.rows.map(([name, value]) => `${name} ${value}`).join(', ')}. ${r.marks.join('. ')}`,
    );
  };
  const chooseMoment = () => {
    const at = cursorAt();
    if (at !== null) onMoment?.(at, true);
  };
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.target instanceof HTMLElement && event.target.matches('input, select, textarea')) return;
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const steps: Record<string, () => void> = {
      t: () => setAsTable((now) => !now),
      ArrowLeft: () => moveCursor(-1),
      ArrowRight: () => moveCursor(1),
      PageUp: () => moveCursor(-20),
      PageDown: () => moveCursor(20),
      '+': () => zoomBy(0.5),
      '-': () => zoomBy(2),
      '0': () => zoomBy(null),
      ...(onMoment && event.target === event.currentTarget ? { Enter: chooseMoment } : {}),
    };
    const step = steps[event.key];
    if (!step || (asTable && event.key !== 't')) return;
    event.preventDefault();
    step();
  };
  const savePicture = () => {
    const instance = chart.current;
    if (!instance || instance.isDisposed()) return;
    const drawn = patiently(() => import('./picture'));
    void drawn.then(async ({ picture }) => {
      const url = await picture(instance, model, figure.current);
      const link = document.createElement('a');
      link.href = url;
      link.download = `${fileName}.png`;
      link.click();
    });
  };

  return (
    <figure
      ref={figure}
      tabIndex={0}
      aria-label={timeChart.pressForTheFigures(model.title, onMoment ? timeChart.enterForTheStaircase : '')}
      onKeyDown={onKeyDown}
      className="bg-sheet"
    >
      <div className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1">
        <div className="flex flex-wrap items-center gap-x-4">{controls}</div>
        <div className="no-print -mr-2 flex flex-wrap items-center">
          {!asTable && (
            <>
              <button
                type="button"
                className={TOOL}
                aria-label={timeChart.zoomIn}
                onClick={() => zoomBy(0.5)}
              >
                +
              </button>
              <button type="button" className={TOOL} aria-label={timeChart.zoomOut} onClick={() => zoomBy(2)}>
                −
              </button>
              <button type="button" className={TOOL} onClick={() => zoomBy(null)}>
                {timeChart.whole}
              </button>
            </>
          )}
          <button type="button" className={TOOL} aria-pressed={asTable} onClick={() => setAsTable(!asTable)}>
            {asTable ? timeChart.curve : timeChart.table}
          </button>
          {!asTable && (
            <button type="button" className={TOOL} onClick={savePicture}>
              {timeChart.png}
            </button>
          )}
          {csvHref ? (
            <a href={csvHref} download className={`inline-flex items-center ${TOOL}`}>
              CSV
            </a>
          ) : (
            <button type="button" className={TOOL} onClick={() => saveCsv(model, fileName)}>
              CSV
            </button>
          )}
        </div>
      </div>
      <ChartLegend lines={model.lines} />
      {/* a canvas keeps its old width until it hears of the new one: it must not push the page meanwhile */}
      <div className="[overflow-x:clip]" style={{ minHeight: height }}>
        {asTable ? (
          <Suspense>
            <ChartTable model={model} height={height} />
          </Suspense>
        ) : near && width > 0 ? (
          <Suspense fallback={<ChartSketch model={model} height={height} />}>
            <Canvas
              model={model}
              height={height}
              width={width}
              onReady={ready}
              onZoom={hasZoomed}
              moment={moment}
              onMoment={onMoment}
            />
          </Suspense>
        ) : (
          <ChartSketch model={model} height={height} />
        )}
      </div>
      <p role="status" className="sr-only">
        {said}
      </p>
    </figure>
  );
}
