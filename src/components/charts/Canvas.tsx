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
import * as echarts from 'echarts/core';
import type { ECharts } from 'echarts/core';
import { CanvasRenderer } from 'echarts/renderers';
import { useEffect, useMemo, useRef, useState } from 'react';
import { onThemeChange, readColours } from './colours';
import { fromWall } from './local-time';
import type { ChartModel } from './model';
import { chartOptions } from './options';

echarts.use([
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
export default function Canvas({ model, height, width, onReady, onZoom }: Props) {
  const [colours, setColours] = useState(readColours);
  useEffect(() => onThemeChange(() => requestAnimationFrame(() => setColours(readColours()))), []);
  const option = useMemo(
    () => chartOptions(model, colours, { width, height }),
    [model, colours, width, height],
  );
  const rest = useRef<ReturnType<typeof setTimeout>>(undefined);
  const events = useMemo(
    () => ({
      datazoom: (_: unknown, chart: ECharts) => {
        clearTimeout(rest.current);
        rest.current = setTimeout(() => {
          if (!chart.isDisposed()) onZoom(spanInSight(chart, model.timeZone));
        }, REST_MS);
      },
    }),
    [onZoom, model.timeZone],
  );
  return (
    <EChartsReactCore
      echarts={echarts}
      option={option}
      replaceMerge={['series']}
      lazyUpdate
      style={{ height, width: '100%' }}
      onChartReady={onReady}
      onEvents={events}
    />
  );
}
