import { SCREEN, type Paint } from './paint';

export interface YearBar {
  /** 1 … 12 */
  month: number;
  /** null: no record */
  now: number | null;
  before: number | null;
}
interface Props {
  months: readonly YearBar[];
  label: string;
  /** What is written under each pair. */
  monthLabel: (month: number) => string;
  height?: number;
  paint?: Paint;
}

/** Two years beside each other, month by month: this one filled, the one before in outline. */
export function YearBars({ months, label, monthLabel, height = 168, paint = SCREEN }: Props) {
  const peak = Math.max(1e-9, ...months.flatMap((m) => [m.now ?? 0, m.before ?? 0]));
  const share = (value: number): number => (value / peak) * 100;
  return (
    <div role="img" aria-label={label} className="grid grid-cols-12 gap-x-1 sm:gap-x-3">
      {months.map(({ month, now, before }) => (
        <div key={month} className="min-w-0">
          <svg width="100%" height={height} className="block overflow-visible">
            <line x1="0" x2="100%" y1="100%" y2="100%" stroke={paint.rule} strokeWidth="1" />
            {before !== null && (
              <rect
                x="3%"
                width="42%"
                y={`${100 - share(before)}%`}
                height={`${share(before)}%`}
                fill="none"
                stroke={paint.ink3}
                strokeWidth="1"
              />
            )}
            {now !== null && (
              <rect
                x="52%"
                width="45%"
                y={`${100 - share(now)}%`}
                height={`${share(now)}%`}
                fill={paint.petrol}
              />
            )}
          </svg>
          <p className="mt-1 text-center text-xs text-ink-2 sm:text-sm" aria-hidden="true">
            <span className="sm:hidden">{monthLabel(month).slice(0, 1)}</span>
            <span className="hidden sm:inline">{monthLabel(month).slice(0, 3)}</span>
          </p>
        </div>
      ))}
    </div>
  );
}
