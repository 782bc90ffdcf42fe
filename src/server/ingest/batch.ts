import type { HeardRow } from '../queries/ingest-heard';
import type { CommandRow, InputRow, InverterRow, TraceRow, WeatherRow } from '../queries/ingest-reports';
import type { FrameRow } from '../queries/ingest-rows';

/** A message that was checked and waits to be written. */
export type Work =
  | { kind: 'frames'; rows: FrameRow[] }
  | { kind: 'inputs'; rows: InputRow[] }
  | { kind: 'inverters'; rows: InverterRow[] }
  | { kind: 'weather'; rows: WeatherRow[] }
  | { kind: 'heard'; rows: HeardRow[] }
  | { kind: 'command'; rows: [CommandRow] }
  | { kind: 'trace'; rows: [TraceRow] };

export interface Item {
  work: Work;
  /** What it weighs in the queue: readings. */
  readings: number;
  siteId: number;
  loggerId: number;
  /** Gateway numbers that it was heard by, each with its newest time (epoch s). */
  gateways: ReadonlyMap<number, number>;
  /** Frames of it that are in batches already. */
  taken: number;
  /** When it joined the queue, ms of the process's clock. */
  addedAtMs?: number;
  /** Why a part of it can never be written; null: nothing stands against it. */
  fault: string | null;
  /** Called once, after COMMIT. */
  written: () => void;
  /** Called once, when it can never be written. */
  refused: (reason: string) => void;
}

export interface Batch {
  frames: FrameRow[];
  inputs: InputRow[];
  inverters: InverterRow[];
  weather: WeatherRow[];
  heard: HeardRow[];
  commands: CommandRow[];
  traces: TraceRow[];
  /** Items that are durable once this batch is. */
  finished: Item[];
  gateways: { siteId: number; loggerId: number; number: number; heardAt: number }[];
}

export const FRAMES_A_BATCH = 1500;
export const ROWS_A_BATCH = 5000;

const complete = (row: FrameRow): boolean => !row.state.includes(null);

const merge = (into: (number | null)[], from: readonly (number | null)[]): void => {
  for (let i = 0; i < into.length; i++) into[i] ??= from[i] ?? null;
};

/** The same string and instant twice: what the first one did not know comes from the second. */
function mergeFrame(into: FrameRow, from: FrameRow): void {
  merge(into.voltage, from.voltage);
  merge(into.current, from.current);
  merge(into.temperature, from.temperature);
  merge(into.signal, from.signal);
  merge(into.via, from.via);
  merge(into.state, from.state);
  if (into.voltageIn && from.voltageIn) merge(into.voltageIn, from.voltageIn);
  else into.voltageIn ??= from.voltageIn;
  if (into.power && from.power) merge(into.power, from.power);
  else into.power ??= from.power;
}

/** A batch in the making. Frames keep their order; an incomplete frame never shares it with another of its string. */
class Frames {
  readonly rows: FrameRow[] = [];
  private readonly byInstant = new Map<string, FrameRow>();
  private readonly strings = new Map<number, boolean>(); // whether all of its frames here are complete

  /** False: it must wait for the next batch. */
  take(row: FrameRow): boolean {
    const key = `${row.stringId} ${row.at}`;
    const same = this.byInstant.get(key);
    const full = complete(row);
    const known = this.strings.get(row.stringId);
    if (same) {
      if (!complete(same)) mergeFrame(same, row);
      // alone in the batch or complete: merging changes neither
      return true;
    }
    if (this.rows.length >= FRAMES_A_BATCH || (known !== undefined && !(known && full))) return false;
    this.byInstant.set(key, row);
    this.strings.set(row.stringId, full);
    this.rows.push(row);
    return true;
  }
}

/** Takes as many items from the front of the queue as make one batch; the queue keeps the rest. */
export function takeBatch(queue: Item[]): Batch {
  const frames = new Frames();
  const batch: Batch = {
    frames: frames.rows,
    inputs: [],
    inverters: [],
    weather: [],
    heard: [],
    commands: [],
    traces: [],
    finished: [],
    gateways: [],
  };
  let rows = 0;
  let used = 0;
  for (; used < queue.length && rows < ROWS_A_BATCH; used++) {
    const item = queue[used]!;
    const { work } = item;
    if (work.kind === 'frames') {
      while (item.taken < work.rows.length && frames.take(work.rows[item.taken]!)) item.taken++;
      if (item.taken < work.rows.length) break;
    } else {
      rows += work.rows.length;
      addReports(batch, work);
    }
    for (const [number, heardAt] of item.gateways)
      batch.gateways.push({ siteId: item.siteId, loggerId: item.loggerId, number, heardAt });
    batch.finished.push(item);
  }
  queue.splice(0, used);
  return batch;
}

function addReports(batch: Batch, work: Exclude<Work, { kind: 'frames' }>): void {
  if (work.kind === 'inputs') batch.inputs.push(...work.rows);
  else if (work.kind === 'inverters') batch.inverters.push(...work.rows);
  else if (work.kind === 'weather') batch.weather.push(...work.rows);
  else if (work.kind === 'heard') batch.heard.push(...work.rows);
  else if (work.kind === 'command') batch.commands.push(...work.rows);
  else batch.traces.push(...work.rows);
}
