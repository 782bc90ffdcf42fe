import { percent } from './numbers';
import { SCREEN, type Paint } from './paint';
import { dayRatios } from '../words/drawings-output';

interface Props {
  /** yyyy-mm-dd, oldest first; what it made of what was expected. */
  days: readonly { day: string; ratio: number; low: boolean }[];
  /** Below this a day counts as low. */
  limit: number;
  width?: number;
  height?: number;
  paint?: Paint;
  className?: string;
}

const FONT = { fontSize: 12, fontFamily: 'inherit' } as const;
const shown = (day: string): string =>
  new Date(`${day}T12:00:00Z`).toLocaleDateString('en-GB', {
    day: 'numeric',
    month: 'short',
    timeZone: 'UTC',
  });

/** The days that decided: each as a bar from what was expected down (or up) to what was made, the limit across. */
export function DayRatios({ days, limit, width = 420, height = 170, paint = SCREEN, className = '' }: Props) {
  const plot = { left: 44, right: width - 12, top: 12, bottom: height - 28 };
  const lowest = Math.min(limit, ...days.map((d) => d.ratio)) - 0.05;
  const highest = Math.max(1.05, ...days.map((d) => d.ratio)) + 0.02;
  const y = (r: number) => plot.bottom - ((r - lowest) / (highest - lowest)) * (plot.bottom - plot.top);
  const pitch = (plot.right - plot.left) / Math.max(1, days.length);
  const bar = Math.min(34, pitch * 0.55);
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width="100%"
      role="img"
      aria-label={dayRatios.madeOfWhatWas(
        days.map((d) => `${shown(d.day)} ${percent(d.ratio)}${d.low ? dayRatios.low : ''}`).join('; '),
        limit,
      )}
      className={className}
      style={{ height: 'auto' }}
    >
      {[1, limit].map((r, i) => (
        <g key={i}>
          <path
            d={`M${plot.left} ${y(r)}H${plot.right}`}
            stroke={i === 0 ? paint.ink3 : paint.rust}
            strokeDasharray={i === 0 ? undefined : '4 3'}
          />
          <text
            x={plot.left - 6}
            y={y(r) + 4}
            textAnchor="end"
            fill={i === 0 ? paint.ink2 : paint.rustInk}
            {...FONT}
          >
            {percent(r)}
          </text>
        </g>
      ))}
      {days.map((d, i) => {
        const x = plot.left + pitch * (i + 0.5);
        const [top, bottom] = [Math.min(y(1), y(d.ratio)), Math.max(y(1), y(d.ratio))];
        return (
          <g key={d.day}>
            <rect
              x={x - bar / 2}
              y={top}
              width={bar}
              height={Math.max(1.5, bottom - top)}
              fill={d.low ? paint.rust : paint.petrol}
              opacity={d.low ? 0.85 : 0.55}
            />
            <text
              x={x}
              y={d.ratio < 1 ? bottom + 13 : top - 4}
              textAnchor="middle"
              fill={d.low ? paint.rustInk : paint.ink2}
              fontWeight={d.low ? 600 : 400}
              {...FONT}
            >
              {percent(d.ratio)}
            </text>
            <text x={x} y={height - 6} textAnchor="middle" fill={paint.ink2} {...FONT}>
              {shown(d.day)}
            </text>
          </g>
        );
      })}
    </svg>
  );
}
