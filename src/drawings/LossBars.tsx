import { energy, percent } from './numbers';
import { SCREEN, type Paint } from './paint';

export interface LossBar {
  label: string;
  /** kWh; totals stand from zero, others are taken from what was left. */
  kWh: number;
  total: boolean;
  tone: 'ink' | 'rust' | 'slate' | 'petrol';
}
interface Props {
  bars: readonly LossBar[];
  paint?: Paint;
}

/** From what the light offered to what went out: each loss a piece of what was left before it. */
export function LossBars({ bars, paint = SCREEN }: Props) {
  const whole = Math.max(1e-9, bars[0]?.kWh ?? 0);
  const fill = { ink: paint.ink3, rust: paint.rust, slate: paint.slate, petrol: paint.petrol };
  let left = whole;
  return (
    <ol className="grid gap-y-2.5">
      {bars.map((bar) => {
        const to = bar.total ? bar.kWh : left;
        const from = bar.total ? 0 : left - bar.kWh;
        left = bar.total ? bar.kWh : from;
        const start = Math.min(from, to) / whole;
        const width = Math.max(0.003, Math.abs(to - from) / whole);
        return (
          <li
            key={bar.label}
            className="grid gap-x-4 sm:grid-cols-[220px_minmax(0,1fr)_150px] sm:items-center"
          >
            <span className="flex justify-between gap-3 sm:block">
              <span>{bar.label}</span>
              <span className="tabular-nums text-ink-2 sm:hidden">{loss(bar, whole)}</span>
            </span>
            <svg width="100%" height="16" aria-hidden="true" className="block">
              <line x1="0" x2="100%" y1="15.5" y2="15.5" stroke={paint.ruleFaint} strokeWidth="1" />
              <rect
                x={`${(start * 100).toFixed(2)}%`}
                width={`${(Math.min(width, 1) * 100).toFixed(2)}%`}
                y="2"
                height="12"
                fill={fill[bar.tone]}
              />
            </svg>
            <span className="hidden text-right tabular-nums text-ink-2 sm:block">{loss(bar, whole)}</span>
          </li>
        );
      })}
    </ol>
  );
}

const loss = (bar: LossBar, whole: number): string =>
  `${bar.total ? '' : bar.kWh >= 0 ? '−' : '+'}${energy(Math.abs(bar.kWh) * 1000)} · ${percent(Math.abs(bar.kWh) / whole, 1)}`;
