import { gappedLine } from './gapped-line';
import type { TimeLine } from './HistoryLines';
import { number } from './numbers';
import { Levels } from './Levels';
import { SCREEN, type Paint } from './paint';
import { ticksTo } from './ticks';
import { clock, shortDate } from './times';

interface Props {
  from: number; // epoch s
  to: number;
  timeZone: string;
  /** The first line is drawn full, a second one dashed. */
  lines: readonly TimeLine[];
  /** Instants that are marked below the line, epoch s. */
  marks?: readonly number[];
  label: string;
  width?: number;
  height?: number;
  paint?: Paint;
}

const FONT = { fontSize: 12, fontFamily: 'inherit' } as const;
const HOUR_S = 3600;

/** A measure of the last hours, small enough to stand with others: its range, its times, its gaps. */
export function MinuteLines({
  from,
  to,
  timeZone,
  lines,
  marks = [],
  label,
  width = 300,
  height = 104,
  paint = SCREEN,
}: Props) {
  const plot = { left: 46, right: width - 6, top: 8, bottom: height - 22 };
  const peak = Math.max(0, ...lines.flatMap((l) => l.values.map((v) => v ?? 0)));
  const levels = ticksTo(peak, 2);
  const top = levels.at(-1) ?? 1;
  const digits = top < 1 ? 2 : top < 5 ? 1 : 0;
  const x = (t: number) => plot.left + ((t - from) / (to - from)) * (plot.right - plot.left);
  const y = (v: number) => plot.bottom - (Math.max(0, v) / top) * (plot.bottom - plot.top);
  const words = (t: number): string =>
    to - from > 30 * HOUR_S
      ? `${shortDate(t * 1000, timeZone)}, ${clock(t * 1000, timeZone)}`
      : clock(t * 1000, timeZone);
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width="100%"
      role="img"
      aria-label={label}
      style={{ height: 'auto', maxWidth: width * 1.5 }}
    >
      <Levels
        levels={levels}
        plot={plot}
        y={y}
        paint={paint}
        words={(v) => number(v, v === 0 ? 0 : digits)}
      />
      <text x={plot.left} y={height - 5} fill={paint.ink2} {...FONT}>
        {words(from)}
      </text>
      <text x={plot.right} y={height - 5} textAnchor="end" fill={paint.ink2} {...FONT}>
        {words(to)}
      </text>
      {lines.map((line, i) => (
        <path
          key={i}
          d={gappedLine(
            line.at.map((t, k) => {
              const value = line.values[k] ?? null;
              return [x(t), value === null ? null : y(value)];
            }),
          )}
          fill="none"
          stroke={i === 0 ? paint.petrol : paint.ink3}
          strokeDasharray={i === 0 ? undefined : '4 3'}
          strokeWidth="1.6"
          strokeLinecap="round"
        />
      ))}
      {marks.map((t) => (
        <path key={t} d={`M${x(t)} ${plot.bottom - 7}v7`} stroke={paint.rust} strokeWidth="2" />
      ))}
    </svg>
  );
}
