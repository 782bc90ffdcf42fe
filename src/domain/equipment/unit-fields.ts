import { unitChoices, unitFieldTexts as texts } from '../../words/domain-equipment-fields';
import { NAME_FIELD, figure, numberOf, textOf, type Entry, type Field } from './fields';
import { UNIT_KINDS, UNIT_PRESETS, type UnitKind, type UnitSheet, type UnitType } from './unit-type';

/** What can be chosen, in the order in which it is shown. */
const choices = <T extends string>(
  values: readonly NoInfer<T>[],
  labels: Record<T, string>,
): { value: T; label: string }[] => values.map((value) => ({ value, label: labels[value] }));

export const KIND_WORDS: Record<UnitKind, string> = unitChoices.kind;

export const UNIT_FIELDS: readonly Field[] = [
  NAME_FIELD,
  {
    kind: 'choice',
    key: 'kind',
    column: 'kind',
    ...texts.kind,
    options: choices(UNIT_KINDS, KIND_WORDS),
  },
  {
    kind: 'choice',
    key: 'outOfBox',
    column: 'out_of_box',
    ...texts.outOfBox,
    options: choices(['shutdown', 'passing'], unitChoices.outOfBox),
  },
  {
    kind: 'choice',
    key: 'releasedBy',
    column: 'released_by',
    ...texts.releasedBy,
    options: choices(['keep_alive', 'logger'], unitChoices.releasedBy),
  },
  {
    kind: 'choice',
    key: 'onCommandLoss',
    column: 'on_command_loss',
    ...texts.onCommandLoss,
    options: choices(['shuts_down', 'holds'], unitChoices.onCommandLoss),
  },
  figure('commandLossAfterS', 'command_loss_after_s', texts.commandLossAfterS, 's', 0, 600),
  figure('shutdownVoltageNominal', 'shutdown_voltage_nominal', texts.shutdownVoltageNominal, 'V', 0, 5),
  figure('shutdownVoltageMin', 'shutdown_voltage_min', texts.shutdownVoltageMin, 'V', 0, 5),
  figure('shutdownVoltageMax', 'shutdown_voltage_max', texts.shutdownVoltageMax, 'V', 0, 5),
  figure('bypassVoltage', 'bypass_voltage', texts.bypassVoltage, 'V', -3, 0),
  {
    kind: 'choice',
    key: 'measures',
    column: 'measures',
    ...texts.measures,
    options: choices(['none', 'input', 'output', 'both'], unitChoices.measures),
  },
  figure('voltageAccuracy', 'voltage_accuracy', texts.voltageAccuracy, '%', 0, 20, { scale: 0.01 }),
  figure('currentAccuracy', 'current_accuracy', texts.currentAccuracy, '%', 0, 20, { scale: 0.01 }),
  figure('voltageInMax', 'voltage_in_max', texts.voltageInMax, 'V', 10, 200),
  figure('currentMax', 'current_max', texts.currentMax, 'A', 1, 40),
  figure('powerMax', 'power_max', texts.powerMax, 'W', 50, 3000),
  figure('voltageSystemMax', 'voltage_system_max', texts.voltageSystemMax, 'V', 50, 2000),
  figure('insulationTestMax', 'insulation_test_max', texts.insulationTestMax, 'V', 50, 3000),
  {
    kind: 'choice',
    key: 'facesAllowed',
    column: 'faces_allowed',
    ...texts.facesAllowed,
    options: choices(['either', 'label_out'], unitChoices.facesAllowed),
  },
  {
    kind: 'connector',
    key: 'connectorIn',
    column: 'connector_in_id',
    ...texts.connectorIn,
  },
  {
    kind: 'connector',
    key: 'connectorOut',
    column: 'connector_out_id',
    ...texts.connectorOut,
  },
];

/** A unit as a flat entry. */
export function entryOfUnit(unit: UnitType & Partial<UnitSheet>): Entry {
  const { shutdownVoltage, ...rest } = unit;
  return {
    ...rest,
    shutdownVoltageNominal: shutdownVoltage.nominal,
    shutdownVoltageMin: shutdownVoltage.min,
    shutdownVoltageMax: shutdownVoltage.max,
    voltageSystemMax: unit.voltageSystemMax ?? 1000,
    powerMax: unit.powerMax ?? 700,
    connectorIn: unit.connectorIn ?? null,
    connectorOut: unit.connectorOut ?? null,
  };
}

/** What a form is filled with when a kind is chosen. */
export const presetEntry = (kind: UnitKind): Entry => entryOfUnit({ ...UNIT_PRESETS[kind], name: '' });

const oneOf = <T extends string>(entry: Entry, key: string): T => textOf(entry, key) as T;

export function unitSheetOf(entry: Entry): UnitSheet {
  const n = (key: string) => numberOf(entry, key);
  const ref = (key: string) => (typeof entry[key] === 'string' ? entry[key] : null);
  return {
    name: textOf(entry, 'name'),
    kind: oneOf(entry, 'kind'),
    outOfBox: oneOf(entry, 'outOfBox'),
    releasedBy: oneOf(entry, 'releasedBy'),
    onCommandLoss: oneOf(entry, 'onCommandLoss'),
    commandLossAfterS: n('commandLossAfterS'),
    shutdownVoltage: {
      nominal: n('shutdownVoltageNominal'),
      min: n('shutdownVoltageMin'),
      max: n('shutdownVoltageMax'),
    },
    bypassVoltage: n('bypassVoltage'),
    measures: oneOf(entry, 'measures'),
    voltageAccuracy: n('voltageAccuracy'),
    currentAccuracy: n('currentAccuracy'),
    voltageInMax: n('voltageInMax'),
    currentMax: n('currentMax'),
    powerMax: n('powerMax'),
    voltageSystemMax: n('voltageSystemMax'),
    insulationTestMax: typeof entry.insulationTestMax === 'number' ? entry.insulationTestMax : null,
    facesAllowed: oneOf(entry, 'facesAllowed'),
    connectorIn: ref('connectorIn'),
    connectorOut: ref('connectorOut'),
  };
}
