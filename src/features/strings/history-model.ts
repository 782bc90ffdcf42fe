import { fromWall, toWall } from '../../components/charts/local-time';
import { valueAt, type ChartLine, type ChartMark, type ChartModel } from '../../components/charts/model';
import type { StringHistory, StringUnits } from '../../schemas/api/string';
import { historyModel } from '../../words/string-history';

const RANGE = {
  day: historyModel.aDay,
  week: historyModel.aWeek,
  month: historyModel.aMonth,
  year: historyModel.aYear,
} as const;
const NAME: Record<StringHistory['quantity'], string> = {
  voltage: historyModel.voltage,
  current: historyModel.current,
  power: historyModel.power,
};
const LINE_DIGITS: Record<string, number> = { V: 0, A: 2, W: 0, kWh: 1 };

interface Series {
  at: readonly number[];
  values: readonly (number | null)[];
}
function spliced(
  whole: Series,
  part: Series,
  span: { from: number; to: number },
): { at: number[]; values: (number | null)[] } {
  if (part.at.length === 0) return { at: [...whole.at], values: [...whole.values] };
  const kept = whole.at.flatMap((at, i) => (at < span.from || at > span.to ? [i] : []));
  const before = kept.filter((i) => (whole.at[i] ?? 0) < span.from);
  const after = kept.filter((i) => (whole.at[i] ?? 0) > span.to);
  const at = (i: number) => whole.at[i] ?? 0;
  const value = (i: number) => whole.values[i] ?? null;
  return {
    at: [...before.map(at), ...part.at, ...after.map(at)],
    values: [...before.map(value), ...part.values, ...after.map(value)],
  };
}

/** Puts the finer part into the whole, in place of what the whole says of that time. */
export function refined(whole: StringHistory, part: StringHistory | null): StringHistory {
  if (!part || part.resolution === whole.resolution || part.values.every((v) => v === null)) return whole;
  const outside = (at: number) => at < part.from || at > part.to;
  const pick = (values: readonly (number | null)[]) => values.filter((_, i) => outside(whole.at[i] ?? 0));
  const before = whole.at.filter((at) => at < part.from).length;
  const insert = <T>(rest: readonly T[], into: readonly T[]) => [
    ...rest.slice(0, before),
    ...into,
    ...rest.slice(before),
  ];
  const eBefore = whole.expected.at.filter((at) => at < part.from).length;
  const eOutside = (values: readonly (number | null)[]) =>
    values.filter((_, i) => outside(whole.expected.at[i] ?? 0));
  const eInsert = <T>(rest: readonly T[], into: readonly T[]) => [
    ...rest.slice(0, eBefore),
    ...into,
    ...rest.slice(eBefore),
  ];
  return {
    ...whole,
    at: insert(whole.at.filter(outside), part.at),
    values: insert(pick(whole.values), part.values),
    low: insert(pick(whole.low), part.low),
    high: insert(pick(whole.high), part.high),
    energy: insert(pick(whole.energy), part.energy),
    expected: {
      ...whole.expected,
      at: eInsert(whole.expected.at.filter(outside), part.expected.at),
      low: eInsert(eOutside(whole.expected.low), part.expected.low),
      high: eInsert(eOutside(whole.expected.high), part.expected.high),
    },
    middle: { ...whole.middle, ...spliced(whole.middle, part.middle, part) },
    imported: spliced(whole.imported, part.imported, part),
    siblings: whole.siblings.map((line) => {
      const finer = part.siblings.find((p) => p.id === line.id);
      return finer ? { ...line, ...spliced(line, finer, part) } : line;
    }),
    nights: part.nights.length > 0 && whole.nights.length === 0 ? part.nights : whole.nights,
    marks: part.marks.length > whole.marks.length ? part.marks : whole.marks,
  };
}

const NIGHT_SHOWN_S = 5400;

/** One day is shown from a little before sunrise to a little after sunset: nothing happens in between. */
function daylight({ from, to, nights }: Pick<StringHistory, 'from' | 'to' | 'nights'>): {
  from: number;
  to: number;
} {
  const morning = nights.find(([since]) => since <= from)?.[1] ?? from;
  const evening = nights.find(([, until]) => until >= to)?.[0] ?? to;
  return evening > morning
    ? { from: Math.max(from, morning - NIGHT_SHOWN_S), to: Math.min(to, evening + NIGHT_SHOWN_S) }
    : { from, to };
}

/** What is laid over a string's history: another string, or another day of it, moved onto the same hours. */
export interface Overlay {
  name: string;
  history: StringHistory;
}

/** The overlay's instants on the history's own axis: the same wall clock, whatever the clocks did between. */
export function laidOver(history: StringHistory, over: StringHistory): number[] {
  const shift = toWall(history.from, history.timeZone) - toWall(over.from, over.timeZone);
  if (shift === 0 && history.timeZone === over.timeZone) return over.at;
  return over.at.map((at) => fromWall(toWall(at, over.timeZone) + shift, history.timeZone));
}

export interface Shown {
  /** The middle of the siblings, each of them, or none. */
  siblings: 'middle' | 'each' | 'off';
  overlay: Overlay | null;
  notes: readonly ChartMark[];
}

function siblingLinesOf(history: StringHistory, shown: Shown): ChartLine[] {
  if (shown.siblings === 'off') return [];
  const each = history.siblings.map((s): ChartLine => ({
    name: s.name,
    at: s.at,
    values: s.values,
    tone: 'petrol',
    quiet: true,
  }));
  if (shown.siblings === 'each') return each;
  return history.middle.at.length === 0
    ? []
    : [
        {
          name: historyModel.siblingsMiddle,
          at: history.middle.at,
          values: history.middle.values,
          tone: 'petrol',
          quiet: true,
        },
      ];
}

/** A string's history as a chart. */
export function historyChart(
  history: StringHistory,
  subject: string,
  shown: Shown = { siblings: 'off', overlay: null, notes: [] },
): ChartModel {
  const coarse = history.resolution !== 'minute';
  const name = history.unit === 'kWh' ? historyModel.madeThatDay : NAME[history.quantity];
  const { overlay } = shown;
  const peaks = coarse && history.low.some((v, i) => v !== (history.values[i] ?? null));
  return {
    title: historyModel.subjectQuantitySaidOverRange(subject, NAME[history.quantity], RANGE[history.range]),
    unit: history.unit,
    digits: LINE_DIGITS[history.unit] ?? 1,
    timeZone: history.timeZone,
    ...(history.range === 'day' ? daylight(history) : { from: history.from, to: history.to }),
    lines: [
      {
        name: coarse && history.unit !== 'kWh' ? historyModel.meanName(name) : name,
        at: history.at,
        values: history.values,
        tone: 'ink',
      },
      ...(history.imported.at.length > 0
        ? [
            {
              name: historyModel.imported,
              at: history.imported.at,
              values: history.imported.values,
              tone: 'slate',
              dashed: true,
            } satisfies ChartLine,
          ]
        : []),
      ...(overlay
        ? [
            {
              name: overlay.name,
              at: laidOver(history, overlay.history),
              values: overlay.history.values,
              tone: 'rust',
              dashed: true,
            } satisfies ChartLine,
          ]
        : []),
      ...siblingLinesOf(history, shown),
    ],
    band: history.expected.at.length
      ? {
          name: historyModel.expected,
          at: history.expected.at,
          low: history.expected.low,
          high: history.expected.high,
        }
      : undefined,
    spread: peaks
      ? { name: historyModel.lowestToHighest, at: history.at, low: history.low, high: history.high }
      : undefined,
    nights: history.nights,
    marks: [...history.marks, ...shown.notes],
    fromZero: true,
  };
}

/** The string less what is laid over it, where both tell within a step of each other. */
export function differenceChart(history: StringHistory, overlay: Overlay, subject: string): ChartModel {
  const over = { at: laidOver(history, overlay.history), values: overlay.history.values };
  const within = { minute: 600, quarter: 900, day: 43_200 }[history.resolution];
  return {
    title: historyModel.subjectLessOverlay(subject, overlay.name),
    unit: history.unit,
    digits: Math.max(1, LINE_DIGITS[history.unit] ?? 1),
    timeZone: history.timeZone,
    ...(history.range === 'day' ? daylight(history) : { from: history.from, to: history.to }),
    lines: [
      {
        name: historyModel.difference,
        at: history.at,
        values: history.at.map((at, i) => {
          const own = history.values[i] ?? null;
          const other = valueAt(over, at, within);
          return own === null || other === null ? null : own - other;
        }),
        tone: 'rust',
      },
    ],
    nights: history.nights,
    marks: [],
  };
}

const QUANTITY = {
  voltage: 'voltage',
  current: 'current',
  temperature: 'temperature',
  power: 'power',
} as const;
const DIGITS = { voltage: 1, current: 2, temperature: 0, power: 0 } as const;

const TONES = ['ink', 'petrol', 'plum', 'slate'] as const;

/**
 * Chosen units over time as a chart. Those in trouble have the colour of it; the others take turns of colour and stroke,
 * so that eight are told apart. A unit that came or went is marked: what was read before is another's.
 */
export function unitsChart(
  units: StringUnits,
  subject: string,
  tones: ReadonlyMap<number, 'rust' | 'crimson'>,
): ChartModel {
  const turns = new Map<string, number>();
  let others = 0;
  return {
    title: historyModel.ofSingleUnits(subject, QUANTITY[units.quantity], units.quantity, units.side),
    unit: units.unit,
    digits: DIGITS[units.quantity],
    timeZone: units.timeZone,
    ...(units.range === 'day' ? daylight(units) : { from: units.from, to: units.to }),
    lines: units.lines.map((line) => {
      const own = tones.get(line.position);
      const tone = own ?? TONES[others++ % TONES.length] ?? 'ink';
      const turn = turns.get(tone) ?? 0;
      turns.set(tone, turn + 1);
      return {
        name: historyModel.positionPosition(line.position),
        at: units.at,
        values: line.values,
        tone,
        turn,
      };
    }),
    nights: units.nights,
    marks: units.moves.map((m) => ({
      from: m.at,
      to: null,
      words:
        m.in === null
          ? historyModel.takenOutAt(m.out, m.position)
          : m.out === null
            ? historyModel.placedAt(m.in, m.position)
            : historyModel.inPlaceOfAt(m.in, m.out, m.position),
      tone: 'slate',
    })),
    fromZero: units.quantity !== 'temperature' && units.quantity !== 'voltage',
  };
}
