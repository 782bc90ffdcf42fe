import { useEffect, useMemo, useRef, useState, type KeyboardEvent, type PointerEvent } from 'react';
import { number, percent, quantity } from '../../drawings/numbers';
import { clock } from '../../drawings/times';
import { onThemeChange, readColours, type Colours } from './colours';
import {
  aboutMiddle,
  cellAt,
  middles,
  mixed,
  onRamp,
  rangeOf,
  RATIO_SPAN,
  type HeatCell,
  type HeatModel,
} from './heat';
import { FiguresTable } from './FiguresTable';
import { useWidth } from './near';
import { heatStrip } from '../../words/charts';

interface Props {
  model: HeatModel;
  /** Below this a step's middle says nothing. */
  least: number;
  /** A moment marked in it, epoch s. */
  moment?: number | null;
  /** A cell was chosen by tap or Enter. */
  onChoose?: (cell: HeatCell) => void;
  csvHref: string;
}

const LEFT = 34;
const BOTTOM = 24;
const TOOL =
  'target inline-flex min-w-[28px] items-center rounded px-2 text-sm text-ink-2 underline-offset-2 hover:text-ink hover:underline';

const rowHeightOf = (rows: number): number => Math.max(7, Math.min(22, Math.floor(380 / Math.max(1, rows))));

/** Low is rust, the middle pale, high petrol: told apart by lightness and by hues that colour-blind eyes keep apart. */
function colourOf(model: HeatModel, cell: HeatCell, range: [number, number], c: Colours): string | null {
  if (cell.value === null) return null;
  if (model.scale === 'middle') {
    if (cell.ratio === null) return c['rule-faint'];
    return mixed([c.rust, c['rule-faint'], c.petrol], (aboutMiddle(cell.ratio) + 1) / 2);
  }
  return mixed([c['petrol-wash'], c.petrol, c.ink], onRamp(cell.value, range));
}

function hoursOf(model: HeatModel, width: number): number[] {
  const every = (width < 520 ? 4 : 2) * 3600;
  const ticks: number[] = [];
  for (let at = Math.ceil(model.from / 3600) * 3600; at <= model.to; at += 3600) {
    const hour = Number(clock(at * 1000, model.timeZone).slice(0, 2));
    if ((hour * 3600) % every === 0) ticks.push(at);
  }
  return ticks;
}

function draw(
  canvas: HTMLCanvasElement,
  model: HeatModel,
  middle: readonly (number | null)[],
  range: [number, number],
  moment: number | null,
  at: { row: number; step: number } | null,
  c: Colours,
): void {
  const ratio = window.devicePixelRatio || 1;
  const width = canvas.clientWidth;
  const rowHeight = rowHeightOf(model.rows.length);
  const plotHeight = rowHeight * model.rows.length;
  canvas.width = width * ratio;
  canvas.height = (plotHeight + BOTTOM) * ratio;
  const pen = canvas.getContext('2d');
  if (!pen) return;
  pen.scale(ratio, ratio);
  pen.clearRect(0, 0, width, plotHeight + BOTTOM);
  const x = (t: number) => LEFT + ((t - model.from) / (model.to - model.from)) * (width - LEFT - 2);
  pen.fillStyle = c['slate-wash'];
  pen.fillRect(LEFT, 0, width - LEFT - 2, plotHeight);
  // what nobody reported is hatched, as a silent unit is
  pen.strokeStyle = c.sheet;
  pen.lineWidth = 1.5;
  pen.save();
  pen.beginPath();
  pen.rect(LEFT, 0, width - LEFT - 2, plotHeight);
  pen.clip();
  pen.beginPath();
  for (let i = LEFT - plotHeight; i < width; i += 6) {
    pen.moveTo(i, plotHeight);
    pen.lineTo(i + plotHeight, 0);
  }
  pen.stroke();
  pen.restore();
  model.rows.forEach((row, r) => {
    model.at.forEach((t, s) => {
      const colour = colourOf(model, cellAt(model, middle, r, s), range, c);
      if (!colour) return;
      pen.fillStyle = colour;
      const left = Math.floor(x(t));
      pen.fillRect(
        left,
        r * rowHeight,
        Math.ceil(x(t + model.stepS)) - left,
        rowHeight - (rowHeight > 10 ? 1 : 0),
      );
    });
    const every = rowHeight >= 12 ? 1 : 5;
    if (row.position === 1 || row.position % every === 0) {
      pen.fillStyle = c['ink-2'];
      pen.font = `12px ${getComputedStyle(canvas).fontFamily}`;
      pen.textAlign = 'right';
      pen.textBaseline = 'middle';
      pen.fillText(String(row.position), LEFT - 8, r * rowHeight + rowHeight / 2);
    }
  });
  pen.fillStyle = c['ink-2'];
  pen.textBaseline = 'top';
  for (const t of hoursOf(model, width)) {
    pen.textAlign = x(t) > width - 24 ? 'right' : x(t) < LEFT + 20 ? 'left' : 'center';
    pen.fillText(clock(t * 1000, model.timeZone), Math.min(width - 2, x(t)), plotHeight + 7);
  }
  if (moment !== null && moment >= model.from && moment <= model.to) {
    pen.fillStyle = c.ink;
    pen.fillRect(x(moment) - 1, 0, 2, plotHeight);
  }
  if (at) {
    pen.strokeStyle = c.ink;
    pen.lineWidth = 2;
    const t = model.at[at.step] ?? 0;
    pen.strokeRect(x(t) - 1, at.row * rowHeight - 1, x(t + model.stepS) - x(t) + 2, rowHeight + 2);
  }
}

function words(model: HeatModel, cell: HeatCell): string {
  const value =
    cell.value === null ? heatStrip.nothingReported : quantity(cell.value, model.unit, model.digits);
  const share = cell.ratio === null ? '' : heatStrip.ofTheStringsMiddle(cell.ratio);
  return heatStrip.atPositionValue(cell.at, model.timeZone, cell.position, value, share);
}

function Legend({ model, range }: { model: HeatModel; range: [number, number] }) {
  const ends =
    model.scale === 'middle'
      ? [heatStrip.orLess(RATIO_SPAN), heatStrip.asTheMiddle, `+${percent(RATIO_SPAN)}`]
      : [quantity(range[0], model.unit), '', quantity(range[1], model.unit)];
  const ramp =
    model.scale === 'middle'
      ? 'var(--rust), var(--rule-faint), var(--petrol)'
      : 'var(--petrol-wash), var(--petrol), var(--ink)';
  return (
    <div className="flex flex-wrap items-center gap-x-4 gap-y-1 text-xs text-ink-2">
      <div className="w-[220px]">
        <div
          className="h-2.5"
          style={{ background: `linear-gradient(to right, ${ramp})` }}
          aria-hidden="true"
        />
        <div className="mt-0.5 flex justify-between">
          {ends.map((e, i) => (
            <span key={i}>{e}</span>
          ))}
        </div>
      </div>
      <span className="inline-flex items-center gap-1.5">
        <span
          aria-hidden="true"
          className="inline-block h-2.5 w-5"
          style={{
            background: 'repeating-linear-gradient(135deg, var(--slate-wash) 0 3px, var(--sheet) 3px 4.5px)',
          }}
        />
        {heatStrip.nothingReported}
      </span>
    </div>
  );
}

function HeatTable({ model }: { model: HeatModel }) {
  return (
    <FiguresTable
      title={model.title}
      unit={model.unit}
      label={heatStrip.modelFigures(model.title)}
      height={380}
      heads={[heatStrip.time, ...model.rows.map((r) => String(r.position))]}
      rows={model.at.map((at, s) => ({
        key: at,
        time: clock(at * 1000, model.timeZone),
        cells: model.rows.map((r) => number(r.values[s], model.digits)),
      }))}
      dense
    />
  );
}

/**
 * A day as a strip: time to the right, units downward, colour for the figure. Arrow keys move from cell to cell, Enter
 * chooses one, t shows the table.
 */
export function HeatStrip({ model, least, moment = null, onChoose, csvHref }: Props) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const host = useRef<HTMLDivElement>(null);
  const width = useWidth(host);
  const [colours, setColours] = useState<Colours | null>(null);
  const [at, setAt] = useState<{ row: number; step: number } | null>(null);
  const [asTable, setAsTable] = useState(false);
  useEffect(() => {
    const read = () => requestAnimationFrame(() => setColours(readColours()));
    read();
    return onThemeChange(read);
  }, []);
  const middle = useMemo(() => middles(model, least), [model, least]);
  const range = useMemo(() => rangeOf(model), [model]);
  useEffect(() => {
    if (canvas.current && colours && width > 0)
      draw(canvas.current, model, middle, range, moment, at, colours);
  }, [model, middle, range, moment, at, colours, width, asTable]);
  const rowHeight = rowHeightOf(model.rows.length);
  const cell = at ? cellAt(model, middle, at.row, at.step) : null;

  const under = (event: PointerEvent<HTMLCanvasElement>) => {
    const box = event.currentTarget.getBoundingClientRect();
    const t =
      model.from + ((event.clientX - box.left - LEFT) / (box.width - LEFT - 2)) * (model.to - model.from);
    const step = model.at.findIndex((a) => t >= a && t < a + model.stepS);
    const row = Math.floor((event.clientY - box.top) / rowHeight);
    return step >= 0 && row >= 0 && row < model.rows.length ? { row, step } : null;
  };
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.ctrlKey || event.metaKey || event.altKey || event.target !== event.currentTarget) return;
    const move = (row: number, step: number) => () =>
      setAt((now) => ({
        row: Math.min(model.rows.length - 1, Math.max(0, (now?.row ?? 0) + (now ? row : 0))),
        step: Math.min(model.at.length - 1, Math.max(0, (now?.step ?? 0) + (now ? step : 0))),
      }));
    const act: Record<string, () => void> = {
      ArrowUp: move(-1, 0),
      ArrowDown: move(1, 0),
      ArrowLeft: move(0, -1),
      ArrowRight: move(0, 1),
      PageUp: move(0, -12),
      PageDown: move(0, 12),
      Enter: () => cell && onChoose?.(cell),
      t: () => setAsTable((now) => !now),
    };
    const found = act[event.key];
    if (!found) return;
    event.preventDefault();
    found();
  };
  return (
    <div
      role="group"
      tabIndex={0}
      onKeyDown={onKeyDown}
      aria-label={heatStrip.arrowKeysMoveFrom(model.title)}
    >
      <div className="mb-2 flex flex-wrap items-center justify-between gap-x-4">
        <Legend model={model} range={range} />
        <div className="no-print -mr-2 flex items-center">
          <button type="button" className={TOOL} aria-pressed={asTable} onClick={() => setAsTable(!asTable)}>
            {asTable ? heatStrip.strip : heatStrip.table}
          </button>
          <a href={csvHref} download className={TOOL}>
            CSV
          </a>
        </div>
      </div>
      <div ref={host}>
        {asTable ? (
          <HeatTable model={model} />
        ) : (
          <canvas
            ref={canvas}
            aria-hidden="true"
            className="block w-full cursor-crosshair"
            style={{ height: rowHeight * model.rows.length + BOTTOM }}
            onPointerMove={(event) => setAt(under(event))}
            onPointerDown={(event) => {
              const found = under(event);
              setAt(found);
              if (found) onChoose?.(cellAt(model, middle, found.row, found.step));
            }}
          />
        )}
      </div>
      <p role="status" className="min-h-[20px] text-sm text-ink-2">
        {cell ? words(model, cell) : heatStrip.pointAtACell}
      </p>
    </div>
  );
}
