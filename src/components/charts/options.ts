import type { EChartsCoreOption } from 'echarts/core';
import { number, quantity } from '../../drawings/numbers';
import { clock, clockSeconds, longDate, shortDate } from '../../drawings/times';
import type { Colours } from './colours';
import { fromWall, toWall } from './local-time';
import { strokeOf, valueAt, type ChartBand, type ChartLine, type ChartModel } from './model';
import { chartsOptions } from '../../words/charts';
import { LOCALE } from '../../words/language';

/** A span so short that its ticks lie seconds apart. */
const MINUTES_S = 600;
/** px around the plot. */
export const GRID = { top: 30, bottom: 62 } as const;
export const gridOf = (width: number): { top: number; bottom: number; left: number; right: number } =>
  width < 520 ? { ...GRID, left: 42, right: 8 } : { ...GRID, left: 54, right: 16 };
const FAMILY = '"Inter Tight Variable", system-ui, sans-serif';

const escaped = (text: string): string =>
  text.replace(/[&<>"]/g, (c) => ({ '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;' })[c] ?? c);

/** A moment as the readout shows it: the clock within a day, the date beyond. */
export function momentWords(atS: number, model: Pick<ChartModel, 'from' | 'to' | 'timeZone'>): string {
  const spanS = model.to - model.from;
  if (spanS <= 8 * 3600) return clockSeconds(atS * 1000, model.timeZone);
  if (spanS <= 36 * 3600) return clock(atS * 1000, model.timeZone);
  if (spanS <= 60 * 86_400)
    return `${shortDate(atS * 1000, model.timeZone)}, ${clock(atS * 1000, model.timeZone)}`;
  return longDate(atS * 1000, model.timeZone);
}

/** The readout at one instant: name and value of each line, the band, the marks that hold then. */
export function readout(
  model: ChartModel,
  atS: number,
): { title: string; rows: [string, string][]; marks: string[] } {
  const near = Math.max(120, (model.to - model.from) / 60);
  const rows: [string, string][] = model.lines.map((line) => {
    const value = valueAt(line, atS, near);
    return [
      line.name,
      value === null ? chartsOptions.nothingReported : quantity(value, model.unit, model.digits),
    ];
  });
  if (model.band) {
    const low = valueAt({ at: model.band.at, values: model.band.low }, atS, near * 2);
    const high = valueAt({ at: model.band.at, values: model.band.high }, atS, near * 2);
    if (low !== null && high !== null)
      rows.push([model.band.name, chartsOptions.lowToDigits(low, model.digits, high, model.unit)]);
  }
  return {
    title: momentWords(atS, model),
    rows,
    marks: model.marks
      .filter((m) => (m.to === null ? Math.abs(m.from - atS) < near / 2 : atS >= m.from && atS <= m.to))
      .map((m) => m.words),
  };
}

function bandSeries(band: ChartBand, model: ChartModel, colour: string, opacity: number, stack: string) {
  const base = {
    type: 'line',
    stack,
    symbol: 'none',
    silent: true,
    lineStyle: { opacity: 0 },
    connectNulls: false,
  };
  const low: [number, number | null][] = [];
  const width: [number, number | null][] = [];
  band.at.forEach((at, i) => {
    const x = toWall(at, model.timeZone);
    const from = band.low[i] ?? null;
    const to = band.high[i] ?? null;
    low.push([x, from]);
    width.push([x, from === null || to === null ? null : to - from]);
  });
  return [
    { ...base, id: `${stack} low`, data: low, z: 1, stackStrategy: 'all' },
    {
      ...base,
      id: `${stack} high`,
      data: width,
      z: 1,
      stackStrategy: 'all',
      areaStyle: { color: colour, opacity },
    },
  ];
}

function lineSeries(line: ChartLine, model: ChartModel, c: Colours) {
  const { width, dash } = strokeOf(line);
  return {
    type: 'line',
    id: `line ${line.name}`,
    name: line.name,
    data: line.at.map((at, i) => [toWall(at, model.timeZone), line.values[i] ?? null]),
    showSymbol: false,
    symbolSize: 5,
    connectNulls: false,
    sampling: 'lttb',
    z: line.quiet ? 3 : 4,
    itemStyle: { color: c[line.tone] },
    lineStyle: {
      color: c[line.tone],
      width,
      opacity: line.quiet ? 0.45 : 1,
      ...(dash && { type: [...dash] }),
    },
    emphasis: { disabled: true },
  };
}

const CHARACTER_PX = 6.6;
const LANES = 4;
const LANE_PX = 20;
const WORDS_MOST = 40;
const LABELS_MOST = 6;

interface Label {
  mark: ChartModel['marks'][number];
  words: string;
  side: 'left' | 'right';
  /** px from the top of the plot */
  y: number;
}

/**
 * Words of the marks, laid so that none covers another: the grave ones first, beside their mark on the side that has
 * room, in one of a few lanes; what finds no room is left to the readout and the list of events.
 */
export function labelsOf(model: ChartModel, plotPx: number, plotHeight: number): Label[] {
  const order = { crimson: 0, rust: 1, plum: 2, slate: 3, petrol: 4 } as const;
  const perPx = (model.to - model.from) / Math.max(1, plotPx);
  const spanS = model.to - model.from;
  const when = spanS > 36 * 3600 ? shortDate : spanS <= MINUTES_S ? clockSeconds : clock;
  const taken: { lane: number; from: number; to: number }[] = [];
  const labels: Label[] = [];
  for (const mark of [...model.marks].sort((a, b) => order[a.tone] - order[b.tone] || b.from - a.from)) {
    const said = `${when(mark.from * 1000, model.timeZone)} ${mark.words}`;
    const words = said.length > WORDS_MOST ? `${said.slice(0, WORDS_MOST - 1).trimEnd()}…` : said;
    const length = (words.length * CHARACTER_PX + 16) * perPx;
    const spots = (mark.to === null ? (['right', 'left'] as const) : (['left', 'right'] as const)).flatMap(
      (side) =>
        Array.from({ length: LANES }, (_, lane) => ({
          side,
          lane,
          from: side === 'left' ? mark.from - length : (mark.to ?? mark.from),
          to: side === 'left' ? mark.from : (mark.to ?? mark.from) + length,
        })),
    );
    const spot = spots.find(
      (s) =>
        s.from >= model.from &&
        s.to <= model.to &&
        taken.every((t) => t.lane !== s.lane || s.to <= t.from || s.from >= t.to),
    );
    if (!spot || labels.length === LABELS_MOST) continue;
    taken.push(spot);
    labels.push({ mark, words, side: spot.side, y: plotHeight * 0.4 + spot.lane * LANE_PX });
  }
  return labels;
}

/** The ground of a stretch: what was commanded, what was planned, what somebody noted. */
const GROUND = {
  plum: 'plum-wash',
  slate: 'slate-wash',
  petrol: 'petrol-wash',
  rust: 'slate-wash',
  crimson: 'slate-wash',
} as const;

function grounds(model: ChartModel, c: Colours, labels: readonly Label[]) {
  const x = (at: number) => toWall(at, model.timeZone);
  return {
    type: 'line',
    id: 'grounds',
    data: [],
    silent: true,
    symbol: 'none',
    z: 2,
    markArea: {
      silent: true,
      animation: false,
      data: [
        ...model.nights.map(([from, to]) => [
          { xAxis: x(Math.max(from, model.from)), itemStyle: { color: c['slate-wash'], opacity: 0.55 } },
          { xAxis: x(Math.min(to, model.to)) },
        ]),
        ...model.marks.flatMap((m) =>
          m.to === null
            ? []
            : [
                [
                  { xAxis: x(m.from), itemStyle: { color: c[GROUND[m.tone]], opacity: 0.9 } },
                  { xAxis: x(m.to) },
                ],
              ],
        ),
      ],
    },
    markLine: {
      silent: true,
      animation: false,
      symbol: 'none',
      data: model.marks.map((m) => ({
        xAxis: x(m.from),
        lineStyle: {
          color: c[m.tone],
          type: m.to === null ? [4, 3] : 'solid',
          width: m.to === null ? 1.3 : 0.8,
        },
        label: { show: false },
      })),
    },
    markPoint: {
      silent: true,
      animation: false,
      symbol: 'circle',
      symbolSize: 0.1,
      data: labels.map((l) => ({
        xAxis: x(l.side === 'left' ? l.mark.from : (l.mark.to ?? l.mark.from)),
        yAxis: 0,
        y: GRID.top + l.y,
        label: {
          show: true,
          position: l.side,
          distance: 6,
          padding: [1, 2],
          backgroundColor: c.sheet, // the lines of other marks pass behind
          formatter: l.words,
          color: l.mark.tone === 'rust' ? c['rust-ink'] : c[l.mark.tone],
          fontSize: 12,
          fontWeight: 600,
          fontFamily: FAMILY,
        },
      })),
    },
  };
}

/** The clock within a day, the date at midnights and beyond. Ticks come as wall-clock times read as UTC. */
function axisWords(model: ChartModel): (wallMs: number) => string {
  const spanS = model.to - model.from;
  return (wallMs) => {
    const midnight = wallMs % 86_400_000 === 0;
    if (spanS <= MINUTES_S) return clockSeconds(wallMs, 'UTC');
    if (spanS <= 36 * 3600 || !midnight) return clock(wallMs, 'UTC');
    if (spanS > 100 * 86_400 && new Date(wallMs).getUTCDate() === 1) return monthWords(wallMs);
    return shortDate(wallMs, 'UTC');
  };
}
const monthWords = (wallMs: number): string =>
  new Date(wallMs).toLocaleDateString(LOCALE, { month: 'short', year: '2-digit', timeZone: 'UTC' });

/** Everything that the chart library is told. Pure but for the given colours. */
export function chartOptions(
  model: ChartModel,
  c: Colours,
  size: { width: number; height: number },
  /** Dragging in the plot moves something else than the part in sight. */
  dragTaken = false,
): EChartsCoreOption {
  const narrow = size.width < 520;
  const grid = gridOf(size.width);
  const labels = narrow
    ? []
    : labelsOf(model, size.width - grid.left - grid.right, size.height - grid.top - grid.bottom);
  const text = {
    color: c['ink-2'],
    fontSize: 12,
    fontFamily: '"Inter Tight Variable", system-ui, sans-serif',
  };
  return {
    animation: false, // live values change in place; nothing slides
    useUTC: true,
    textStyle: text,
    grid,
    xAxis: {
      type: 'time',
      min: toWall(model.from, model.timeZone),
      max: toWall(model.to, model.timeZone),
      splitNumber: narrow ? 4 : 8,
      axisLine: { lineStyle: { color: c.rule } },
      axisTick: { show: false },
      splitLine: { show: false },
      axisLabel: {
        ...text,
        hideOverlap: true,
        // seconds are long words: the last would run out of the sheet
        showMaxLabel: model.to - model.from > MINUTES_S ? undefined : false,
        formatter: axisWords(model),
      },
      axisPointer: { lineStyle: { color: c['ink-3'], type: 'solid', width: 1 } },
    },
    yAxis: {
      type: 'value',
      scale: !model.fromZero,
      // a zero that is measured a hair below itself opens no room below the axis
      ...(model.fromZero && {
        min: ({ min, max }: { min: number; max: number }) => (min < -0.02 * max ? undefined : 0),
      }),
      name: model.unit,
      nameGap: 12,
      nameTextStyle: { ...text, align: 'right', padding: [0, 8, 0, 0] },
      splitNumber: 4,
      axisLabel: { ...text, formatter: (v: number) => number(v, Number.isInteger(v) ? 0 : 1) },
      splitLine: { lineStyle: { color: c['rule-faint'] } },
    },
    tooltip: {
      trigger: 'axis',
      confine: true,
      transitionDuration: 0,
      backgroundColor: c.sheet,
      borderColor: c.ink,
      borderWidth: 1,
      padding: [6, 10],
      textStyle: { ...text, color: c.ink },
      extraCssText: 'border-radius:2px;box-shadow:none',
      formatter: (params: unknown) => {
        const first = Array.isArray(params) ? (params[0] as { axisValue?: unknown } | undefined) : undefined;
        if (typeof first?.axisValue !== 'number') return '';
        const r = readout(model, fromWall(first.axisValue, model.timeZone));
        const rows = r.rows
          .slice(0, 18)
          .map(
            ([name, value]) =>
              `<tr><td style="padding-right:12px;color:${c['ink-2']}">${escaped(name)}</td><td style="text-align:right;font-weight:600">${escaped(value)}</td></tr>`,
          );
        const marks = r.marks.map(
          (m) => `<div style="max-width:240px;white-space:normal">${escaped(m)}</div>`,
        );
        return `<div style="font-variant-numeric:tabular-nums"><b>${escaped(r.title)}</b><table>${rows.join('')}</table>${marks.join('')}</div>`;
      },
    },
    dataZoom: [
      {
        type: 'slider',
        height: 18,
        bottom: 8,
        borderColor: c.rule,
        fillerColor: c['petrol-wash'],
        backgroundColor: 'transparent',
        dataBackground: { lineStyle: { opacity: 0 }, areaStyle: { opacity: 0 } },
        selectedDataBackground: { lineStyle: { opacity: 0 }, areaStyle: { opacity: 0 } },
        handleStyle: { color: c.sheet, borderColor: c['ink-3'] },
        moveHandleSize: 0,
        showDetail: false,
        brushSelect: false,
        filterMode: 'none',
      },
      ...(narrow
        ? []
        : [
            {
              type: 'inside',
              zoomOnMouseWheel: 'ctrl',
              moveOnMouseMove: !dragTaken,
              moveOnMouseWheel: false,
              filterMode: 'none',
            },
          ]),
    ],
    series: [
      grounds(model, c, labels),
      ...(model.band ? bandSeries(model.band, model, c.petrol, 0.16, 'band') : []),
      ...(model.spread ? bandSeries(model.spread, model, c['ink-3'], 0.22, 'spread') : []),
      ...model.lines.map((line) => lineSeries(line, model, c)),
    ],
  };
}
