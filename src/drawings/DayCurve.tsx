import { SCREEN, type Paint } from './paint';

interface Props {
  /** Hours of the local day; null: nothing is known there. */
  made: readonly { hour: number; value: number | null }[];
  /** A clear day, dotted. */
  clear: readonly { hour: number; value: number }[];
  label: string;
  width?: number;
  height?: number;
  paint?: Paint;
}

/** Pieces of a line, broken where nothing is known. */
export function pieces<P extends { value: number | null }>(
  points: readonly P[],
): (P & { value: number })[][] {
  const out: (P & { value: number })[][] = [];
  let open: (P & { value: number })[] = [];
  for (const p of points) {
    if (p.value === null) {
      if (open.length) out.push(open);
      open = [];
    } else open.push({ ...p, value: p.value });
  }
  if (open.length) out.push(open);
  return out;
}

/** A day's power against a clear day: solid and washed what was made, dotted what a clear sky would give. */
export function DayCurve({ made, clear, label, width = 860, height = 250, paint = SCREEN }: Props) {
  const plot = { left: 10, right: width - 10, top: 12, bottom: height - 28 };
  const lit = clear.filter((p) => p.value > 0);
  const from = Math.max(0, Math.floor((lit[0]?.hour ?? 5) - 0.5));
  const to = Math.min(24, Math.ceil((lit.at(-1)?.hour ?? 20) + 0.5));
  const peak = Math.max(1, ...clear.map((p) => p.value), ...made.map((p) => p.value ?? 0)) * 1.05;
  const x = (h: number) => plot.left + ((h - from) / (to - from)) * (plot.right - plot.left);
  const y = (v: number) => plot.bottom - (Math.max(0, v) / peak) * (plot.bottom - plot.top);
  const inside = <P extends { hour: number }>(points: readonly P[]) =>
    points.filter((p) => p.hour >= from && p.hour <= to);
  const path = (points: readonly { hour: number; value: number }[]) =>
    points.length
      ? `M${points.map((p) => `${x(p.hour).toFixed(1)} ${y(p.value).toFixed(1)}`).join('L')}`
      : '';
  const step = width < 500 ? 4 : 3;
  const hours = Array.from({ length: 24 / step + 1 }, (_, i) => i * step).filter((h) => h > from && h < to);
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width="100%"
      role="img"
      aria-label={label}
      style={{ height: 'auto' }}
    >
      <path d={`M${plot.left} ${plot.bottom}H${plot.right}`} stroke={paint.rule} />
      {pieces(inside(made)).map((piece) => {
        const first = piece[0];
        const last = piece.at(-1);
        if (!first || !last) return null;
        return (
          <g key={first.hour}>
            <path
              d={`${path(piece)}L${x(last.hour).toFixed(1)} ${plot.bottom}L${x(first.hour).toFixed(1)} ${plot.bottom}Z`}
              fill={paint.petrolWash}
              opacity="0.8"
            />
            <path
              d={path(piece)}
              fill="none"
              stroke={paint.petrol}
              strokeWidth="2.5"
              strokeLinejoin="round"
            />
          </g>
        );
      })}
      <path
        d={path(inside(clear))}
        fill="none"
        stroke={paint.ink3}
        strokeWidth="1.8"
        strokeDasharray="1.5 5"
        strokeLinecap="round"
      />
      {hours.map((h) => (
        <text
          key={h}
          x={x(h)}
          y={plot.bottom + 20}
          textAnchor="middle"
          fill={paint.ink2}
          fontSize="12"
          fontFamily="inherit"
        >
          {h}:00
        </text>
      ))}
    </svg>
  );
}
