/** What an import would change: the file, as read, beside the as-built as it stands. */
import { importSaid } from '../../../words/domain-import';
import type { CellFault, KnownString, NewString, ReadRow } from './table';

/** A slot as it stands. */
export interface StandingSlot {
  string: string;
  position: number;
  serial: string | null;
  moduleType: string;
  roofX: number | null;
  roofY: number | null;
  roofPlace: string;
}

/** A unit that the organisation knows; `at` where it sits now, if anywhere. `site` null: one that may not be seen. */
export interface KnownUnit {
  serial: string;
  unitType: string;
  at: { site: string | null; thisSite: boolean; string: string; position: number } | null;
}

export type Change =
  | { kind: 'string_made'; string: string; slots: number }
  | { kind: 'string_grows'; string: string; from: number; to: number }
  /** A unit where none was. */
  | { kind: 'placed'; line: number; string: string; position: number; serial: string }
  /** A unit of this site that sits elsewhere in the file. `instead`: who sat there. */
  | {
      kind: 'moved';
      line: number;
      string: string;
      position: number;
      serial: string;
      from: { string: string; position: number };
      instead: string | null;
    }
  /** A unit that comes in for another one, which leaves the as-built unless the file has it elsewhere. */
  | { kind: 'replaced'; line: number; string: string; position: number; serial: string; instead: string }
  | { kind: 'module_type'; line: number; string: string; position: number; from: string; to: string }
  | { kind: 'roof_place'; line: number; string: string; position: number };

export interface ImportPlan {
  changes: Change[];
  faults: CellFault[];
  /** Rows that say what the as-built says already. */
  unchanged: number;
}

const key = (string: string, position: number): string => `${string}\u0000${position}`;
/** The database keeps metres in single precision: equal to a tenth of a millimetre. */
const sameMetres = (a: number | null, b: number): boolean => a !== null && Math.abs(a - b) < 1e-4;

/**
 * Compares. A serial of this site that sits elsewhere moves, if its old slot is given to another unit by the same file
 * or left empty by the move; a serial that sits on another site is a fault: it has to leave there first.
 */
export function planImport(
  rows: readonly ReadRow[],
  newStrings: readonly NewString[],
  strings: readonly KnownString[],
  slots: readonly StandingSlot[],
  units: readonly KnownUnit[],
): ImportPlan {
  const standing = new Map(slots.map((s) => [key(s.string, s.position), s]));
  const unitOf = new Map(units.map((u) => [u.serial, u]));
  const stringOf = new Map(strings.map((s) => [s.name, s]));
  const made = new Map(newStrings.map((s) => [s.name, s]));
  const changes: Change[] = newStrings.map((s) => ({ kind: 'string_made', string: s.name, slots: s.slots }));
  const faults: CellFault[] = [];
  let unchanged = 0;
  const grown = new Map<string, number>();
  const refused = new Set<number>();
  for (const row of rows) {
    const before = changes.length;
    const { line, string, position, serial } = row;
    const slot = standing.get(key(string, position));
    const known = stringOf.get(string);
    if (known && position > known.slots) grown.set(string, Math.max(position, grown.get(string) ?? 0));
    if (slot) {
      if (row.moduleType !== null && row.moduleType !== slot.moduleType)
        changes.push({
          kind: 'module_type',
          line,
          string,
          position,
          from: slot.moduleType,
          to: row.moduleType,
        });
      if (
        (row.roofX !== null && !sameMetres(slot.roofX, row.roofX)) ||
        (row.roofY !== null && !sameMetres(slot.roofY, row.roofY)) ||
        (row.roofPlace !== null && row.roofPlace !== slot.roofPlace)
      )
        changes.push({ kind: 'roof_place', line, string, position });
    }
    const instead = slot?.serial ?? null;
    if (serial !== null && serial !== instead) {
      const unit = unitOf.get(serial);
      const fault = unit && unitFault(row, unit, known?.unitType ?? made.get(string)?.unitType);
      if (fault) faults.push(fault);
      if (fault?.weight === 'fault') refused.add(line);
      else if (unit?.at) {
        const from = { string: unit.at.string, position: unit.at.position };
        changes.push({ kind: 'moved', line, string, position, serial, from, instead });
      } else if (instead !== null)
        changes.push({ kind: 'replaced', line, string, position, serial, instead });
      else changes.push({ kind: 'placed', line, string, position, serial });
    }
    if (changes.length === before && slot && !refused.has(line)) unchanged++;
  }
  for (const [string, to] of grown)
    changes.push({ kind: 'string_grows', string, from: stringOf.get(string)?.slots ?? 0, to });
  return { changes, faults, unchanged };
}

/** Why a known unit can't come to this row; undefined: it can. */
function unitFault(row: ReadRow, unit: KnownUnit, stringType: string | undefined): CellFault | undefined {
  const fault = { row: row.line, column: 'serial' as const, suggestion: null, weight: 'fault' as const };
  if (unit.at && !unit.at.thisSite)
    return {
      ...fault,
      code: 'serial_elsewhere',
      message:
        unit.at.site === null
          ? importSaid.elsewhereUnseen(unit.serial)
          : importSaid.elsewhere(unit.serial, unit.at.site, unit.at.string, unit.at.position),
      remedy: importSaid.elsewhereRemedy,
    };
  if (stringType !== undefined && stringType !== unit.unitType)
    return {
      ...fault,
      code: 'serial_type',
      message: importSaid.serialType(unit.serial, unit.unitType, row.string, stringType),
      remedy: importSaid.serialTypeRemedy,
    };
  return undefined;
}
