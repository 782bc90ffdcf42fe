import { number } from './numbers';
import { SCREEN, type Paint } from './paint';
import { loopScatter } from '../words/drawings';

export interface LoopScatterInput {
  /** V over A. */
  points: readonly { ownA: number; gapV: number }[];
  fit: { ohm: number; low: number; high: number; interceptV: number } | null;
}

const FONT = { fontSize: 12, fontFamily: 'inherit' } as const;
const M = { left: 54, right: 16, top: 24, bottom: 40 } as const;

/** Round values about `count` of them from `low` to `high`. */
export function ticksBetween(low: number, high: number, count: number): number[] {
  const rough = (high - low) / count;
  const unit = 10 ** Math.floor(Math.log10(rough > 0 ? rough : 1));
  const step = ([1, 2, 5, 10].find((m) => m * unit >= rough) ?? 10) * unit;
  const first = Math.ceil(low / step - 1e-9);
  const last = Math.floor(high / step + 1e-9);
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, i) => (first + i) * step);
}

/** Where everything lies, px. The axes hold nearly every point; a wild one is left outside. */
export function loopGeometry({ points, fit }: LoopScatterInput, width: number, height: number) {
  const sorted = points.map((p) => p.gapV).sort((a, b) => a - b);
  const at = (share: number) => sorted[Math.round(share * (sorted.length - 1))] ?? 0;
  const highA = Math.max(1, ...points.map((p) => p.ownA)) * 1.04;
  const ends = fit ? [fit.interceptV, fit.interceptV + fit.ohm * highA] : [];
  const low = Math.min(at(0.005), ...ends, 0);
  const high = Math.max(at(0.995), ...ends, low + 0.5);
  const room = (high - low) * 0.06;
  const [from, to] = [low - room, high + room];
  const x = (a: number) => M.left + (a / highA) * (width - M.left - M.right);
  const y = (v: number) => height - M.bottom - ((v - from) / (to - from)) * (height - M.top - M.bottom);
  const middleA = points.length > 0 ? points.reduce((sum, p) => sum + p.ownA, 0) / points.length : highA / 2;
  return { x, y, from, to, highA, middleA };
}

/** Sum of the units less the input over current: its slope is the resistance of everything between them. */
export function LoopScatter({
  points,
  fit,
  width = 880,
  height = 330,
  paint = SCREEN,
  className = '',
}: LoopScatterInput & { width?: number; height?: number; paint?: Paint; className?: string }) {
  const { x, y, from, to, highA, middleA } = loopGeometry({ points, fit }, width, height);
  const line = (ohm: number) => {
    const pivot = fit ? fit.interceptV + fit.ohm * middleA : 0;
    const v = (a: number) => pivot + ohm * (a - middleA);
    return { at0: v(0), atEnd: v(highA) };
  };
  const [low, high] = fit ? [line(fit.low), line(fit.high)] : [null, null];
  const said = fit
    ? loopScatter.pointsResistanceOhmBetween(points.length, fit.ohm, fit.low, fit.high)
    : loopScatter.pointsNoLine(points.length);
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width="100%"
      role="img"
      aria-label={loopScatter.sumOfUnitVoltages(said)}
      className={className}
      style={{ height: 'auto' }}
    >
      <defs>
        <clipPath id={`loop-plot-${width}`}>
          <rect x={M.left} y={M.top} width={width - M.left - M.right} height={height - M.top - M.bottom} />
        </clipPath>
      </defs>
      {ticksBetween(from, to, 5).map((v) => (
        <g key={v}>
          <path
            d={`M${M.left} ${y(v)}H${width - M.right}`}
            stroke={Math.abs(v) < 1e-9 ? paint.rule : paint.ruleFaint}
          />
          <text x={M.left - 8} y={y(v) + 4} textAnchor="end" fill={paint.ink2} {...FONT}>
            {number(v, to - from < 4 ? 1 : 0)}
          </text>
        </g>
      ))}
      <text x={M.left - 8} y={14} textAnchor="end" fill={paint.ink2} {...FONT}>
        V
      </text>
      {ticksBetween(0, highA, 6).map((a) => (
        <text key={a} x={x(a)} y={height - M.bottom + 18} textAnchor="middle" fill={paint.ink2} {...FONT}>
          {number(a)}
        </text>
      ))}
      <text x={width - M.right} y={height - M.bottom + 34} textAnchor="end" fill={paint.ink2} {...FONT}>
        {loopScatter.currentOfTheString}
      </text>
      <g clipPath={`url(#loop-plot-${width})`}>
        {low && high && (
          <path
            d={`M${x(0)} ${y(low.at0)}L${x(highA)} ${y(low.atEnd)}L${x(highA)} ${y(high.atEnd)}L${x(0)} ${y(high.at0)}Z`}
            fill={paint.petrolWash}
            opacity="0.9"
          />
        )}
        {points.map((p, i) => (
          <circle
            key={i}
            cx={x(p.ownA).toFixed(1)}
            cy={y(p.gapV).toFixed(1)}
            r="2.2"
            fill={paint.petrol}
            opacity="0.5"
          />
        ))}
        {fit && (
          <path
            d={`M${x(0)} ${y(fit.interceptV)}L${x(highA)} ${y(fit.interceptV + fit.ohm * highA)}`}
            stroke={paint.ink}
            strokeWidth="2"
          />
        )}
      </g>
      {fit && (
        <text x={M.left + 10} y={M.top + 12} fill={paint.ink} fontWeight="600" {...FONT}>
          {loopScatter.ohmLowToHigh(fit.ohm, fit.low, fit.high)}
        </text>
      )}
    </svg>
  );
}
