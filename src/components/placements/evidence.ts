import { median } from '../../domain/output/robust';
import type { SlotNow, StringNow } from '../../schemas/api/now';
import { placementsEvidence } from '../../words/placements';

/** What the newest reports say of a unit in a slot, and of the string that the slot belongs to. Amperes. */

/** A, under which a current says nothing of where a unit sits. */
export const TELLING_FROM = 0.5;

/** Median current of a string's units, one position left out; null where fewer than three report. */
export function typicalCurrent(string: StringNow, withoutPosition: number | null): number | null {
  const values = string.slots.flatMap((s) =>
    s.position === withoutPosition || s.current === null ? [] : [s.current],
  );
  return values.length >= 3 ? median(values) : null;
}

/** How far a unit's current lies from a string's, as a share; null where either carries too little to tell. */
export function apart(current: number | null, typical: number | null): number | null {
  if (current === null || typical === null || typical < TELLING_FROM) return null;
  return Math.abs(current / typical - 1);
}

export interface SlotRef {
  stringId: string;
  position: number;
}
export interface Seat {
  string: StringNow;
  slot: SlotNow;
}
export function seatAt(strings: readonly StringNow[], ref: SlotRef | null): Seat | null {
  const string = ref && strings.find((s) => s.id === ref.stringId);
  const slot = string?.slots.find((s) => s.position === ref?.position);
  return string && slot ? { string, slot } : null;
}

/** "C3-4" */
export const nameOf = ({ string, slot }: Seat): string => `${string.name}-${slot.position}`;

/** How a slot is named in a list to choose from: what stands there and whether anybody hears it. */
export function slotLabel(slot: SlotNow, heard: ReadonlySet<string> | null): string {
  if (slot.serial === null) return placementsEvidence.noUnit(slot.position);
  const unheard = heard ? !heard.has(slot.serial) : slot.state === 'unheard';
  return `${slot.position} · ${slot.serial}${unheard ? placementsEvidence.unheard : slot.state === 'silent' ? placementsEvidence.silent : ''}`;
}
