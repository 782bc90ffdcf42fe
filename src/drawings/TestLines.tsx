import { gappedLine } from './gapped-line';
import { Levels } from './Levels';
import { SCREEN, type Paint } from './paint';
import { ticksTo } from './ticks';
import { testLines } from '../words/drawings';

export interface TestLine {
  name: string;
  /** [seconds from the command, V]; null: not known, drawn as a gap. */
  points: readonly (readonly [number, number | null])[];
  /** What it stands at now: held (may be live), fallen, or not judged yet. */
  tone: 'live' | 'fallen' | 'open';
}
interface Props {
  lines: readonly TestLine[];
  /** Readings of an instrument: the highest of each. */
  readings: readonly { name: string; afterS: number; volts: number }[];
  limits: { outsideV: number; insideV: number; afterS: number };
  /** Seconds from the command to the release; null: not released. */
  releaseS: number | null;
  label: string;
  width?: number;
  height?: number;
  paint?: Paint;
}

const FROM_S = -15;
const SPAN_S = 120;
/** What comes later than this is left out of the drawing. */
const LAST_S = 420;
const FONT = { fontSize: 12, fontFamily: 'inherit' } as const;

/**
 * A shutdown test: string voltages from just before the command on, readings of the instrument as rings, the limits
 * of voltage outside and inside the array and the limit of time dashed, the release as a line.
 */
export function TestLines({
  lines,
  readings,
  limits,
  releaseS,
  label,
  width = 720,
  height = 280,
  paint = SCREEN,
}: Props) {
  const plot = { left: 44, right: width - 22, top: 18, bottom: height - 28 };
  const drawn = lines.map((l) => ({ ...l, points: l.points.filter(([s]) => s >= FROM_S && s <= LAST_S) }));
  const lastS = Math.max(
    SPAN_S,
    ...drawn.flatMap((l) => l.points.map(([s]) => s)),
    ...readings.map((r) => r.afterS),
  );
  const endS = Math.min(LAST_S, lastS);
  const peak = Math.max(
    limits.insideV * 1.5,
    ...drawn.flatMap((l) => l.points.map(([, v]) => v ?? 0)),
    ...readings.map((r) => r.volts),
  );
  const levels = ticksTo(peak, 4);
  const top = levels.at(-1) ?? peak;
  const x = (s: number) => plot.left + ((s - FROM_S) / (endS - FROM_S)) * (plot.right - plot.left);
  const y = (v: number) => plot.bottom - (Math.max(0, v) / top) * (plot.bottom - plot.top);
  const path = (points: TestLine['points']): string =>
    gappedLine(points.map(([s, v]) => [x(s), v === null ? null : y(v)]));
  const step = (width < 500 ? 2 : 1) * (endS > 240 ? 60 : endS > 150 ? 30 : 15);
  const seconds = Array.from({ length: Math.floor(endS / step) + 1 }, (_, i) => i * step);
  const colour = { live: paint.crimson, fallen: paint.plum, open: paint.petrol };
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width="100%"
      role="img"
      aria-label={label}
      style={{ display: 'block', height: 'auto' }}
    >
      <Levels
        levels={levels}
        plot={plot}
        y={y}
        paint={paint}
        words={(v) => (v === top ? `${v} V` : String(v))}
      />
      {seconds.map((s) => (
        <text key={s} x={x(s)} y={plot.bottom + 20} textAnchor="middle" fill={paint.ink2} {...FONT}>
          {s} s
        </text>
      ))}
      <path d={`M${x(0)} ${plot.top}V${plot.bottom}`} stroke={paint.ink} strokeWidth="1.2" />
      <path
        d={`M${plot.left} ${y(limits.outsideV)}H${plot.right}M${plot.left} ${y(limits.insideV)}H${plot.right}M${x(limits.afterS)} ${plot.top}V${plot.bottom}`}
        stroke={paint.ink3}
        strokeDasharray="2 4"
        fill="none"
      />
      <text x={x(0) + 4} y={plot.top - 6} fill={paint.ink2} {...FONT}>
        {testLines.command}
      </text>
      <text x={x(limits.afterS) + 4} y={plot.top + 10} fill={paint.ink2} {...FONT}>
        {limits.afterS} s
      </text>
      <text x={plot.right} y={y(limits.insideV) - 4} textAnchor="end" fill={paint.ink2} {...FONT}>
        {testLines.insideVvInside(limits.insideV)}
      </text>
      <text x={plot.right} y={y(limits.outsideV) - 4} textAnchor="end" fill={paint.ink2} {...FONT}>
        {testLines.outsideVvOutside(limits.outsideV)}
      </text>
      {releaseS !== null && releaseS <= endS && (
        <>
          <path d={`M${x(releaseS)} ${plot.top}V${plot.bottom}`} stroke={paint.ink3} />
          <text x={x(releaseS) + 4} y={plot.top + 24} fill={paint.ink2} {...FONT}>
            {testLines.released}
          </text>
        </>
      )}
      {drawn.map((l) => (
        <path
          key={l.name}
          d={path(l.points)}
          fill="none"
          stroke={colour[l.tone]}
          strokeWidth={l.tone === 'live' ? 2 : 1.6}
          strokeLinejoin="round"
          opacity="0.85"
        />
      ))}
      {readings
        .filter((r) => r.afterS <= endS)
        .map((r, i) => (
          <circle
            key={`${r.name} ${i}`}
            cx={x(r.afterS)}
            cy={y(r.volts)}
            r="4"
            fill={paint.sheet}
            stroke={paint.ink}
            strokeWidth="1.8"
          />
        ))}
    </svg>
  );
}
