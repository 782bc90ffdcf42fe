import { isAscii, isUtf8 } from 'node:buffer';
import type { z } from 'zod';
import {
  CLOCK_AHEAD_MAX_S,
  framesEnvelope,
  loggerMessage,
  MESSAGE_MAX_BYTES,
  type LoggerMessage,
} from '../../schemas/ingest';
import { config } from '../config';
import { inputKey, type FrameRow, type RosterView } from '../queries/ingest-rows';
import type { Work } from './batch';
import { checkFrame, isFault, shown, type Fault } from './check';

/** From bytes to rows: each step gives what it read, or the fault with its field named. */

export interface Refused extends Fault {
  /** Of the message, where it was readable enough to find one. */
  seq: number | null;
}
export type Reading<T> = { ok: true; value: T } | { ok: false; refused: Refused };

const refuse = (seq: number | null, field: string, reason: string, again = false): Reading<never> => ({
  ok: false,
  refused: { seq, field, reason, again },
});

const seqOf = (value: unknown): number | null => {
  const seq = typeof value === 'object' && value !== null && 'seq' in value ? value.seq : null;
  return typeof seq === 'number' && Number.isInteger(seq) && seq >= 0 ? seq : null;
};

const pathOf = (path: readonly PropertyKey[]): string =>
  path.reduce<string>(
    (text, part) =>
      typeof part === 'number' ? `${text}[${part}]` : text ? `${text}.${String(part)}` : String(part),
    '',
  );

function firstIssue(error: z.ZodError): { field: string; reason: string } {
  const issue = error.issues[0];
  if (!issue) return { field: 'message', reason: 'is not what the protocol says' };
  if (issue.code === 'unrecognized_keys')
    return { field: pathOf([...issue.path, issue.keys[0] ?? '']), reason: 'is not known in this message' };
  return { field: pathOf(issue.path) || 'message', reason: issue.message };
}

/** One text frame as a JSON object. */
export function readJson(data: Buffer, isBinary: boolean): Reading<Record<string, unknown>> {
  if (data.length > MESSAGE_MAX_BYTES)
    return refuse(
      null,
      'message',
      `has ${data.length} bytes; the most is ${MESSAGE_MAX_BYTES}. Send less at once`,
    );
  if (isBinary) return refuse(null, 'message', 'is binary; send text frames of JSON');
  const ascii = isAscii(data);
  if (!ascii && !isUtf8(data)) return refuse(null, 'message', 'is not UTF-8 text');
  let value: unknown;
  try {
    value = JSON.parse(ascii ? data.toString('latin1') : data.toString('utf8'));
  } catch (error) {
    return refuse(null, 'message', `is not JSON: ${error instanceof Error ? error.message : 'not readable'}`);
  }
  if (typeof value !== 'object' || value === null || Array.isArray(value))
    return refuse(null, 'message', 'must be one JSON object');
  return { ok: true, value: value as Record<string, unknown> };
}

/** The envelope, by its schema; the arrays of frames are still unread. */
export function readEnvelope(value: Record<string, unknown>): Reading<LoggerMessage> {
  const seq = seqOf(value);
  const parsed = value.type === 'frames' ? framesEnvelope.safeParse(value) : loggerMessage.safeParse(value);
  if (parsed.success) return { ok: true, value: parsed.data as LoggerMessage };
  const { field, reason } = firstIssue(parsed.error);
  return refuse(
    seq,
    field,
    field === 'type' ? `${shown(value.type)} is no message of this protocol` : reason,
  );
}

type Counted = Exclude<LoggerMessage, { type: 'hello' }>;
type FramesOf = Extract<Counted, { type: 'frames' }>;
export interface Read {
  work: Work;
  readings: number;
  gateways: Map<number, number>;
}

/** Epoch seconds that are too far ahead of the server's clock, or too old to be kept. */
function badTime(at: number, nowS: number): string | null {
  if (at > nowS + CLOCK_AHEAD_MAX_S)
    return `is ${at - nowS} s ahead of the server's clock; set the logger's clock`;
  return null;
}
function tooOld(at: number, nowS: number): string | null {
  const days = config().RAW_KEPT_DAYS;
  return at < nowS - days * 86_400 ? `is older than the ${days} days that readings are kept` : null;
}

function heardBy(rows: readonly FrameRow[]): Map<number, number> {
  const gateways = new Map<number, number>();
  for (const { via, at } of rows)
    for (let i = 0; i < via.length; i++) {
      const number = via[i];
      if (number !== null && number !== undefined && (gateways.get(number) ?? 0) < at)
        gateways.set(number, at);
    }
  return gateways;
}

function readFrames(message: FramesOf, view: RosterView, nowS: number): Reading<Read> {
  const { seq, at, string, frames } = message;
  if (string.length !== at.length || frames.length !== at.length)
    return refuse(
      seq,
      'frames',
      `at has ${at.length}, string ${string.length} and frames ${frames.length} entries; they belong together`,
    );
  const rows: FrameRow[] = [];
  let readings = 0;
  for (let i = 0; i < at.length; i++) {
    const late = badTime(at[i]!, nowS);
    if (late) return refuse(seq, `at[${i}]`, late);
    const entry = view.strings.get(string[i]!);
    if (!entry)
      return refuse(seq, `string[${i}]`, `${string[i]} is no string of roster version ${view.version}`);
    const row = checkFrame(frames[i], entry, at[i]!, `frames[${i}]`);
    if (isFault(row)) return { ok: false, refused: { seq, ...row } };
    rows.push(row);
    readings += row.state.length;
  }
  return { ok: true, value: { work: { kind: 'frames', rows }, readings, gateways: heardBy(rows) } };
}

/** A message as rows to write, read by the roster `view` that it was written under. */
export function readMessage(
  message: Counted,
  view: RosterView,
  logger: { id: number; siteId: number },
  nowS: number,
): Reading<Read> {
  if (message.type === 'frames') return readFrames(message, view, nowS);
  const { seq } = message;
  const { siteId } = logger;
  const read = (work: Work, gateways = new Map<number, number>()): Reading<Read> => ({
    ok: true,
    value: { work, readings: work.rows.length, gateways },
  });
  if (message.type === 'command') {
    const { zone, transmitter } = message;
    const late = badTime(message.since, nowS);
    if (late) return refuse(seq, 'since', late);
    if ((zone === undefined) === (transmitter === undefined))
      return refuse(seq, 'zone', 'name either a zone or a transmitter, as in the roster');
    const zoneId = zone === undefined ? null : view.zones.get(zone);
    const transmitterId = transmitter === undefined ? null : view.transmitters.get(transmitter);
    if (zoneId === undefined) return refuse(seq, 'zone', `"${zone}" is no zone of the roster`);
    if (transmitterId === undefined)
      return refuse(seq, 'transmitter', `"${transmitter}" is no transmitter of the roster`);
    const { inForce, since, by } = message;
    return read({ kind: 'command', rows: [{ siteId, zoneId, transmitterId, inForce, since, by }] });
  }
  if (message.type === 'trace') {
    const entry = view.strings.get(message.string);
    if (!entry)
      return refuse(seq, 'string', `${message.string} is no string of roster version ${view.version}`);
    const late = badTime(message.startedAt, nowS);
    if (late) return refuse(seq, 'startedAt', late);
    const wrong = message.unitVoltage?.findIndex((u) => u.length !== entry.placed.length) ?? -1;
    if (wrong >= 0)
      return refuse(seq, `unitVoltage[${wrong}]`, `must have ${entry.placed.length} values, one a slot`);
    const { startedAt, measuringPoint, accuracy, voltage, unitVoltage } = message;
    return read({
      kind: 'trace',
      rows: [
        {
          siteId,
          stringId: entry.stringId,
          startedAt,
          measuringPoint,
          accuracy,
          voltage,
          unitVoltage: unitVoltage ?? null,
        },
      ],
    });
  }
  for (let i = 0; i < message.rows.length; i++) {
    const { at } = message.rows[i]!;
    const wrong = badTime(at, nowS) ?? (message.type === 'heard' ? null : tooOld(at, nowS));
    if (wrong) return refuse(seq, `rows[${i}].at`, wrong);
  }
  if (message.type === 'heard') {
    const gateways = new Map<number, number>();
    for (const r of message.rows) gateways.set(r.gateway, Math.max(r.at, gateways.get(r.gateway) ?? 0));
    return read(
      { kind: 'heard', rows: message.rows.map((r) => ({ ...r, siteId, loggerId: logger.id })) },
      gateways,
    );
  }
  return readRows(message, view, siteId);
}

function readRows(
  message: Extract<Counted, { type: 'inputs' | 'inverters' | 'weather' }>,
  view: RosterView,
  siteId: number,
): Reading<Read> {
  const { seq } = message;
  const none = (i: number, field: string, shown: string): Reading<never> =>
    refuse(seq, `rows[${i}].${field}`, `${shown} is not in the roster`);
  const read = (work: Work): Reading<Read> => ({
    ok: true,
    value: { work, readings: work.rows.length, gateways: new Map() },
  });
  if (message.type === 'inputs') {
    const rows = message.rows.map((r) => ({
      ...r,
      siteId,
      inputId: view.inputs.get(inputKey(r.inverter, r.input)) ?? 0,
    }));
    const i = rows.findIndex((r) => r.inputId === 0);
    if (i < 0) return read({ kind: 'inputs', rows });
    const { inverter, input } = message.rows[i]!;
    return view.inverters.has(inverter)
      ? none(i, 'input', `input ${input} of "${inverter}"`)
      : none(i, 'inverter', `"${inverter}"`);
  }
  if (message.type === 'inverters') {
    const rows = message.rows.map((r) => ({ ...r, siteId, inverterId: view.inverters.get(r.inverter) ?? 0 }));
    const i = rows.findIndex((r) => r.inverterId === 0);
    return i < 0 ? read({ kind: 'inverters', rows }) : none(i, 'inverter', `"${message.rows[i]!.inverter}"`);
  }
  const rows = message.rows.map((r) => ({ ...r, siteId, sensorId: view.sensors.get(r.sensor) ?? 0 }));
  const i = rows.findIndex((r) => r.sensorId === 0);
  return i < 0 ? read({ kind: 'weather', rows }) : none(i, 'sensor', `sensor ${message.rows[i]!.sensor}`);
}
