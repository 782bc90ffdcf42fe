import type { Actor } from '../../domain/access/permissions';
import { checkPart } from '../../domain/commissioning/as-built/check-part';
import { slotKey, slotName } from '../../domain/commissioning/as-built/plan-placements';
import type { PartValues } from '../../schemas/api/as-built';
import { nameOf } from '../../schemas/as-built-values';
import type { Tx } from '../db/transaction';
import { AppError, type FieldFault } from '../errors';
import {
  checkNow,
  insertStrings,
  numbersOf,
  partNumber,
  setSlots,
  slotFacts,
  slotsInUse,
  updateSlotFacts,
  type SlotFactsRow,
} from '../queries/as-built-parts';
import { addAuditEntries } from '../queries/people';
import { inWords, refuseFaults } from './as-built-words';
import { faultsAt, inNames, needReason, standing, tellAll, unknownNames, type How } from './edit-as-built';
import { stringFaults } from './write-part';
import { editStringsRefusals } from '../../words/refusals-as-built';

/** Strings and slots, any number at once. Parts are named by their public identifiers. */

export interface NewString {
  name: string;
  slots: number;
  unitType: string;
  moduleType: string;
  plane: string;
  input: string;
  zone: string;
  logger: string | null;
  transmitters: readonly string[];
  /** ohm; 0.3 where nobody says. */
  cableResistance?: number;
  homeRunLeavesArray?: boolean;
}

/** Field keys of one string as a form sends them; what is wrong is told as `PREFIX.N.KEY` (a batch) or `PREFIX.KEY`. */
export type GivenString = NewString | PartValues;

/**
 * New strings with empty slots; each gets the next place in its logger's roster.
 *
 * @param fieldOf where a fault of string N is told; `strings.N.` unless given
 * @throws AppError not_found · invalid · conflict (a name is taken)
 */
export async function addStrings(
  tx: Tx,
  actor: Actor,
  siteId: number,
  strings: readonly GivenString[],
  how: How,
  fieldOf: (n: number) => string = (n) => `strings.${n}.`,
): Promise<{ id: number; ref: string; name: string }[]> {
  if (strings.length === 0) return [];
  const { site, parts } = await standing(tx, siteId);
  const faults: FieldFault[] = [];
  const names = new Map<string, number>();
  const taken = new Set(parts.strings.map((s) => s.name));
  const checked = strings.map((given, n) => {
    const result = checkPart('string', { cableResistance: 0.3, homeRunLeavesArray: true, ...given });
    if (result.faults) {
      faults.push(...faultsAt(fieldOf(n), result.faults));
      return null;
    }
    const { values } = result;
    const name = String(values.name);
    if (taken.has(name))
      faults.push({ field: `${fieldOf(n)}name`, message: editStringsRefusals.nameTaken(name) });
    else if (names.has(name))
      faults.push({ field: `${fieldOf(n)}name`, message: editStringsRefusals.nameTwice(name) });
    names.set(name, n);
    if (values.moduleType === null)
      faults.push({ field: `${fieldOf(n)}moduleType`, message: editStringsRefusals.chooseModuleType });
    faults.push(
      ...faultsAt(fieldOf(n), unknownNames(parts, 'string', values)),
      ...faultsAt(fieldOf(n), stringFaults(parts, values)),
    );
    return values;
  });
  refuseFaults(faults);
  needReason(site.stage === 'operating', how);
  const good = checked.filter((v) => v !== null);
  const named = good.flatMap((v) => [
    { of: 'plane' as const, id: String(v.plane) },
    { of: 'input' as const, id: String(v.input) },
    { of: 'zone' as const, id: String(v.zone) },
    { of: 'unit_type' as const, id: String(v.unitType) },
    { of: 'module_type' as const, id: String(v.moduleType) },
    ...(v.logger === null ? [] : [{ of: 'logger' as const, id: String(v.logger) }]),
    ...(v.transmitters as readonly string[]).map((id) => ({ of: 'transmitter' as const, id })),
  ]);
  const numbers = await numbersOf(tx, { siteId, organisationId: site.organisationId }, named);
  const numberOf = (value: unknown): number => {
    const number = numbers.get(String(value));
    if (number === undefined)
      throw new AppError('conflict', {
        message: editStringsRefusals.partDeleted,
      });
    return number;
  };
  const made = await inWords(fieldOf(0), async () => {
    const rows = await insertStrings(
      tx,
      siteId,
      good.map((v) => ({
        name: String(v.name),
        planeId: numberOf(v.plane),
        inputId: numberOf(v.input),
        zoneId: numberOf(v.zone),
        loggerId: v.logger === null ? null : numberOf(v.logger),
        unitTypeId: numberOf(v.unitType),
        moduleTypeId: numberOf(v.moduleType),
        slots: Number(v.slots),
        cableResistance: Number(v.cableResistance),
        homeRunLeavesArray: v.homeRunLeavesArray === true,
        transmitterIds: (v.transmitters as readonly string[]).map(numberOf),
      })),
    );
    await checkNow(tx);
    return rows;
  });
  await addAuditEntries(
    tx,
    made.map((row, n) => ({
      organisationId: site.organisationId,
      personId: actor.personId,
      address: how.address,
      action: 'as_built.string_added',
      subject: `string ${row.ref}`,
      siteId,
      stringId: row.id,
      after: { of: row.name, ...inNames(parts, 'string', good[n] ?? {}), source: how.source },
      reason: how.reason.trim(),
    })),
  );
  await tellAll(tx, siteId);
  return made;
}

export interface SlotChange {
  string: string;
  position: number;
  moduleType?: string | undefined;
  roofPlace?: string | undefined;
  /** m; null: not known any more. */
  roofX?: number | null | undefined;
  roofY?: number | null | undefined;
}

/**
 * Writes what is known of slots besides their units: only the fields that a change names, one entry in the history a
 * string.
 *
 * @throws AppError invalid with fields `slots.N.KEY`
 */
export async function setSlotFacts(
  tx: Tx,
  actor: Actor,
  siteId: number,
  changes: readonly SlotChange[],
  how: How,
): Promise<number> {
  if (changes.length === 0) return 0;
  const { site, parts } = await standing(tx, siteId);
  const standingFacts = new Map(
    (await slotFacts(tx, siteId, changes)).map((s) => [slotKey(s.string, s.position), s]),
  );
  const types = await numbersOf(
    tx,
    { siteId, organisationId: site.organisationId },
    changes.flatMap((c) =>
      c.moduleType === undefined ? [] : [{ of: 'module_type' as const, id: c.moduleType }],
    ),
  );
  const faults: FieldFault[] = [];
  const rows: SlotFactsRow[] = [];
  const told = new Map<
    number,
    { name: string; before: Record<string, unknown>; after: Record<string, unknown> }
  >();
  changes.forEach((change, n) => {
    const now = standingFacts.get(slotKey(change.string, change.position));
    if (!now) {
      faults.push({
        field: `slots.${n}`,
        message: editStringsRefusals.noPosition(change.position),
      });
      return;
    }
    const moduleTypeId = change.moduleType === undefined ? undefined : types.get(change.moduleType);
    if (change.moduleType !== undefined && moduleTypeId === undefined)
      faults.push({
        field: `slots.${n}.moduleType`,
        message: editStringsRefusals.moduleTypeGone,
      });
    for (const key of ['roofX', 'roofY'] as const) {
      const value = change[key];
      if (typeof value === 'number' && !(value >= -2000 && value <= 2000))
        faults.push({ field: `slots.${n}.${key}`, message: editStringsRefusals.giveMetres });
    }
    const row: SlotFactsRow = {
      string: change.string,
      position: change.position,
      ...(moduleTypeId !== undefined && moduleTypeId !== now.moduleTypeId && { moduleTypeId }),
      ...(change.roofPlace !== undefined &&
        change.roofPlace.trim() !== now.roofPlace && { roofPlace: change.roofPlace.trim() }),
      ...(change.roofX !== undefined && !near(change.roofX, now.roofX) && { roofX: change.roofX }),
      ...(change.roofY !== undefined && !near(change.roofY, now.roofY) && { roofY: change.roofY }),
    };
    const { string: _string, position: _position, moduleTypeId: type, ...plain } = row;
    if (Object.keys(row).length === 2) return;
    rows.push(row);
    const entry = told.get(now.stringId) ?? { name: now.stringName, before: {}, after: {} };
    const slot = slotName(now.stringName, now.position);
    const before = Object.fromEntries(Object.keys(plain).map((k) => [k, now[k as 'roofPlace']]));
    entry.before[slot] = { ...before, ...(type !== undefined && { moduleType: now.moduleType }) };
    entry.after[slot] = {
      ...plain,
      ...(type !== undefined &&
        change.moduleType !== undefined && { moduleType: nameOf(parts, 'module_type', change.moduleType) }),
    };
    told.set(now.stringId, entry);
  });
  refuseFaults(faults);
  if (rows.length === 0) return 0;
  needReason(site.stage === 'operating', how);
  await updateSlotFacts(tx, siteId, rows);
  await addAuditEntries(
    tx,
    [...told].map(([stringId, entry]) => ({
      organisationId: site.organisationId,
      personId: actor.personId,
      address: how.address,
      action: 'as_built.slots_changed',
      subject: `slots ${entry.name}`,
      siteId,
      stringId,
      before: entry.before,
      after: { of: entry.name, ...entry.after, source: how.source },
      reason: how.reason.trim(),
    })),
  );
  await tellAll(tx, siteId);
  return rows.length;
}

/** Both come from single precision: equal to a tenth of a millimetre. */
const near = (a: number | null, b: number | null): boolean =>
  a === b || (a !== null && b !== null && Math.abs(a - b) < 1e-4);

/**
 * Gives strings another number of slots. New ones are empty; those above must be empty and never have reported.
 * @throws AppError not_found · invalid · conflict, with fields `counts.N.slots`
 */
export async function setSlotCounts(
  tx: Tx,
  actor: Actor,
  siteId: number,
  counts: readonly { string: string; slots: number; moduleType: string }[],
  how: How,
): Promise<void> {
  if (counts.length === 0) return;
  const { site, parts } = await standing(tx, siteId);
  const faults: FieldFault[] = [];
  const types = await numbersOf(
    tx,
    { siteId, organisationId: site.organisationId },
    counts.map((c) => ({ of: 'module_type' as const, id: c.moduleType })),
  );
  const rows: {
    stringId: number;
    slots: number;
    moduleTypeId: number;
    n: number;
    before: number;
    name: string;
    ref: string;
  }[] = [];
  for (const [n, count] of counts.entries()) {
    const string = parts.strings.find((s) => s.id === count.string);
    const stringId = string && (await partNumber(tx, 'string', siteId, count.string));
    const moduleTypeId = types.get(count.moduleType);
    if (!string || stringId === undefined)
      faults.push({ field: `counts.${n}.string`, message: editStringsRefusals.stringGone });
    else if (!Number.isInteger(count.slots) || count.slots < 1 || count.slots > 63)
      faults.push({ field: `counts.${n}.slots`, message: editStringsRefusals.slotsRange(string.name) });
    else if (moduleTypeId === undefined)
      faults.push({
        field: `counts.${n}.moduleType`,
        message: editStringsRefusals.moduleTypeGone,
      });
    else if (string.slots.length !== count.slots)
      rows.push({
        stringId,
        slots: count.slots,
        moduleTypeId,
        n,
        before: string.slots.length,
        name: string.name,
        ref: string.id,
      });
  }
  refuseFaults(faults);
  if (rows.length === 0) return;
  for (const used of await slotsInUse(tx, rows)) {
    const row = rows.find((r) => r.stringId === used.stringId);
    faults.push({
      field: `counts.${row?.n ?? 0}.slots`,
      message: editStringsRefusals.slotStays(slotName(row?.name ?? '', used.position), used.serial),
    });
  }
  refuseFaults(faults);
  needReason(site.stage === 'operating', how);
  await setSlots(tx, siteId, rows);
  await addAuditEntries(
    tx,
    rows.map((r) => ({
      organisationId: site.organisationId,
      personId: actor.personId,
      address: how.address,
      action: 'as_built.string_changed',
      subject: `string ${r.ref}`,
      siteId,
      stringId: r.stringId,
      before: { slots: r.before },
      after: { of: r.name, slots: r.slots, source: how.source },
      reason: how.reason.trim(),
    })),
  );
  await tellAll(tx, siteId);
}
