import type { ChartModel } from '../../components/charts/model';
import type { StringHistory, StringUnits } from '../../schemas/api/string';

const TITLE = {
  day: 'voltage over a day',
  week: 'voltage over a week',
  month: 'voltage over a month',
  year: 'voltage over a year',
} as const;

/** Puts the finer part into the whole, in place of what the whole says of that time. */
export function refined(whole: StringHistory, part: StringHistory | null): StringHistory {
  if (!part || part.resolution === whole.resolution || part.voltage.every((v) => v === null)) return whole;
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
    voltage: insert(pick(whole.voltage), part.voltage),
    low: insert(pick(whole.low), part.low),
    high: insert(pick(whole.high), part.high),
    energy: insert(pick(whole.energy), part.energy),
    expected: {
      ...whole.expected,
      at: eInsert(whole.expected.at.filter(outside), part.expected.at),
      low: eInsert(eOutside(whole.expected.low), part.expected.low),
      high: eInsert(eOutside(whole.expected.high), part.expected.high),
    },
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

/** A string's history as a chart. */
export function historyChart(history: StringHistory, subject: string): ChartModel {
  const coarse = history.resolution !== 'minute';
  return {
    title: `${subject}: ${TITLE[history.range]}`,
    unit: 'V',
    digits: 0,
    timeZone: history.timeZone,
    ...(history.range === 'day' ? daylight(history) : { from: history.from, to: history.to }),
    lines: [
      { name: coarse ? 'Mean voltage' : 'Voltage', at: history.at, values: history.voltage, tone: 'ink' },
    ],
    band: history.expected.at.length
      ? { name: 'Expected', at: history.expected.at, low: history.expected.low, high: history.expected.high }
      : undefined,
    spread: coarse
      ? { name: 'Lowest to highest', at: history.at, low: history.low, high: history.high }
      : undefined,
    nights: history.nights,
    marks: history.marks,
    fromZero: true,
  };
}

const QUANTITY = {
  voltage: 'voltage',
  current: 'current',
  temperature: 'temperature',
  power: 'power',
} as const;
const DIGITS = { voltage: 1, current: 2, temperature: 0, power: 0 } as const;

/** Units over a day as a chart: those chosen stand out, in the colour of their trouble if they have one. */
export function unitsChart(
  units: StringUnits,
  subject: string,
  chosen: ReadonlySet<number>,
  tones: ReadonlyMap<number, 'rust' | 'crimson'>,
): ChartModel {
  return {
    title: `${subject}: ${QUANTITY[units.quantity]} of single units${units.quantity === 'voltage' && units.side === 'module' ? ', module side' : ''}`,
    unit: units.unit,
    digits: DIGITS[units.quantity],
    timeZone: units.timeZone,
    ...daylight(units),
    lines: units.lines.map((line) => ({
      name: `Position ${line.position}`,
      at: units.at,
      values: line.values,
      tone: chosen.has(line.position) ? (tones.get(line.position) ?? 'ink') : 'petrol',
      quiet: !chosen.has(line.position),
    })),
    nights: units.nights,
    marks: [],
    fromZero: units.quantity !== 'temperature' && units.quantity !== 'voltage',
  };
}
