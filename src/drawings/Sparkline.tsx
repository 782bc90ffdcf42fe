import { pieces } from './DayCurve';
import { SCREEN, type Paint } from './paint';

interface Props {
  /** Evenly spaced; null: a gap. */
  values: readonly (number | null)[];
  label: string;
  width?: number;
  height?: number;
  paint?: Paint;
}

/** A line small enough for a table row; its newest point marked, its gaps left open. */
export function Sparkline({ values, label, width = 96, height = 20, paint = SCREEN }: Props) {
  const known = values.filter((v): v is number => v !== null);
  const peak = Math.max(1e-9, ...known);
  const low = Math.min(0, ...known);
  const x = (i: number) => 2 + (i / Math.max(1, values.length - 1)) * (width - 5);
  const y = (v: number) => height - 2 - ((v - low) / (peak - low || 1)) * (height - 4);
  const points = values.map((value, i) => ({ value, i }));
  const last = points.findLast((p) => p.value !== null);
  return (
    <svg width={width} height={height} viewBox={`0 0 ${width} ${height}`} role="img" aria-label={label}>
      {pieces(points).map((piece) => (
        <path
          key={piece[0]?.i}
          d={`M${piece.map((p) => `${x(p.i).toFixed(1)} ${y(p.value).toFixed(1)}`).join('L')}`}
          fill="none"
          stroke={paint.petrol}
          strokeWidth="1.5"
        />
      ))}
      {last && last.value !== null && <circle cx={x(last.i)} cy={y(last.value)} r="2" fill={paint.petrol} />}
    </svg>
  );
}
