import EChartsReactCore from 'echarts-for-react/esm/core';
import { LineChart } from 'echarts/charts';
import {
  DataZoomInsideComponent,
  DataZoomSliderComponent,
  GridComponent,
  MarkAreaComponent,
  MarkLineComponent,
  MarkPointComponent,
  TooltipComponent,
} from 'echarts/components';
import { dispose, getInstanceByDom, init, use as bring, type ECharts } from 'echarts/core';
import { CanvasRenderer } from 'echarts/renderers';
import { useCallback, useEffect, useMemo, useRef, useState, type PointerEvent } from 'react';
import { onThemeChange, readColours } from './colours';
import { fromWall, toWall } from './local-time';
import type { ChartModel } from './model';
import { chartOptions, gridOf } from './options';

bring([
  LineChart,
  GridComponent,
  TooltipComponent,
  MarkAreaComponent,
  MarkLineComponent,
  MarkPointComponent,
  DataZoomSliderComponent,
  DataZoomInsideComponent,
  CanvasRenderer,
]);

/** What React's part of it calls; the whole of it would bring what no chart of ours has. */
const echarts = { dispose, getInstanceByDom, init };

export interface Span {
  from: number;
  to: number;
}
interface Props {
  model: ChartModel;
  height: number;
  width: number;
  onReady: (chart: ECharts) => void;
  /** After the person has zoomed, a moment later; null: the whole is in sight. */
  onZoom: (span: Span | null) => void;
  /** A moment marked in the plot, epoch s. */
  moment?: number | null;
  /** The person drags or taps a moment; `done` when they let go. */
  onMoment?: (at: number, done: boolean) => void;
}

const REST_MS = 250;

/** The part of the axis in sight, epoch seconds; null for all of it. */
function spanInSight(chart: ECharts, timeZone: string): Span | null {
  const option = chart.getOption() as {
    dataZoom?: { start?: number; end?: number; startValue?: number; endValue?: number }[];
  };
  const zoom = option.dataZoom?.[0];
  if (!zoom || ((zoom.start ?? 0) <= 0.5 && (zoom.end ?? 100) >= 99.5)) return null;
  if (typeof zoom.startValue !== 'number' || typeof zoom.endValue !== 'number') return null;
  return { from: fromWall(zoom.startValue, timeZone), to: fromWall(zoom.endValue, timeZone) };
}

/** The canvas itself: loaded when a chart nears the screen. */
export default function Canvas({ model, height, width, onReady, onZoom, moment = null, onMoment }: Props) {
  const [colours, setColours] = useState(readColours);
  useEffect(() => onThemeChange(() => requestAnimationFrame(() => setColours(readColours()))), []);
  const draggable = onMoment !== undefined;
  const option = useMemo(
    () => chartOptions(model, colours, { width, height }, draggable),
    [model, colours, width, height, draggable],
  );
  const rest = useRef<ReturnType<typeof setTimeout>>(undefined);
  const chart = useRef<ECharts | null>(null);
  const dragging = useRef(false);
  // before its first picture the chart knows no axis to ask
  const drawn = useRef(false);
  const [momentPx, setMomentPx] = useState<number | null>(null);
  const { from, to, timeZone } = model;
  const place = useCallback(() => {
    const instance = chart.current;
    if (!instance || instance.isDisposed() || !drawn.current || moment === null) return setMomentPx(null);
    const x = instance.convertToPixel({ xAxisIndex: 0 }, toWall(moment, timeZone));
    const grid = gridOf(width);
    setMomentPx(x >= grid.left - 1 && x <= instance.getWidth() - grid.right + 1 ? x : null);
  }, [moment, timeZone, width]);
  useEffect(place, [place, option]);
  const events = useMemo(
    () => ({
      datazoom: (_: unknown, instance: ECharts) => {
        place();
        clearTimeout(rest.current);
        rest.current = setTimeout(() => {
          if (!instance.isDisposed()) onZoom(spanInSight(instance, timeZone));
        }, REST_MS);
      },
      finished: () => {
        drawn.current = true;
        place();
      },
    }),
    [onZoom, timeZone, place],
  );
  const ready = useCallback(
    (instance: ECharts) => {
      chart.current = instance;
      onReady(instance);
    },
    [onReady],
  );
  const said = (event: PointerEvent<HTMLDivElement>, done: boolean) => {
    const instance = chart.current;
    if (!instance || !onMoment || !drawn.current) return;
    const x = event.clientX - event.currentTarget.getBoundingClientRect().left;
    const at = fromWall(instance.convertFromPixel({ xAxisIndex: 0 }, x), timeZone);
    onMoment(Math.min(to, Math.max(from, at)), done);
  };
  const inPlot = (event: PointerEvent<HTMLDivElement>): boolean => {
    const box = event.currentTarget.getBoundingClientRect();
    const grid = gridOf(width);
    const [x, y] = [event.clientX - box.left, event.clientY - box.top];
    return x >= grid.left && x <= box.width - grid.right && y >= grid.top && y <= height - grid.bottom;
  };
  return (
    <div
      className="relative"
      style={draggable ? { touchAction: 'pan-y', cursor: 'col-resize' } : undefined}
      // the library keeps every turn of the wheel to itself: without Ctrl it is the page's
      onWheelCapture={(event) => {
        if (!event.ctrlKey) event.stopPropagation();
      }}
      onPointerDown={(event) => {
        if (!draggable || event.button !== 0 || !inPlot(event)) return;
        dragging.current = true;
        said(event, false);
      }}
      onPointerMove={(event) => {
        if (dragging.current) said(event, false);
      }}
      onPointerUp={(event) => {
        if (dragging.current) said(event, true);
        dragging.current = false;
      }}
      onPointerLeave={(event) => {
        if (dragging.current) said(event, true);
        dragging.current = false;
      }}
      onPointerCancel={() => (dragging.current = false)}
    >
      <EChartsReactCore
        echarts={echarts}
        option={option}
        replaceMerge={['series']}
        lazyUpdate
        style={{ height, width: '100%' }}
        onChartReady={ready}
        onEvents={events}
      />
      {momentPx !== null && (
        <span
          aria-hidden="true"
          className="pointer-events-none absolute w-0.5 -translate-x-1/2 bg-ink"
          style={{ left: momentPx, top: gridOf(width).top - 8, bottom: gridOf(width).bottom }}
        >
          <span className="absolute -top-1 left-1/2 h-2.5 w-2.5 -translate-x-1/2 rotate-45 bg-ink" />
        </span>
      )}
    </div>
  );
}
