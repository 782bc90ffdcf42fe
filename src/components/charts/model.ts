/** What a chart over time shows, independent of how it is drawn. Instants in epoch seconds. */
export type ChartTone = 'ink' | 'petrol' | 'rust' | 'crimson' | 'plum' | 'slate';

export interface ChartLine {
  name: string;
  at: readonly number[];
  /** null: a gap */
  values: readonly (number | null)[];
  tone: ChartTone;
  /** Thin and pale: one of many. */
  quiet?: boolean;
  /** Not measured here, or laid over from elsewhere. */
  dashed?: boolean;
}
export interface ChartBand {
  name: string;
  at: readonly number[];
  low: readonly (number | null)[];
  high: readonly (number | null)[];
}
export interface ChartMark {
  from: number;
  /** null: an instant */
  to: number | null;
  words: string;
  tone: Exclude<ChartTone, 'ink'>;
}
export interface ChartModel {
  title: string;
  unit: string;
  digits: number;
  timeZone: string;
  from: number;
  to: number;
  lines: readonly ChartLine[];
  /** What is expected, behind the lines. */
  band?: ChartBand;
  /** Lowest to highest within each step, behind the first line. */
  spread?: ChartBand;
  nights: readonly (readonly [number, number])[];
  marks: readonly ChartMark[];
  /** The value axis starts at 0. */
  fromZero?: boolean;
}

/** The newest value at or before `at`, no older than `withinS`; null in a gap. */
export function valueAt(
  line: Pick<ChartLine, 'at' | 'values'>,
  at: number,
  withinS = Infinity,
): number | null {
  let low = 0;
  let high = line.at.length - 1;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if ((line.at[middle] ?? Infinity) <= at) low = middle;
    else high = middle - 1;
  }
  const found = line.at[low];
  return found !== undefined && found <= at && at - found <= withinS ? (line.values[low] ?? null) : null;
}
