import { instantsOf, offsetAt } from '../domain/time/wall-clock';
import { gappedLine } from './gapped-line';
import { Levels } from './Levels';
import { SCREEN, type Paint } from './paint';
import { ticksTo } from './ticks';
import { clock, shortDate } from './times';

/** A line over time as a table would have it: epoch seconds and values, null where nothing is known. */
export interface TimeLine {
  at: readonly number[];
  values: readonly (number | null)[];
}
interface Props {
  from: number; // epoch s
  to: number;
  timeZone: string;
  unit: string;
  measured: TimeLine;
  /** The expected band; left out where nothing is expected. */
  expected?: { at: readonly number[]; low: readonly (number | null)[]; high: readonly (number | null)[] };
  /** Other strings of the plane, in the middle. */
  middle?: TimeLine;
  nights: readonly (readonly [number, number])[];
  marks: readonly { from: number; words: string }[];
  label: string;
  width?: number;
  height?: number;
  paint?: Paint;
}

const DAY_S = 86_400;
const FONT = { fontSize: 12, fontFamily: 'inherit' } as const;

/** Hours or days of the axis by the clock there, few enough that their words fit. */
function times(from: number, to: number, timeZone: string): { at: number; words: string }[] {
  const byDays = to - from > 1.5 * DAY_S;
  const stepMs = 1000 * (byDays ? DAY_S : 4 * 3600);
  const wallMs = 1000 * from + offsetAt(1000 * from, timeZone);
  const list: { at: number; words: string }[] = [];
  for (let k = 0; 1000 * from + k * stepMs < 1000 * to + DAY_S * 1000; k++) {
    const [ms] = instantsOf(wallMs + k * stepMs, timeZone);
    if (ms === undefined || ms >= 1000 * to) continue;
    list.push({ at: ms / 1000, words: byDays ? shortDate(ms, timeZone) : clock(ms, timeZone) });
  }
  return list;
}

/** Pieces of a band in which both of its edges are known. */
function bands(
  { at, low, high }: NonNullable<Props['expected']>,
  x: (at: number) => number,
  y: (value: number) => number,
): string[] {
  const paths: string[] = [];
  let piece: { x: number; low: number; high: number }[] = [];
  const close = () => {
    if (piece.length > 1) {
      const top = piece.map((p) => `${p.x.toFixed(1)} ${p.high.toFixed(1)}`).join('L');
      const bottom = [...piece]
        .reverse()
        .map((p) => `${p.x.toFixed(1)} ${p.low.toFixed(1)}`)
        .join('L');
      paths.push(`M${top}L${bottom}Z`);
    }
    piece = [];
  };
  at.forEach((t, i) => {
    const [l, h] = [low[i] ?? null, high[i] ?? null];
    if (l === null || h === null) close();
    else piece.push({ x: x(t), low: y(l), high: y(h) });
  });
  close();
  return paths;
}

/** What a string gave over time: the measured line, the expected band behind it, nights shaded, events as marks. */
export function HistoryLines({
  from,
  to,
  timeZone,
  unit,
  measured,
  expected,
  middle,
  nights,
  marks,
  label,
  width = 720,
  height = 230,
  paint = SCREEN,
}: Props) {
  const plot = { left: 52, right: width - 10, top: 18, bottom: height - 26 };
  const peak = Math.max(
    1,
    ...measured.values.map((v) => v ?? 0),
    ...(expected?.high ?? []).map((v) => v ?? 0),
    ...(middle?.values ?? []).map((v) => v ?? 0),
  );
  const levels = ticksTo(peak, 4);
  const top = Math.max(peak, levels.at(-1) ?? peak);
  const x = (t: number) => plot.left + ((t - from) / (to - from)) * (plot.right - plot.left);
  const y = (v: number) => plot.bottom - (Math.max(0, v) / top) * (plot.bottom - plot.top);
  const line = ({ at, values }: TimeLine): string =>
    gappedLine(
      at.map((t, i) => {
        const value = values[i] ?? null;
        return [x(t), value === null ? null : y(value)];
      }),
    );
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width="100%"
      role="img"
      aria-label={label}
      style={{ height: 'auto' }}
    >
      {nights.map(([a, b]) => (
        <rect
          key={a}
          x={Math.max(plot.left, x(a))}
          y={plot.top}
          width={Math.max(0, Math.min(plot.right, x(b)) - Math.max(plot.left, x(a)))}
          height={plot.bottom - plot.top}
          fill={paint.film}
        />
      ))}
      <Levels levels={levels} plot={plot} y={y} paint={paint} />
      <text x={plot.left + 2} y={plot.top - 5} fill={paint.ink2} {...FONT}>
        {unit}
      </text>
      {times(from, to, timeZone).map(({ at, words }) => (
        <g key={at}>
          <path d={`M${x(at)} ${plot.bottom}v4`} stroke={paint.ink3} />
          <text
            x={x(at)}
            y={plot.bottom + 18}
            textAnchor={at === from ? 'start' : 'middle'}
            fill={paint.ink2}
            {...FONT}
          >
            {words}
          </text>
        </g>
      ))}
      {expected &&
        bands(expected, x, y).map((d, i) => <path key={i} d={d} fill={paint.petrolWash} stroke="none" />)}
      {middle && <path d={line(middle)} fill="none" stroke={paint.ink3} strokeDasharray="4 3" />}
      <path d={line(measured)} fill="none" stroke={paint.petrol} strokeWidth="1.8" />
      {marks
        .filter((m) => m.from >= from && m.from <= to)
        .map((m, i) => (
          <path
            key={`${m.from} ${i}`}
            d={`M${x(m.from)} ${plot.top}V${plot.bottom}`}
            stroke={paint.rust}
            strokeDasharray="2 3"
          />
        ))}
    </svg>
  );
}
