import { gappedLine } from './gapped-line';
import { Levels } from './Levels';
import { SCREEN, type Paint } from './paint';
import { ticksTo } from './ticks';

interface Props {
  /** V, one a second from the command on; null: not known, drawn as a gap. */
  lines: readonly { name: string; voltage: readonly (number | null)[]; tone: 'passing' | 'shutdown' }[];
  /** V under which a shutdown must bring them, and by when. */
  limit: { voltage: number; afterS: number };
  label: string;
  width?: number;
  height?: number;
  paint?: Paint;
}

const SPAN_S = 120;
const FONT = { fontSize: 12, fontFamily: 'inherit' } as const;

/** Voltages of strings in the seconds after a command, with the limit of voltage and of time dashed. */
export function TraceLines({ lines, limit, label, width = 720, height = 250, paint = SCREEN }: Props) {
  const plot = { left: 44, right: width - 12, top: 14, bottom: height - 28 };
  const longest = Math.max(SPAN_S, ...lines.map((l) => l.voltage.length));
  const peak = Math.max(limit.voltage * 2, ...lines.flatMap((l) => l.voltage.map((v) => v ?? 0)));
  const levels = ticksTo(peak, 4);
  const top = levels.at(-1) ?? peak;
  const x = (s: number) => plot.left + (s / longest) * (plot.right - plot.left);
  const y = (v: number) => plot.bottom - (Math.max(0, v) / top) * (plot.bottom - plot.top);
  const path = (voltage: readonly (number | null)[]): string =>
    gappedLine(voltage.map((v, s) => [x(s), v === null ? null : y(v)]));
  const step = width < 500 ? 30 : 15;
  const seconds = Array.from({ length: Math.floor(longest / step) + 1 }, (_, i) => i * step);
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width="100%"
      role="img"
      aria-label={label}
      style={{ display: 'block', height: 'auto' }}
    >
      <Levels levels={levels} plot={plot} y={y} paint={paint} />
      <text x={plot.left + 4} y={plot.top - 2} fill={paint.ink2} {...FONT}>
        V
      </text>
      {seconds.map((s) => (
        <text
          key={s}
          x={x(s)}
          y={plot.bottom + 20}
          textAnchor={s === 0 ? 'start' : 'middle'}
          fill={paint.ink2}
          {...FONT}
        >
          {s} s
        </text>
      ))}
      <path
        d={`M${plot.left} ${y(limit.voltage)}H${plot.right}M${x(limit.afterS)} ${plot.top}V${plot.bottom}`}
        stroke={paint.ink3}
        strokeDasharray="2 4"
        fill="none"
      />
      <text x={x(limit.afterS) + 5} y={plot.top + 10} fill={paint.ink2} {...FONT}>
        {limit.afterS} s
      </text>
      <text x={plot.right} y={y(limit.voltage) - 5} textAnchor="end" fill={paint.ink2} {...FONT}>
        {limit.voltage} V
      </text>
      {lines.map((l) => (
        <path
          key={l.name}
          d={path(l.voltage)}
          fill="none"
          stroke={l.tone === 'passing' ? paint.petrol : paint.plum}
          strokeWidth="1.6"
          strokeLinejoin="round"
          opacity="0.85"
        />
      ))}
    </svg>
  );
}
