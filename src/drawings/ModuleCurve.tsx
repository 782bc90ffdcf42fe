import type { ModuleLine } from './module-curve';
import { number } from './numbers';
import { SCREEN, type Paint } from './paint';
import { ticksTo } from './ticks';
import { moduleCurve } from '../words/drawings';

interface Props {
  lines: readonly ModuleLine[];
  /** Points that the datasheet gives at STC. */
  marks: readonly { label: string; voltage: number; current: number }[];
  /** current: I–V; power: P–V. */
  show: 'current' | 'power';
  /** Where the lines are named: beside their beginnings, over their peaks, or one below the other where they fall. */
  labels: LabelPlace;
  /** What a line is called. */
  labelOf: (line: ModuleLine) => string;
  /** Drawn heavier: the line at STC. */
  isMain: (line: ModuleLine) => boolean;
  label: string;
  width?: number;
  height?: number;
  paint?: Paint;
}

type LabelPlace = 'at_short_circuit' | 'at_peak' | 'on_the_fall';

/** The point of a line that its name stands at; of several lines that fall side by side each a step lower. */
function labelPlace(line: ModuleLine, place: LabelPlace, i: number): { voltage: number; current: number } {
  const peak = { voltage: line.vmp, current: line.imp };
  if (place === 'at_peak') return peak;
  const first = line.points[0] ?? peak;
  if (place === 'at_short_circuit') return first;
  const wanted = first.current * (0.72 - 0.17 * i);
  return line.points.find((p) => p.current <= wanted) ?? peak;
}

/** A module's current or power over its voltage; where the datasheet has a point, a ring. */
export function ModuleCurve({
  lines,
  marks,
  show,
  labels,
  labelOf,
  isMain,
  label,
  width = 560,
  height = 300,
  paint = SCREEN,
}: Props) {
  const plot = { left: 44, right: width - 14, top: 16, bottom: height - 38 };
  const yOf = (p: { voltage: number; current: number }) =>
    show === 'current' ? p.current : p.voltage * p.current;
  const all = [...lines.flatMap((l) => l.points), ...marks];
  const voltages = ticksTo(Math.max(1, ...all.map((p) => p.voltage)) * 1.02, 6);
  const heights = ticksTo(Math.max(0.1, ...all.map(yOf)) * 1.04, 5);
  const voltageTop = voltages.at(-1) ?? 1;
  const yTop = heights.at(-1) ?? 1;
  const x = (v: number) => plot.left + (v / voltageTop) * (plot.right - plot.left);
  const y = (v: number) => plot.bottom - (v / yTop) * (plot.bottom - plot.top);
  const text = { fill: paint.ink2, fontSize: 12, fontFamily: 'inherit' };
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width="100%"
      role="img"
      aria-label={label}
      style={{ height: 'auto' }}
    >
      {heights.map((tick) => (
        <g key={tick}>
          <path
            d={`M${plot.left} ${y(tick)}H${plot.right}`}
            stroke={tick === 0 ? paint.rule : paint.ruleFaint}
          />
          <text x={plot.left - 6} y={y(tick) + 4} textAnchor="end" {...text}>
            {number(tick, yTop < 2 ? 1 : 0)}
          </text>
        </g>
      ))}
      {voltages.map((tick) => (
        <text key={tick} x={x(tick)} y={plot.bottom + 17} textAnchor="middle" {...text}>
          {number(tick, voltageTop < 4 ? 1 : 0)}
        </text>
      ))}
      <text x={plot.right} y={plot.bottom + 33} textAnchor="end" {...text}>
        {moduleCurve.voltageV}
      </text>
      <text x={plot.left + 6} y={plot.top - 4} {...text}>
        {show === 'current' ? moduleCurve.currentA : moduleCurve.powerW}
      </text>
      {lines.map((line) => (
        <path
          key={labelOf(line)}
          d={`M${line.points.map((p) => `${x(p.voltage).toFixed(1)} ${y(yOf(p)).toFixed(1)}`).join('L')}`}
          fill="none"
          stroke={isMain(line) ? paint.petrol : paint.ink3}
          strokeWidth={isMain(line) ? 2.5 : 1.3}
          strokeLinejoin="round"
        />
      ))}
      {lines.map((line, i) => {
        const at = labelPlace(line, labels, i);
        return (
          <text
            key={labelOf(line)}
            x={x(at.voltage) + (labels === 'at_short_circuit' ? 8 : 0)}
            y={y(yOf(at)) + (labels === 'at_short_circuit' ? 14 : labels === 'at_peak' ? -7 : 4)}
            textAnchor={labels === 'at_short_circuit' ? 'start' : 'middle'}
            {...text}
            fill={isMain(line) ? paint.petrol : paint.ink2}
            stroke={paint.sheet}
            strokeWidth="4"
            strokeLinejoin="round"
            paintOrder="stroke"
          >
            {labelOf(line)}
          </text>
        );
      })}
      {marks.map((mark) => (
        <circle
          key={mark.label}
          cx={x(mark.voltage)}
          cy={y(yOf(mark))}
          r="4.5"
          fill={paint.sheet}
          stroke={paint.ink}
          strokeWidth="1.6"
        />
      ))}
    </svg>
  );
}
