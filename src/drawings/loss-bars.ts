import { energy, percent } from './numbers';

export interface LossBar {
  label: string;
  /** kWh; totals stand from zero, others are taken from what was left. */
  kWh: number;
  total: boolean;
  tone: 'ink' | 'rust' | 'slate' | 'petrol';
}

/** A bar as it lies on an axis from 0 to 1, the first bar being the whole, and what it says. */
export interface LaidBar extends LossBar {
  start: number;
  width: number;
  words: string;
}

/** From what the light offered to what went out: each loss a piece of what was left before it. */
export function laidBars(bars: readonly LossBar[]): LaidBar[] {
  const whole = Math.max(1e-9, bars[0]?.kWh ?? 0);
  let left = whole;
  return bars.map((bar) => {
    const to = bar.total ? bar.kWh : left;
    const from = bar.total ? 0 : left - bar.kWh;
    left = bar.total ? bar.kWh : from;
    const sign = bar.total ? '' : bar.kWh >= 0 ? '−' : '+';
    return {
      ...bar,
      start: Math.min(from, to) / whole,
      width: Math.min(1, Math.abs(to - from) / whole),
      words: `${sign}${energy(Math.abs(bar.kWh) * 1000)} · ${percent(Math.abs(bar.kWh) / whole, 1)}`,
    };
  });
}
