import { placementFaultSaid, unitPlaceSaid } from '../../../words/domain-as-built-faults';
import { readSerial } from '../import/serial';

/** Which units go into which slots: what a batch of changes means, and what is wrong with it. Pure. */

export interface PlaceChange {
  /** The string by its public identifier, and the position in it. */
  slot: { string: string; position: number };
  /** null: the slot becomes empty. */
  serial: string | null;
  /** The serial that the editor saw in the slot (null: none); absent: whatever it is. */
  expected?: string | null | undefined;
}

/** A slot that a batch names, as it stands now. */
export interface StandingSlot {
  slotId: number;
  stringId: number;
  stringName: string;
  position: number;
  unitTypeId: number;
  unitTypeName: string;
  unit: { placementId: number; unitId: number; serial: string } | null;
  /** Since when it is as it is, epoch ms; 0: since ever. */
  sinceMs: number;
}

/** A unit that a batch names and that the organisation has on record. */
export interface KnownUnit {
  unitId: number;
  serial: string;
  unitTypeId: number;
  unitTypeName: string;
  /** Where it sits now; `slotId` null: at a site that the actor may not see. */
  sits: {
    placementId: number;
    slotId: number | null;
    siteId: number | null;
    siteName: string | null;
    stringId: number | null;
    stringName: string | null;
    position: number | null;
  } | null;
  /** Since when it sits there or nowhere, epoch ms; 0: since ever. */
  sinceMs: number;
}

export type PlaceFaultKind = 'pattern' | 'duplicate' | 'elsewhere' | 'foreign_type' | 'no_slot' | 'stale';
export interface PlaceFault {
  /** Of the change, in the order given. */
  index: number;
  field: 'serial' | 'slot';
  kind: PlaceFaultKind;
  message: string;
  /** The slot in words, where it is one. */
  slot?: string;
}

export interface PlannedMove {
  index: number;
  kind: 'placed' | 'removed' | 'replaced' | 'moved';
  slot: StandingSlot;
  /** What the slot had and gets. */
  before: string | null;
  after: string | null;
  /** Where the unit that comes in sat, in words; null: nowhere. */
  from: string | null;
}

/** A unit taken out of a slot that the batch does not name, because it goes into one that it does. */
export interface Vacated {
  serial: string;
  siteId: number;
  stringId: number;
  place: string;
}

export interface PlacementPlan {
  faults: PlaceFault[];
  /** Placements that end. */
  closes: number[];
  /** Slots that get a unit. */
  opens: { slotId: number; serial: string; unitTypeId: number }[];
  moves: PlannedMove[];
  vacated: Vacated[];
  /** Units whose type on record becomes the string's. */
  retyped: { unitId: number; unitTypeId: number }[];
  /** Units that sit in no slot of this site any more. */
  gone: string[];
  unchanged: number;
  /** The instant for all of it, epoch ms: the one given, or just after the newest change where they fell together. */
  atMs: number;
}

/** Two edits within this time are one after the other, whichever clock was ahead, ms. */
const TOGETHER_MS = 2000;

export const slotKey = (string: string, position: number): string => `${string} ${position}`;
export const slotName = (stringName: string, position: number): string => `${stringName}-${position}`;

/**
 * Reads a batch against what stands. All or nothing: where there are faults, nothing of the plan may be written.
 *
 * @param atMs when the change was made on the roof, epoch ms
 */
export function planPlacements(input: {
  siteId: number;
  changes: readonly PlaceChange[];
  /** By slotKey. */
  slots: ReadonlyMap<string, StandingSlot>;
  /** By serial. */
  units: ReadonlyMap<string, KnownUnit>;
  atMs: number;
  /** Units may be taken from where they sit. */
  move: boolean;
  /** Units may change their type on record. */
  retype: boolean;
}): PlacementPlan {
  const { siteId, changes, slots, units, move, retype } = input;
  const plan: PlacementPlan = {
    faults: [],
    closes: [],
    opens: [],
    moves: [],
    vacated: [],
    retyped: [],
    gone: [],
    unchanged: 0,
    atMs: input.atMs,
  };
  const fault: Tell = (index, field, kind, message, slot) => {
    plan.faults.push({ index, field, kind, message, ...(slot === undefined ? {} : { slot }) });
  };

  const wanted = readChanges(changes, slots, fault);
  const bySlot = new Map(wanted.map((w) => [w.slot.slotId, w]));
  const newest = { ms: 0 };
  const notBefore = (index: number, sinceMs: number, what: string): void => {
    if (input.atMs <= sinceMs - TOGETHER_MS)
      fault(index, 'slot', 'stale', placementFaultSaid.changedSince(what), what);
    newest.ms = Math.max(newest.ms, sinceMs);
  };

  for (const { index, slot, serial, expected } of wanted) {
    const had = slot.unit?.serial ?? null;
    const name = slotName(slot.stringName, slot.position);
    if (expected !== undefined && expected !== had && serial !== had) {
      fault(index, 'slot', 'stale', placementFaultSaid.otherThanSeen(name, had, expected), name);
      continue;
    }
    if (serial === had) {
      plan.unchanged++;
      continue;
    }
    notBefore(index, slot.sinceMs, name);
    const unit = serial === null ? undefined : units.get(serial);
    const from = unit?.sits ?? null;
    if (serial !== null && unit) {
      if (unit.unitTypeId !== slot.unitTypeId) {
        if (retype) plan.retyped.push({ unitId: unit.unitId, unitTypeId: slot.unitTypeId });
        else
          fault(
            index,
            'serial',
            'foreign_type',
            placementFaultSaid.foreignType(serial, unit.unitTypeName, slot.stringName, slot.unitTypeName),
          );
      }
      notBefore(index, unit.sinceMs, serial);
      if (from) {
        const there = from.slotId === null ? undefined : bySlot.get(from.slotId);
        if (!there) {
          if (!move || from.slotId === null) {
            const told =
              from.slotId === null ? placementFaultSaid.elsewhereUnseen : placementFaultSaid.elsewhere;
            fault(index, 'serial', 'elsewhere', told(serial, placeOf(from, siteId)));
            continue;
          }
          plan.closes.push(from.placementId);
          if (from.siteId !== null && from.stringId !== null)
            plan.vacated.push({
              serial,
              siteId: from.siteId,
              stringId: from.stringId,
              place: slotName(from.stringName ?? '', from.position ?? 0),
            });
        }
      }
    }
    if (slot.unit) plan.closes.push(slot.unit.placementId);
    if (serial !== null) plan.opens.push({ slotId: slot.slotId, serial, unitTypeId: slot.unitTypeId });
    plan.moves.push({
      index,
      kind: serial === null ? 'removed' : from ? 'moved' : had === null ? 'placed' : 'replaced',
      slot,
      before: had,
      after: serial,
      from:
        from &&
        (from.siteId === siteId
          ? slotName(from.stringName ?? '', from.position ?? 0)
          : placeOf(from, siteId)),
    });
  }
  const here = new Set(plan.opens.map((o) => o.serial));
  plan.gone = plan.moves.flatMap((m) => (m.before !== null && !here.has(m.before) ? [m.before] : []));
  if (newest.ms >= input.atMs) plan.atMs = newest.ms + 1;
  return plan;
}

type Tell = (
  index: number,
  field: PlaceFault['field'],
  kind: PlaceFaultKind,
  message: string,
  slot?: string,
) => void;

interface Wanted {
  index: number;
  slot: StandingSlot;
  serial: string | null;
  expected: string | null | undefined;
}

/** The changes that can be read: their slot is there, their serial is one, nothing is named twice. */
function readChanges(
  changes: readonly PlaceChange[],
  slots: ReadonlyMap<string, StandingSlot>,
  fault: Tell,
): Wanted[] {
  const firstOfSlot = new Map<number, number>();
  const firstOfSerial = new Map<string, Wanted>();
  const wanted: Wanted[] = [];
  changes.forEach((change, index) => {
    const slot = slots.get(slotKey(change.slot.string, change.slot.position));
    if (!slot) {
      fault(index, 'slot', 'no_slot', placementFaultSaid.noSlot(change.slot.position));
      return;
    }
    const name = slotName(slot.stringName, slot.position);
    if (firstOfSlot.has(slot.slotId)) {
      fault(index, 'slot', 'duplicate', placementFaultSaid.slotTwice(name));
      return;
    }
    firstOfSlot.set(slot.slotId, index);
    const read = change.serial === null ? null : readSerial(change.serial);
    if (read?.kind === 'fault') {
      fault(index, 'serial', 'pattern', placementFaultSaid.serialFault(read.message, read.remedy));
      return;
    }
    const serial = read?.kind === 'serial' ? read.serial : null;
    const entry: Wanted = { index, slot, serial, expected: change.expected };
    if (entry.serial !== null) {
      const first = firstOfSerial.get(entry.serial);
      if (first) {
        const other = slotName(first.slot.stringName, first.slot.position);
        fault(index, 'serial', 'duplicate', placementFaultSaid.serialTwice(entry.serial, other));
        return;
      }
      firstOfSerial.set(entry.serial, entry);
    }
    wanted.push(entry);
  });
  return wanted;
}

function placeOf(sits: NonNullable<KnownUnit['sits']>, siteId: number): string {
  if (sits.slotId === null || sits.stringName === null) return unitPlaceSaid.unseen;
  return sits.siteId === siteId
    ? unitPlaceSaid.here(sits.stringName, sits.position)
    : unitPlaceSaid.elsewhere(sits.siteName, sits.stringName, sits.position);
}
