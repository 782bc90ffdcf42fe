import { FRAME_RANGES, type FrameField } from '../../schemas/ingest';
import type { FrameRow, RosterEntry } from '../queries/ingest-rows';

/** What is wrong with a message, where, and whether sending it again can help. */
export interface Fault {
  field: string;
  reason: string;
  again: boolean;
}

type Values = (number | null)[];
const FIELDS = Object.keys(FRAME_RANGES) as FrameField[];
const ALWAYS = ['current', 'temperature', 'signal', 'via', 'state'] as const;

const fault = (field: string, reason: string): Fault => ({ field, reason, again: false });

/** What was sent, short enough for a refusal to name it. What has parts is only named: it may be of any depth. */
export function shown(value: unknown): string {
  if (typeof value === 'object' && value !== null) return Array.isArray(value) ? 'an array' : 'an object';
  const text = typeof value === 'string' ? JSON.stringify(value.slice(0, 60)) : String(value);
  return text.length > 40 ? `${text.slice(0, 37)}…` : text;
}

/** The index of the first value that is neither null nor an integer in the range; −1 where all are. */
function firstBad(values: readonly unknown[], low: number, high: number): number {
  for (let i = 0; i < values.length; i++) {
    const value = values[i];
    if (value === null) continue;
    if (typeof value !== 'number' || (value | 0) !== value || value < low || value > high) return i;
  }
  return -1;
}

function checkArray(given: unknown, field: FrameField, slots: number, path: string): Fault | null {
  const name = `${path}.${field}`;
  if (!Array.isArray(given)) return fault(name, `must be an array of ${slots} values, one a slot`);
  if (given.length !== slots)
    return fault(name, `has ${given.length} values; the roster's string has ${slots} slots`);
  const [low, high] = FRAME_RANGES[field];
  const bad = firstBad(given, low, high);
  if (bad < 0) return null;
  return fault(
    `${name}[${bad}]`,
    `is ${shown(given[bad])}; give a whole number from ${low} to ${high}, or null`,
  );
}

/** The slot where an array says something of a unit that `state` says was not heard, or that isn't there; −1: none. */
function strayValue(values: Values, state: Values): number {
  for (let i = 0; i < values.length; i++) if (values[i] !== null && state[i] === null) return i;
  return -1;
}

function requiredFields(entry: RosterEntry): FrameField[] {
  const required: FrameField[] = [...ALWAYS];
  if (entry.measures === 'output' || entry.measures === 'both') required.push('voltageOut');
  if (entry.measures === 'input' || entry.measures === 'both') required.push('voltageIn');
  return required;
}

const requiredOf = new WeakMap<RosterEntry, FrameField[]>();

/**
 * Checks one frame of a message against the roster's string. A tight loop: a message has thousands of values.
 * Returns the row to write, or the first fault with the field named.
 */
export function checkFrame(frame: unknown, entry: RosterEntry, at: number, path: string): FrameRow | Fault {
  if (entry.kind === 'shutdown_only')
    return fault(path, `string ${entry.name} is shutdown-only: its units report nothing`);
  if (typeof frame !== 'object' || frame === null || Array.isArray(frame))
    return fault(path, 'must be an object of arrays');
  const given = frame as Partial<Record<FrameField, Values>>;
  const slots = entry.placed.length;
  let required = requiredOf.get(entry);
  if (!required) requiredOf.set(entry, (required = requiredFields(entry)));
  for (const field of required)
    if (given[field] === undefined)
      return fault(`${path}.${field}`, `is missing; ${entry.kind} units report it`);
  for (const key in given)
    if (!(key in FRAME_RANGES))
      return fault(`${path}.${key}`, `is not known; a frame has ${FIELDS.join(', ')}`);
  const { state } = given as { state: Values };
  const badState = checkArray(state, 'state', slots, path);
  if (badState) return badState;
  for (let i = 0; i < slots; i++)
    if (state[i] !== null && !entry.placed[i])
      return fault(`${path}.state[${i}]`, `reports a unit, and the roster has none at position ${i + 1}`);
  for (const field of FIELDS) {
    const values = given[field];
    if (values === undefined || field === 'state') continue;
    const bad = checkArray(values, field, slots, path);
    if (bad) return bad;
    const stray = strayValue(values, state);
    if (stray >= 0)
      return fault(
        `${path}.${field}[${stray}]`,
        `has a value while state[${stray}] says that the unit was not heard`,
      );
  }
  const row = given as Record<(typeof ALWAYS)[number], Values>;
  return {
    stringId: entry.stringId,
    siteId: entry.siteId,
    at,
    voltage: given.voltageOut ?? new Array<null>(slots).fill(null),
    voltageIn: given.voltageIn ?? null,
    current: row.current,
    power: given.powerOut ?? null,
    temperature: row.temperature,
    signal: row.signal,
    via: row.via,
    state,
  };
}

export const isFault = (value: FrameRow | Fault): value is Fault => 'again' in value;
