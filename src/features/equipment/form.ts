import type { EquipmentFamily } from '../../domain/equipment/families';
import type { Doubt } from '../../domain/equipment/doubt';
import type { Entry, Field } from '../../domain/equipment/fields';
import { DEFAULTS, FIELDS, judgeEntry } from '../../domain/equipment/plausibility';
import { presetEntry } from '../../domain/equipment/unit-fields';
import { UNIT_KINDS, type UnitKind } from '../../domain/equipment/unit-type';
import { readEntry, typedEntry, type TypedEntry } from '../../schemas/equipment-entry';

export interface FormState {
  typed: Record<string, string>;
  /** Fields that were left once: their faults are shown. */
  touched: Readonly<Record<string, boolean>>;
  accepted: readonly string[];
}

export const emptyForm = (family: EquipmentFamily): FormState => ({
  typed: typedEntry(family, DEFAULTS[family]),
  touched: {},
  accepted: [],
});

export const formOf = (family: EquipmentFamily, entry: Entry): FormState => ({
  typed: typedEntry(family, entry),
  touched: {},
  accepted: [],
});

export interface FormReading {
  /** The whole entry, where nothing is missing or contradicts. */
  entry: Entry | null;
  /** Every field that could be read, each by itself. */
  partial: Entry;
  faults: Readonly<Record<string, string>>;
  doubts: readonly Doubt[];
}

/** What a form says so far: every fault, and what is unusual once nothing is wrong. */
export function readForm(family: EquipmentFamily, typed: TypedEntry): FormReading {
  const { entry, faults } = readEntry(family, typed);
  if (Object.keys(faults).length > 0) return { entry: null, partial: entry, faults, doubts: [] };
  const { conflicts, doubts } = judgeEntry(family, entry);
  if (conflicts.length > 0)
    return {
      entry: null,
      partial: entry,
      faults: Object.fromEntries(conflicts.map((c) => [c.field, c.message])),
      doubts: [],
    };
  return { entry, partial: entry, faults: {}, doubts };
}

/** What a module's curve needs; the rest of its sheet may still be missing. */
export const CURVE_KEYS = [
  'vocRef',
  'iscRef',
  'vmpRef',
  'impRef',
  'betaVoc',
  'alphaIsc',
  'gammaPmp',
  'cellsInSeries',
  'bypassGroups',
  'noct',
];
const BESIDE_CURVE: Entry = {
  name: '',
  lengthM: 1,
  widthM: 1,
  voltageSystemMax: 1000,
  fuseMax: 20,
  connector: null,
};

/** A module as far as its curve goes; null while a figure of the curve is missing or can't be. */
export function curveEntry({ partial }: FormReading): Entry | null {
  if (CURVE_KEYS.some((key) => partial[key] === undefined)) return null;
  const entry = { ...BESIDE_CURVE, ...partial };
  return judgeEntry('modules', entry).conflicts.length > 0 ? null : entry;
}

/** How many figures of the curve are still missing or no numbers. */
export const curveMissing = ({ partial }: FormReading): number =>
  CURVE_KEYS.filter((key) => partial[key] === undefined).length;

/**
 * A field as changed. Choosing the kind of a new unit fills everything but the name and the connectors with what is
 * usual for it; a type that is there already keeps its values.
 */
export function withField(
  family: EquipmentFamily,
  state: FormState,
  field: Field,
  value: string,
  isNew: boolean,
): FormState {
  const typed = { ...state.typed, [field.key]: value };
  if (
    isNew &&
    family === 'units' &&
    field.key === 'kind' &&
    (UNIT_KINDS as readonly string[]).includes(value)
  ) {
    const preset = typedEntry('units', presetEntry(value as UnitKind));
    for (const f of FIELDS.units)
      if (f.key !== 'name' && f.kind !== 'connector') typed[f.key] = preset[f.key] ?? '';
  }
  return { ...state, typed };
}

/** Fields by their group, in order. */
export function groupsOf(family: EquipmentFamily): { title: string; fields: Field[] }[] {
  const groups: { title: string; fields: Field[] }[] = [];
  for (const field of FIELDS[family]) {
    const last = groups.at(-1);
    if (last?.title === field.group) last.fields.push(field);
    else groups.push({ title: field.group, fields: [field] });
  }
  return groups;
}
