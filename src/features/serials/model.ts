import { readSerial } from '../../domain/commissioning/import/serial';
import type { AsBuilt, PlacementsBody } from '../../schemas/api/as-built';
import { serialsModel } from '../../words/serials';

/** Strings as they are walked, and what of a walk has not reached the server yet. */

export interface WalkSlot {
  position: number;
  serial: string | null;
  roofPlace: string;
}
export interface WalkString {
  id: string;
  name: string;
  unitType: string;
  slots: WalkSlot[];
}

/** A serial that was read, until the server has it. */
export interface Entry {
  key: string;
  string: string;
  position: number;
  serial: string | null;
  /** What the person saw in the slot. Absent: put in whatever is there. */
  expected?: string | null;
  move: boolean;
  /** Another slot that changes with it: where a unit goes back to that was taken from there. */
  also?: { string: string; position: number; serial: string };
  reason: string;
  /** When it was read, ISO 8601. */
  at: string;
  /** What the server had against it. */
  clash: { kind: 'slot' | 'serial' | 'other'; message: string } | null;
}

export const walkStrings = (built: AsBuilt): WalkString[] => {
  const types = new Map(built.catalogue.unitTypes.map((t) => [t.id, t.name]));
  const compare = new Intl.Collator('en', { numeric: true });
  return built.strings
    .map((s) => ({
      id: s.id,
      name: s.name,
      unitType: types.get(s.unitType) ?? '',
      slots: s.slots.map(({ position, serial, roofPlace }) => ({ position, serial, roofPlace })),
    }))
    .sort((a, b) => compare.compare(a.name, b.name));
};

/** The strings with what waits to be sent already in them: a reload forgets nothing. */
export function withEntries(strings: readonly WalkString[], entries: readonly Entry[]): WalkString[] {
  if (entries.length === 0) return [...strings];
  const waiting = entries.filter((e) => !e.clash);
  return strings.map((s) => {
    const own = waiting.flatMap((e) => (e.also ? [e, e.also] : [e])).filter((e) => e.string === s.id);
    // a unit that is put in somewhere has left where it was
    const moved = new Set(waiting.flatMap((e) => (e.move && e.serial !== null ? [e.serial] : [])));
    if (own.length === 0 && moved.size === 0) return s;
    return {
      ...s,
      slots: s.slots.map((slot) => {
        const last = own.findLast((e) => e.position === slot.position);
        if (last) return { ...slot, serial: last.serial };
        return slot.serial !== null && moved.has(slot.serial) ? { ...slot, serial: null } : slot;
      }),
    };
  });
}

/** Where a serial sits on this site, besides the slot given. */
export function placeOf(
  strings: readonly WalkString[],
  serial: string,
  except?: { string: string; position: number },
): { string: WalkString; position: number } | null {
  for (const string of strings)
    for (const slot of string.slots)
      if (slot.serial === serial && !(except?.string === string.id && except.position === slot.position))
        return { string, position: slot.position };
  return null;
}

/** The next position without a serial after this one, from the start again at the end; null: all have one. */
export function nextGap(string: WalkString, after: number): number | null {
  const empty = string.slots.filter((s) => s.serial === null);
  return (empty.find((s) => s.position > after) ?? empty[0])?.position ?? null;
}

/** The next string with a gap after this one, in the order of the names; null: none has. */
export function nextString(strings: readonly WalkString[], id: string): WalkString | null {
  const at = strings.findIndex((s) => s.id === id);
  const order = [...strings.slice(at + 1), ...strings.slice(0, at)];
  return order.find((s) => s.slots.some((slot) => slot.serial === null)) ?? null;
}

export type Judged =
  | { kind: 'keep'; serial: string }
  | { kind: 'same' }
  /** What was typed is no serial. */
  | { kind: 'fault'; message: string; remedy: string; suggestion: string | null }
  /** It sits elsewhere on this site. */
  | { kind: 'elsewhere'; serial: string; place: string }
  /** Another unit sits in this slot: a person says why it goes. */
  | { kind: 'occupied'; serial: string; now: string };

/** What a serial read for a slot means, before anybody is asked. */
export function judge(
  strings: readonly WalkString[],
  string: WalkString,
  position: number,
  text: string,
): Judged {
  const read = readSerial(text);
  if (read.kind === 'empty')
    return {
      kind: 'fault',
      message: serialsModel.nothingIsTyped,
      remedy: serialsModel.typeTheSerialOr,
      suggestion: null,
    };
  if (read.kind === 'fault') return read;
  const { serial } = read;
  const now = string.slots.find((s) => s.position === position)?.serial ?? null;
  if (now === serial) return { kind: 'same' };
  const other = placeOf(strings, serial, { string: string.id, position });
  if (other)
    return {
      kind: 'elsewhere',
      serial,
      place: serialsModel.whichPosition(other.string.name, other.position),
    };
  if (now !== null) return { kind: 'occupied', serial, now };
  return { kind: 'keep', serial };
}

export const requestOf = (entry: Entry): PlacementsBody => ({
  changes: [
    {
      slot: { string: entry.string, position: entry.position },
      serial: entry.serial,
      ...(entry.expected === undefined ? {} : { expected: entry.expected }),
    },
    ...(entry.also
      ? [
          {
            slot: { string: entry.also.string, position: entry.also.position },
            serial: entry.also.serial,
          },
        ]
      : []),
  ],
  move: entry.move,
  reason: entry.reason,
  source: 'on_site',
  at: entry.at,
});

/** Entries as a phone kept them; what is not readable any more is nothing. */
export function readKept(text: string | null): Entry[] {
  if (text === null) return [];
  try {
    const list: unknown = JSON.parse(text);
    return Array.isArray(list) ? list.filter(isEntry) : [];
  } catch {
    return []; // written by somebody else under our name
  }
}
const isEntry = (e: unknown): e is Entry =>
  typeof e === 'object' &&
  e !== null &&
  'key' in e &&
  'string' in e &&
  'position' in e &&
  'serial' in e &&
  'at' in e &&
  'reason' in e &&
  'move' in e;

const ORDINALS = ['none', 'one', 'two', 'three'];
/** How far a string is, as a heading. */
export function progressWords(string: WalkString): string {
  const left = string.slots.filter((s) => s.serial === null).length;
  const of = string.slots.length;
  if (left === 0) return serialsModel.everySerialOf(of, string.name);
  if (left === of)
    return of === 1 ? serialsModel.theOneSerialOf(string.name) : serialsModel.serialsStillOf(of, string.name);
  return serialsModel.ofReadToGo(of, left, ORDINALS[left]);
}
