import { CLAIMS } from '../../domain/verdicts/codes';
import {
  dayRecord,
  daysQuery,
  frameRecord,
  framesQuery,
  quarterRecord,
  quartersQuery,
  type DayRecord,
  type FrameRecord,
  type QuarterRecord,
  type UnitFrameRecord,
} from '../../schemas/api/v1/telemetry';
import { asActor, type Tx } from '../db/transaction';
import { found } from '../errors';
import { asOnlooker, piecesAsOnlooker } from '../replica';
import {
  daysInPieces,
  framesInPieces,
  keptSpan,
  quartersInPieces,
  stringsToStream,
  type FrameRow,
  type StreamString,
} from '../queries/v1-telemetry';
import { streaming, type RecordStream, type StreamColumn, type V1Call } from './operation';

/**
 * Readings of any span. A stream reads window after window, each in a transaction of its own with a cursor, and no
 * further than its reader has taken: memory stays flat, and nothing of the database is held between windows.
 */
const WINDOW_ROWS = 50_000;
const HOUR_MS = 3_600_000;
const DAY_MS = 86_400_000;

/** So long is a window that reads some fifty thousand rows. @param rowsPerHour of all strings together */
export const windowMs = (rowsPerHour: number, longestMs: number): number =>
  Math.max(HOUR_MS, Math.min(longestMs, Math.floor(WINDOW_ROWS / Math.max(1, rowsPerHour)) * HOUR_MS));

/** A span cut into windows that begin at whole multiples of their length. */
export function* windows(from: Date, to: Date, lengthMs: number): Generator<{ from: Date; to: Date }> {
  let start = from.getTime();
  while (start < to.getTime()) {
    const end = Math.min(to.getTime(), (Math.floor(start / lengthMs) + 1) * lengthMs);
    yield { from: new Date(start), to: new Date(end) };
    start = end;
  }
}

interface Streamed {
  site: string;
  strings: StreamString[];
}
const streamed = (call: V1Call, query: { site?: string; string?: string }): Promise<Streamed> =>
  asActor(call.actor, async (tx) =>
    found(await stringsToStream(tx, query), query.string ? 'string' : 'site'),
  );

/** Rows of the windows between two instants, clipped to what is kept. */
async function* ofSpan<Row>(
  call: V1Call,
  span: { from: string; to: string; kept: 'string_frame' | 'string_quarter'; lengthMs: number },
  read: (tx: Tx, window: { from: Date; to: Date }) => AsyncGenerator<Row[], void, void>,
): AsyncGenerator<Row[], void, void> {
  const kept = await asOnlooker(call.actor, (tx) => keptSpan(tx, span.kept));
  if (!kept) return;
  const from = new Date(Math.max(Date.parse(span.from), kept.from.getTime()));
  const to = new Date(Math.min(Date.parse(span.to), kept.to.getTime()));
  for (const window of windows(from, to, span.lengthMs)) {
    yield []; // who reads may have left, or lost the right to
    yield* piecesAsOnlooker(call.actor, (tx) => read(tx, window));
  }
}

async function* mapped<Row, Out>(
  pieces: AsyncGenerator<Row[], void, void>,
  of: (row: Row) => Out[],
): AsyncGenerator<Out[], void, void> {
  for await (const piece of pieces) yield piece.flatMap(of);
}

const scaled = (values: readonly (number | null)[], by: number): (number | null)[] =>
  values.map((v) => (v === null ? null : v / by));

type Named = ReadonlyMap<number, StreamString>;
const namesOf = (strings: readonly StreamString[]): Named => new Map(strings.map((s) => [s.number, s]));
const headOf = (names: Named, row: { number: number; at: Date }) => ({
  at: row.at.toISOString(),
  stringId: names.get(row.number)?.id ?? '',
  string: names.get(row.number)?.name ?? '',
});

/** A report of a string as it goes out, in SI units. */
export const frameOf = (names: Named, row: FrameRow): FrameRecord => ({
  ...headOf(names, row),
  voltage: row.voltageSum / 100,
  power: row.powerSum / 10,
  units: {
    voltage: scaled(row.voltage, 100),
    voltageIn: row.voltageIn && scaled(row.voltageIn, 100),
    current: scaled(row.current, 1000),
    power: row.power && scaled(row.power, 10),
    temperature: scaled(row.temperature, 10),
    signal: [...row.signal],
    claim: row.state.map((s) => (s === null ? null : (CLAIMS[s] ?? 'unknown'))),
  },
});

/** The same as one record a unit that reported. */
export function unitFramesOf(names: Named, row: FrameRow): UnitFrameRecord[] {
  const { units, at, stringId, string } = frameOf(names, row);
  return units.claim.flatMap((claim, i): UnitFrameRecord[] => {
    const record = {
      at,
      stringId,
      string,
      position: i + 1,
      voltage: units.voltage[i] ?? null,
      voltageIn: units.voltageIn?.[i] ?? null,
      current: units.current[i] ?? null,
      power: units.power?.[i] ?? null,
      temperature: units.temperature[i] ?? null,
      signal: units.signal[i] ?? null,
      claim,
    };
    return claim === null && record.voltage === null && record.voltageIn === null ? [] : [record];
  });
}

const column = <R>(header: string, value: (record: R) => string | number | null): StreamColumn => ({
  header,
  value,
});
const HEAD = [
  column<{ at: string }>('time (UTC)', (r) => r.at),
  column<{ stringId: string }>('string id', (r) => r.stringId),
  column<{ string: string }>('string', (r) => r.string),
];
const FRAME_COLUMNS = [
  ...HEAD,
  column<FrameRecord>('voltage (V)', (r) => r.voltage),
  column<FrameRecord>('power (W)', (r) => r.power),
  column<FrameRecord>('units reporting', (r) => r.units.claim.filter((c) => c !== null).length),
];
const UNIT_COLUMNS = [
  ...HEAD,
  column<UnitFrameRecord>('position', (r) => r.position),
  column<UnitFrameRecord>('voltage (V)', (r) => r.voltage),
  column<UnitFrameRecord>('module side (V)', (r) => r.voltageIn),
  column<UnitFrameRecord>('current (A)', (r) => r.current),
  column<UnitFrameRecord>('power (W)', (r) => r.power),
  column<UnitFrameRecord>('temperature (°C)', (r) => r.temperature),
  column<UnitFrameRecord>('signal (dBm)', (r) => r.signal),
  column<UnitFrameRecord>('claim', (r) => r.claim),
];
const QUARTER_COLUMNS = [
  ...HEAD,
  column<QuarterRecord>('reports', (r) => r.frames),
  column<QuarterRecord>('voltage, mean (V)', (r) => r.voltage),
  column<QuarterRecord>('voltage, lowest (V)', (r) => r.voltageMin),
  column<QuarterRecord>('voltage, highest (V)', (r) => r.voltageMax),
  column<QuarterRecord>('energy (Wh)', (r) => r.energy),
];
const DAY_COLUMNS = [
  column<DayRecord>('day', (r) => r.day),
  ...HEAD.slice(1),
  column<DayRecord>('reports', (r) => r.frames),
  column<DayRecord>('voltage, mean (V)', (r) => r.voltage),
  column<DayRecord>('voltage, highest (V)', (r) => r.voltageMax),
  column<DayRecord>('energy (Wh)', (r) => r.energy),
];

const common = {
  group: 'Readings',
  scope: 'telemetry:read',
  permission: 'telemetry.export',
} as const;
const STREAMED =
  'A stream of any length: one record a line, NDJSON or CSV. An answer that breaks off before its end was not complete; go on from its last record.';

export const streamFrames = streaming({
  ...common,
  id: 'streamFrames',
  path: '/telemetry/frames',
  summary: 'Reports as they came, minute by minute',
  description: `By time, then string. ${STREAMED} Raw reports are kept for a limited time.`,
  query: framesQuery,
  record: frameRecord,
  example: { query: { string: '$string', from: '$from', to: '$to', by: 'unit', format: 'csv' } },
  open: async (call): Promise<RecordStream> => {
    const { query } = call;
    const { site, strings } = await streamed(call, query);
    const names = namesOf(strings);
    const ids = strings.map((s) => s.number);
    const frames = ofSpan(
      call,
      { ...query, kept: 'string_frame', lengthMs: windowMs(ids.length * 60, DAY_MS) },
      (tx, window) => framesInPieces(tx, { stringIds: ids, ...window }),
    );
    const byUnit = query.by === 'unit';
    return {
      format: query.format,
      name: `${site} reports`,
      columns: byUnit ? UNIT_COLUMNS : FRAME_COLUMNS,
      pieces: byUnit
        ? mapped(frames, (row) => unitFramesOf(names, row))
        : mapped(frames, (row) => [frameOf(names, row)]),
    };
  },
});

export const streamQuarters = streaming({
  ...common,
  id: 'streamQuarters',
  path: '/telemetry/quarters',
  summary: 'Quarters of an hour',
  description: `\`at\` is the beginning of the quarter; by time, then string. ${STREAMED}`,
  query: quartersQuery,
  record: quarterRecord,
  example: { query: { site: '$site', from: '$from', to: '$to' } },
  open: async (call): Promise<RecordStream> => {
    const { query } = call;
    const { site, strings } = await streamed(call, query);
    const names = namesOf(strings);
    const ids = strings.map((s) => s.number);
    const quarters = ofSpan(
      call,
      { ...query, kept: 'string_quarter', lengthMs: windowMs(ids.length * 4, 31 * DAY_MS) },
      (tx, window) => quartersInPieces(tx, { stringIds: ids, ...window }),
    );
    return {
      format: query.format,
      name: `${site} quarters`,
      columns: QUARTER_COLUMNS,
      pieces: mapped(quarters, (row): QuarterRecord[] => [
        {
          ...headOf(names, row),
          frames: row.frames,
          voltage: row.voltageAvg / 100,
          voltageMin: row.voltageMin / 100,
          voltageMax: row.voltageMax / 100,
          energy: Math.round(row.energy / 6) / 100,
        },
      ]),
    };
  },
});

export const streamDays = streaming({
  ...common,
  id: 'streamDays',
  path: '/telemetry/days',
  summary: 'Days of each string',
  description: `Days are the site’s own; by day, then string. ${STREAMED}`,
  query: daysQuery,
  record: dayRecord,
  example: { query: { site: '$site', from: '$fromDay', to: '$toDay', format: 'csv' } },
  open: async (call): Promise<RecordStream> => {
    const { query } = call;
    const { site, strings } = await streamed(call, query);
    const names = namesOf(strings);
    const days = piecesAsOnlooker(call.actor, (tx) =>
      daysInPieces(tx, { stringIds: strings.map((s) => s.number), from: query.from, to: query.to }),
    );
    return {
      format: query.format,
      name: `${site} days`,
      columns: DAY_COLUMNS,
      pieces: mapped(days, (row): DayRecord[] => [
        {
          day: row.day,
          stringId: names.get(row.number)?.id ?? '',
          string: names.get(row.number)?.name ?? '',
          frames: row.frames,
          voltage: row.voltageAvg / 100,
          voltageMax: row.voltageMax / 100,
          energy: row.energy,
        },
      ]),
    };
  },
});
