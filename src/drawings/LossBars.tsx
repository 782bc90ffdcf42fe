import { laidBars, type LossBar } from './loss-bars';
import { SCREEN, type Paint } from './paint';

interface Props {
  bars: readonly LossBar[];
  paint?: Paint;
}

/** From what the light offered to what went out: each loss a piece of what was left before it. */
export function LossBars({ bars, paint = SCREEN }: Props) {
  const fill = { ink: paint.ink3, rust: paint.rust, slate: paint.slate, petrol: paint.petrol };
  return (
    <ol className="grid gap-y-2.5">
      {laidBars(bars).map((bar) => (
        <li key={bar.label} className="grid gap-x-4 sm:grid-cols-[220px_minmax(0,1fr)_150px] sm:items-center">
          <span className="flex justify-between gap-3 sm:block">
            <span>{bar.label}</span>
            <span className="tabular-nums text-ink-2 sm:hidden">{bar.words}</span>
          </span>
          <svg width="100%" height="16" aria-hidden="true" className="block">
            <line x1="0" x2="100%" y1="15.5" y2="15.5" stroke={paint.ruleFaint} strokeWidth="1" />
            <rect
              x={`${(bar.start * 100).toFixed(2)}%`}
              width={`${(Math.max(0.003, bar.width) * 100).toFixed(2)}%`}
              y="2"
              height="12"
              fill={fill[bar.tone]}
            />
          </svg>
          <span className="hidden text-right tabular-nums text-ink-2 sm:block">{bar.words}</span>
        </li>
      ))}
    </ol>
  );
}
