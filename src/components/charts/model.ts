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
  /** Tells lines of one colour apart: the first is drawn through, each further one in another stroke (`strokeOf`). */
  turn?: number;
}

const STROKES: readonly (readonly number[] | null)[] = [null, [9, 4], [2, 3], [12, 4, 2, 4]];

/** How a line is drawn: four strokes, then the same ones thinner, so that eight of one colour are told apart. */
export function strokeOf(line: Pick<ChartLine, 'dashed' | 'quiet' | 'turn'>): {
  width: number;
  /** px drawn, px left out; null: drawn through */
  dash: readonly number[] | null;
} {
  const turn = line.turn ?? 0;
  const dash = STROKES[turn % STROKES.length] ?? null;
  return {
    width: line.quiet ? 1 : turn >= STROKES.length ? 1.2 : 2,
    dash: dash ?? (line.dashed ? [5, 4] : null),
  };
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
