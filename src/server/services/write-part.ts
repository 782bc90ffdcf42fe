import type { Value } from '../../domain/commissioning/as-built/merge';
import { fieldOf, reports, type NamedKind, type PartKind } from '../../domain/commissioning/as-built/parts';
import type { AsBuilt } from '../../schemas/api/as-built';
import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import {
  inputsInUse,
  numbersOf,
  setInputs,
  setLogger,
  setServed,
  setSlots,
  setUnitType,
  slotsInUse,
  updatePart,
  updateSlotFacts,
} from '../queries/as-built-parts';
import type { AsBuiltSite } from '../queries/as-built-site';
import { refuseFaults } from './as-built-words';
import { writePartRefusals } from '../../words/refusals-as-built';

/** From a part's fields to the rows that keep them. */

type Values = Readonly<Record<string, Value>>;

const snake = (key: string): string => key.replace(/[A-Z]/g, (c) => `_${c.toLowerCase()}`);

/** Fields that are no column of the part's own row. */
const ELSEWHERE: Partial<Record<PartKind, readonly string[]>> = {
  inverter: ['inputs'],
  transmitter: ['strings'],
  string: ['slots', 'moduleType', 'transmitters', 'logger', 'unitType'],
};

const listOf = (value: Value | undefined): readonly string[] =>
  Array.isArray(value) ? (value as readonly string[]) : typeof value === 'string' ? [value] : [];

/** The database's numbers of all that these values name. */
export function numbersFor(
  tx: Tx,
  site: AsBuiltSite,
  kind: PartKind,
  values: Values,
): Promise<Map<string, number>> {
  const named: { of: NamedKind; id: string }[] = [];
  for (const [key, value] of Object.entries(values)) {
    const field = fieldOf(kind, key);
    if (field?.kind === 'part' || field?.kind === 'parts')
      named.push(...listOf(value).map((id) => ({ of: field.of, id })));
  }
  return numbersOf(tx, { siteId: site.id, organisationId: site.organisationId }, named);
}

/** The columns of a part's own row. */
export async function columnsOf(
  tx: Tx,
  site: AsBuiltSite,
  kind: PartKind,
  values: Values,
): Promise<Record<string, unknown>> {
  const numbers = await numbersFor(tx, site, kind, values);
  const columns: Record<string, unknown> = {};
  for (const [key, value] of Object.entries(values)) {
    if (ELSEWHERE[kind]?.includes(key)) continue;
    if (fieldOf(kind, key)?.kind === 'part')
      columns[`${snake(key)}_id`] = value === null ? null : (numbers.get(String(value)) ?? null);
    else columns[snake(key)] = value;
  }
  return columns;
}

/** What belongs to a new part besides its row. */
export async function writeNew(
  tx: Tx,
  site: AsBuiltSite,
  kind: PartKind,
  rowId: number,
  values: Values,
): Promise<void> {
  if (kind === 'inverter') await setInputs(tx, site.id, rowId, Number(values.inputs));
  if (kind === 'transmitter') await writeServed(tx, site, 'transmitter', rowId, values);
}

async function writeServed(
  tx: Tx,
  site: AsBuiltSite,
  kind: 'transmitter' | 'string',
  rowId: number,
  values: Values,
): Promise<void> {
  const key = kind === 'transmitter' ? 'strings' : 'transmitters';
  const numbers = await numbersFor(tx, site, kind, { [key]: values[key] ?? [] });
  await setServed(tx, site.id, kind === 'transmitter' ? { transmitterId: rowId } : { stringId: rowId }, [
    ...numbers.values(),
  ]);
}

/**
 * Writes the changed fields of a part; `whole` is what it then is.
 * @throws AppError invalid, conflict with fields `values.KEY`
 */
export async function writeChanges(
  tx: Tx,
  { site, parts }: { site: AsBuiltSite; parts: Omit<AsBuilt, 'at'> },
  kind: PartKind,
  { id, rowId }: { id: string; rowId: number },
  whole: Values,
  changes: Values,
): Promise<void> {
  if (kind === 'string') {
    refuseFaults(stringFaults(parts, whole).map((f) => ({ field: `values.${f.key}`, message: f.message })));
    await writeString(tx, { site, parts }, { id, rowId }, whole, changes);
  }
  await updatePart(tx, kind, rowId, await columnsOf(tx, site, kind, changes));
  if (kind === 'inverter' && 'inputs' in changes) {
    const inputs = Number(changes.inputs);
    const [used] = await inputsInUse(tx, rowId, inputs);
    if (used) {
      const why =
        used.strings.length > 0 ? writePartRefusals.stringsOnIt(used.strings) : writePartRefusals.reported;
      const message = writePartRefusals.inputStays(used.number, why);
      throw new AppError('conflict', { message, fields: [{ field: 'values.inputs', message }] });
    }
    await setInputs(tx, site.id, rowId, inputs);
  }
  if (kind === 'transmitter' && 'strings' in changes) {
    strandedStrings(parts, id, whole);
    await writeServed(tx, site, 'transmitter', rowId, changes);
  }
}

/** A string of shutdown-only units that would hear no transmitter any more. */
function strandedStrings(parts: Omit<AsBuilt, 'at'>, transmitter: string, whole: Values): void {
  const served = listOf(whole.strings);
  const stranded = parts.strings.filter(
    (s) => !reports(s.kind) && !served.includes(s.id) && s.transmitters.every((t) => t === transmitter),
  );
  if (stranded.length === 0) return;
  const message = writePartRefusals.strandedStrings(stranded.map((s) => s.name).join(', '));
  throw new AppError('invalid', { message, fields: [{ field: 'values.strings', message }] });
}

/** What a string's unit type asks for. */
export function stringFaults(parts: Omit<AsBuilt, 'at'>, values: Values): { key: string; message: string }[] {
  const type = parts.catalogue.unitTypes.find((t) => t.id === values.unitType);
  if (!type) return [];
  if (reports(type.kind) && (values.logger === null || values.logger === undefined))
    return [{ key: 'logger', message: writePartRefusals.needsLogger(type.name) }];
  if (!reports(type.kind) && listOf(values.transmitters).length === 0)
    return [
      {
        key: 'transmitters',
        message: writePartRefusals.needsTransmitter(type.name),
      },
    ];
  return [];
}

async function writeString(
  tx: Tx,
  { site, parts }: { site: AsBuiltSite; parts: Omit<AsBuilt, 'at'> },
  { id, rowId: stringId }: { id: string; rowId: number },
  whole: Values,
  changes: Values,
): Promise<void> {
  const numbers = await numbersFor(tx, site, 'string', whole);
  const numberOf = (value: Value | undefined): number | null =>
    typeof value === 'string' ? (numbers.get(value) ?? null) : null;
  // the logger before the type: the database wants both to fit at every statement
  const logger = numberOf(whole.logger);
  if ('logger' in changes && logger !== null) await setLogger(tx, stringId, logger);
  const unitType = numberOf(changes.unitType);
  if (unitType !== null) await setUnitType(tx, stringId, unitType);
  if ('logger' in changes && logger === null) await setLogger(tx, stringId, null);
  if ('transmitters' in changes) await writeServed(tx, site, 'string', stringId, changes);
  const string = parts.strings.find((s) => s.id === id);
  if ('slots' in changes) {
    const slots = Number(changes.slots);
    const [used] = await slotsInUse(tx, [{ stringId, slots }]);
    if (used) {
      const why =
        used.serial === null ? writePartRefusals.slotReported : writePartRefusals.slotTaken(used.serial);
      const message = writePartRefusals.slotStays(used.position, why);
      throw new AppError('conflict', { message, fields: [{ field: 'values.slots', message }] });
    }
    const last = string?.slots.at(-1)?.moduleType;
    const type =
      numberOf(whole.moduleType) ??
      (last === undefined
        ? undefined
        : (
            await numbersOf(tx, { siteId: site.id, organisationId: site.organisationId }, [
              { of: 'module_type', id: last },
            ])
          ).get(last));
    if (type === undefined || type === null)
      throw new AppError('invalid', {
        message: writePartRefusals.chooseModuleType,
        fields: [{ field: 'values.moduleType', message: writePartRefusals.chooseModuleType }],
      });
    await setSlots(tx, site.id, [{ stringId, slots, moduleTypeId: type }]);
  }
  const moduleType = numberOf(changes.moduleType);
  if (moduleType !== null)
    await updateSlotFacts(
      tx,
      site.id,
      Array.from({ length: Number(whole.slots) }, (_, i) => ({
        string: id,
        position: i + 1,
        moduleTypeId: moduleType,
      })),
    );
}
