import { Levels } from './Levels';
import { SCREEN, type Paint } from './paint';
import { ticksTo } from './ticks';
import { rollCallCurve } from '../words/drawings';

interface Props {
  /** Units on the as-built. */
  total: number;
  /** Seconds since the start, one for each unit heard, rising. */
  heardAtS: readonly number[];
  /** Seconds since the start. */
  nowS: number;
  /** What is still expected; empty once it has stopped. */
  forecast: readonly { atS: number; expected: number; low: number; high: number }[];
  width?: number;
  height?: number;
  paint?: Paint;
}

const FONT = { fontSize: 12, fontFamily: 'inherit' } as const;

/** The roll call: units heard as steps, the forecast dashed with its band, the as-built as a line above. */
export function RollCallCurve({
  total,
  heardAtS,
  nowS,
  forecast,
  width = 600,
  height = 250,
  paint = SCREEN,
}: Props) {
  const plot = { left: 40, right: width - 16, top: 34, bottom: height - 30 };
  const end = Math.max(nowS * 1.1, forecast.at(-1)?.atS ?? 0, 300);
  const x = (s: number) => plot.left + (s / end) * (plot.right - plot.left);
  const peak = Math.max(1, total, heardAtS.length);
  const y = (n: number) => plot.bottom - (n / peak) * (plot.bottom - plot.top);
  // narrow drawings give each label the same room, and so fewer of them
  const leastStep = Math.max(0.13, 62 / (plot.right - plot.left)) * end;
  const minuteStep = ([1, 2, 5, 10, 15, 30, 60, 120, 240].find((m) => m * 60 >= leastStep) ?? 480) * 60;
  const minutes = Array.from({ length: Math.floor(end / minuteStep) + 1 }, (_, i) => i * minuteStep);
  const levels = ticksTo(peak, 4).filter((v) => v < peak * 0.94);

  let steps = `M${x(0).toFixed(1)} ${y(0).toFixed(1)}`;
  heardAtS.forEach((s, i) => {
    steps += `H${x(s).toFixed(1)}V${y(i + 1).toFixed(1)}`;
  });
  steps += `H${x(Math.max(nowS, heardAtS.at(-1) ?? 0)).toFixed(1)}`;
  const point = (s: number, n: number) => `${x(s).toFixed(1)} ${y(n).toFixed(1)}`;
  const band = forecast.length
    ? `M${forecast.map((f) => point(f.atS, f.high)).join('L')}L${[...forecast]
        .reverse()
        .map((f) => point(f.atS, f.low))
        .join('L')}Z`
    : '';
  const line = forecast.length ? `M${forecast.map((f) => point(f.atS, f.expected)).join('L')}` : '';
  const last = forecast.at(-1);
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width="100%"
      role="img"
      aria-label={rollCallCurve.ofUnitsHeardAfter(
        heardAtS.length,
        total,
        Math.round(nowS / 60),
        last ? rollCallCurve.expectedAfterMinutes(Math.round(last.expected), Math.round(last.atS / 60)) : '',
      )}
      style={{ height: 'auto' }}
    >
      <Levels levels={levels} plot={plot} y={y} paint={paint} />
      {minutes.map((s) => (
        <text
          key={s}
          x={x(s)}
          y={plot.bottom + 20}
          textAnchor={s === 0 ? 'start' : x(s) > plot.right - 16 ? 'end' : 'middle'}
          fill={paint.ink2}
          {...FONT}
        >
          {rollCallCurve.roundMin(Math.round(s / 60))}
        </text>
      ))}
      <path d={`M${plot.left} ${y(total)}H${plot.right}`} stroke={paint.ink} strokeWidth="1.5" />
      <text x={plot.right} y={y(total) - 7} textAnchor="end" fill={paint.ink} fontWeight="600" {...FONT}>
        {rollCallCurve.onTheAsBuilt(total)}
      </text>
      <path d={band} fill={paint.petrolWash} />
      <path d={line} fill="none" stroke={paint.petrol} strokeWidth="2" strokeDasharray="5 4" />
      <path d={steps} fill="none" stroke={paint.petrol} strokeWidth="2.5" />
      <circle
        cx={x(Math.max(nowS, heardAtS.at(-1) ?? 0))}
        cy={y(heardAtS.length)}
        r="5"
        fill={paint.petrol}
      />
    </svg>
  );
}
