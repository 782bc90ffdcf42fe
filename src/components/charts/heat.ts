import { median } from '../../domain/output/robust';

/** What a heat strip shows: units over the steps of a day. */
export interface HeatModel {
  title: string;
  unit: string;
  digits: number;
  timeZone: string;
  from: number;
  to: number;
  stepS: number;
  at: readonly number[];
  rows: readonly { position: number; values: readonly (number | null)[] }[];
  /** middle: each value over the middle of its step's; figures: as they are. */
  scale: 'middle' | 'figures';
}

export interface HeatCell {
  at: number;
  position: number;
  value: number | null;
  /** Of the middle of its step; null where there is none worth dividing by. */
  ratio: number | null;
}

/** The middle value of each step; null where nobody tells, or where it is too small to divide by. */
export function middles(model: Pick<HeatModel, 'at' | 'rows'>, least: number): (number | null)[] {
  return model.at.map((_, i) => {
    const known = model.rows.flatMap((r) => r.values[i] ?? []);
    const middle = known.length >= 3 ? median(known) : 0;
    return middle >= least ? middle : null;
  });
}

export const cellAt = (
  model: HeatModel,
  middle: readonly (number | null)[],
  row: number,
  step: number,
): HeatCell => {
  const value = model.rows[row]?.values[step] ?? null;
  const m = middle[step] ?? null;
  return {
    at: model.at[step] ?? model.from,
    position: model.rows[row]?.position ?? row + 1,
    value,
    ratio: value === null || m === null ? null : value / m,
  };
};

/** Lowest and highest of the figures, a little robust: one wild value does not take the whole ramp. */
export function rangeOf(model: Pick<HeatModel, 'rows'>): [number, number] {
  const known = model.rows.flatMap((r) => r.values.filter((v) => v !== null)).sort((a, b) => a - b);
  if (known.length === 0) return [0, 1];
  const at = (share: number) => known[Math.round(share * (known.length - 1))] ?? 0;
  const [low, high] = [Math.min(0, at(0.01)), at(0.995)];
  return high > low ? [low, high] : [low, low + 1];
}

/** A ratio is shown from so far below to so far above its middle; beyond, the ramp's end. */
export const RATIO_SPAN = 0.25;

/** Where on its ramp a value lies: figures 0 … 1, ratios −1 … 1 about the middle. */
export const onRamp = (value: number, range: readonly [number, number]): number =>
  Math.min(1, Math.max(0, (value - range[0]) / (range[1] - range[0])));
export const aboutMiddle = (ratio: number): number => Math.min(1, Math.max(-1, (ratio - 1) / RATIO_SPAN));

/** rgb() of three stops mixed; lightness rises or falls the whole way, so that it reads without hue. */
export function mixed(stops: readonly [string, string, string], at: number): string {
  const [from, to] = at < 0.5 ? [stops[0], stops[1]] : [stops[1], stops[2]];
  const share = at < 0.5 ? at * 2 : at * 2 - 1;
  const a = rgbOf(from);
  const b = rgbOf(to);
  return `rgb(${a.map((x, i) => Math.round(x + ((b[i] ?? 0) - x) * share)).join(' ')})`;
}
const rgbOf = (colour: string): number[] => (colour.match(/[\d.]+/g) ?? []).slice(0, 3).map(Number);
