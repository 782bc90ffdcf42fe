import type { Actor } from '../../domain/access/permissions';
import type { ImportPlan, StandingSlot } from '../../domain/commissioning/import/plan';
import type { ReadImport } from '../../domain/commissioning/import/read-import';
import { inputName, type ReadRow } from '../../domain/commissioning/import/table';
import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import type { ImportParts } from '../queries/import-as-built';
import { addStrings, setSlotCounts, setSlotFacts, type SlotChange } from './edit-as-built-strings';
import type { OnStep } from './import-as-built';
import { placeUnits } from './place-units';
import { importWriteRefusals } from '../../words/refusals-as-built';

interface How {
  at: Date;
  reason: string;
  address: string | null;
}

/** Public identifiers by name. */
function bookOf(list: readonly { name: string; ref: string }[]): (name: string) => string {
  const refs = new Map(list.map((x) => [x.name, x.ref]));
  return (name) => {
    const ref = refs.get(name);
    if (ref === undefined) throw gone();
    return ref;
  };
}
/** Read and written in one transaction under the site's lock: only the catalogue can have changed meanwhile. */
const gone = (): AppError =>
  new AppError('conflict', {
    message: importWriteRefusals.partRemoved,
  });

/** What is written wrong by its place in a batch is told by its row in the file. */
async function byRow<T>(
  rows: readonly { line: number }[],
  column: string,
  work: () => Promise<T>,
): Promise<T> {
  try {
    return await work();
  } catch (error) {
    if (!(error instanceof AppError)) throw error;
    throw new AppError(error.kind, {
      ...error.detail,
      fields: (error.detail.fields ?? []).map((f) => {
        const n = /^(?:changes|slots|strings|counts)\.(\d+)/.exec(f.field)?.[1];
        const row = n === undefined ? undefined : rows[Number(n)];
        return row ? { field: `rows.${row.line}.${column}`, message: f.message } : f;
      }),
    });
  }
}

/** Rows whose slot the file says more of than its unit, where the as-built says otherwise. */
function slotRows(read: ReadImport, plan: ImportPlan, standing: ReadonlySet<string>): ReadRow[] {
  const changed = new Set(
    plan.changes.flatMap((c) => (c.kind === 'module_type' || c.kind === 'roof_place' ? [c.line] : [])),
  );
  return read.rows.filter(
    (r) =>
      changed.has(r.line) ||
      (!standing.has(`${r.string} ${r.position}`) &&
        (r.moduleType !== null || r.roofX !== null || r.roofY !== null || r.roofPlace !== null)),
  );
}

/**
 * Writes what an import would change: strings that are new or longer, what is known of slots, who sits where. To be
 * called under the site's as-built lock with a plan without faults.
 */
export async function writeImport(
  tx: Tx,
  actor: Actor,
  siteId: number,
  parts: ImportParts,
  read: ReadImport,
  plan: ImportPlan,
  slots: readonly StandingSlot[],
  { at, reason, address }: How,
  onStep: OnStep,
): Promise<void> {
  const how = { reason, source: 'import' as const, address };
  const unitType = bookOf(parts.unitTypes);
  const moduleType = bookOf(parts.moduleTypes);
  const plane = bookOf(parts.planes);
  const zone = bookOf(parts.zones);
  const logger = bookOf(parts.loggers);
  const transmitter = bookOf(parts.transmitters);
  const input = bookOf(parts.inputs.map((i) => ({ name: inputName(i.inverter, i.number), ref: i.ref })));

  await onStep('strings', 0, read.newStrings.length);
  const made = await byRow(read.newStrings, 'string', () =>
    addStrings(
      tx,
      actor,
      siteId,
      read.newStrings.map((s) => ({
        name: s.name,
        slots: s.slots,
        unitType: unitType(s.unitType),
        moduleType: moduleType(s.moduleType),
        plane: plane(s.plane),
        input: input(inputName(s.inverter, s.input)),
        zone: zone(s.zone),
        logger: s.logger === null || s.kind === 'shutdown_only' ? null : logger(s.logger),
        transmitters: s.transmitters.map(transmitter),
      })),
      how,
    ),
  );
  const stringRef = bookOf([...parts.strings, ...made]);
  const longer = plan.changes.flatMap((c) => (c.kind === 'string_grows' ? [c] : []));
  const firstRow = new Map(read.rows.toReversed().map((r) => [r.string, r.line]));
  await byRow(
    longer.map((c) => ({ line: firstRow.get(c.string) ?? 1 })),
    'position',
    () =>
      setSlotCounts(
        tx,
        actor,
        siteId,
        longer.map((c) => {
          const usual = parts.strings.find((s) => s.name === c.string)?.moduleType;
          if (!usual) throw gone();
          return { string: stringRef(c.string), slots: c.to, moduleType: moduleType(usual) };
        }),
        how,
      ),
  );

  const standing = new Set(slots.map((s) => `${s.string} ${s.position}`));
  const facts = slotRows(read, plan, standing);
  await onStep('slots', 0, facts.length);
  await byRow(facts, 'roofPlace', () =>
    setSlotFacts(
      tx,
      actor,
      siteId,
      facts.map((r): SlotChange => ({
        string: stringRef(r.string),
        position: r.position,
        ...(r.moduleType !== null && { moduleType: moduleType(r.moduleType) }),
        ...(r.roofX !== null && { roofX: r.roofX }),
        ...(r.roofY !== null && { roofY: r.roofY }),
        ...(r.roofPlace !== null && { roofPlace: r.roofPlace }),
      })),
      how,
    ),
  );

  const seats = plan.changes.flatMap((c) =>
    c.kind === 'placed' || c.kind === 'moved' || c.kind === 'replaced' ? [c] : [],
  );
  await onStep('units', 0, seats.length);
  await byRow(seats, 'serial', () =>
    placeUnits(
      tx,
      actor,
      siteId,
      seats.map((c) => ({
        slot: { string: stringRef(c.string), position: c.position },
        serial: c.serial,
        expected: c.kind === 'placed' ? null : c.instead,
      })),
      { at, reason, source: 'import', move: true, address },
    ),
  );
  await onStep('kept', seats.length, seats.length);
}
