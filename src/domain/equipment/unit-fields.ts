import { NAME_FIELD, figure, numberOf, textOf, type Entry, type Field } from './fields';
import { UNIT_KINDS, UNIT_PRESETS, type UnitKind, type UnitSheet, type UnitType } from './unit-type';

const BEHAVIOUR = 'Behaviour';
const SHUTDOWN = 'In shutdown';
const MEASURING = 'What it measures';
const LIMITS = 'Limits';
const FITTING = 'Fitting and testing';

export const KIND_WORDS: Record<UnitKind, string> = {
  shutdown_only: 'Shutdown only',
  monitored: 'Monitored',
  optimizing: 'Optimizing',
};

export const UNIT_FIELDS: readonly Field[] = [
  NAME_FIELD,
  {
    kind: 'choice',
    key: 'kind',
    column: 'kind',
    label: 'Kind',
    group: 'Type',
    hint: 'A preset: in a new type it fills the form with what is usual. Every value can be changed.',
    options: UNIT_KINDS.map((value) => ({ value, label: KIND_WORDS[value] })),
  },
  {
    kind: 'choice',
    key: 'outOfBox',
    column: 'out_of_box',
    label: 'Out of the box',
    group: BEHAVIOUR,
    options: [
      { value: 'shutdown', label: 'In shutdown' },
      { value: 'passing', label: 'Passes full voltage' },
    ],
  },
  {
    kind: 'choice',
    key: 'releasedBy',
    column: 'released_by',
    label: 'Released by',
    group: BEHAVIOUR,
    options: [
      { value: 'keep_alive', label: 'Keep-alive on the DC conductors' },
      { value: 'logger', label: 'Logger, through a gateway' },
    ],
  },
  {
    kind: 'choice',
    key: 'onCommandLoss',
    column: 'on_command_loss',
    label: 'When its command stops',
    group: BEHAVIOUR,
    options: [
      { value: 'shuts_down', label: 'Shuts down' },
      { value: 'holds', label: 'Holds its state' },
    ],
  },
  figure('commandLossAfterS', 'command_loss_after_s', 'Shuts down after', BEHAVIOUR, 's', 0, 600, {
    hint: 'From the last command or keep-alive.',
  }),
  figure('shutdownVoltageNominal', 'shutdown_voltage_nominal', 'Shutdown voltage', SHUTDOWN, 'V', 0, 5, {
    hint: 'What one unit lets through, open circuit; 0.6 V is common practice.',
  }),
  figure('shutdownVoltageMin', 'shutdown_voltage_min', 'Shutdown voltage, lowest', SHUTDOWN, 'V', 0, 5),
  figure('shutdownVoltageMax', 'shutdown_voltage_max', 'Shutdown voltage, highest', SHUTDOWN, 'V', 0, 5),
  figure('bypassVoltage', 'bypass_voltage', 'Voltage while bypassed', SHUTDOWN, 'V', -3, 0, {
    hint: 'Across a unit in shutdown while string current flows; negative.',
  }),
  {
    kind: 'choice',
    key: 'measures',
    column: 'measures',
    label: 'Measures',
    group: MEASURING,
    options: [
      { value: 'none', label: 'Nothing' },
      { value: 'input', label: 'Input side' },
      { value: 'output', label: 'Output side' },
      { value: 'both', label: 'Both sides' },
    ],
  },
  figure('voltageAccuracy', 'voltage_accuracy', 'Accuracy of voltage', MEASURING, '%', 0, 20, {
    scale: 0.01,
  }),
  figure('currentAccuracy', 'current_accuracy', 'Accuracy of current', MEASURING, '%', 0, 20, {
    scale: 0.01,
  }),
  figure('voltageInMax', 'voltage_in_max', 'Maximum input voltage', LIMITS, 'V', 10, 200),
  figure('currentMax', 'current_max', 'Maximum current', LIMITS, 'A', 1, 40),
  figure('powerMax', 'power_max', 'Maximum module power', LIMITS, 'W', 50, 3000),
  figure('voltageSystemMax', 'voltage_system_max', 'Maximum system voltage', LIMITS, 'V', 50, 2000),
  figure('insulationTestMax', 'insulation_test_max', 'Insulation test up to', FITTING, 'V', 50, 3000, {
    emptyMeans: 'the maker allows none',
    hint: 'What the maker allows through the unit. Empty: the maker allows none.',
  }),
  {
    kind: 'choice',
    key: 'facesAllowed',
    column: 'faces_allowed',
    label: 'Faces allowed',
    group: FITTING,
    options: [
      { value: 'either', label: 'Either face to the back sheet' },
      { value: 'label_out', label: 'Label out only' },
    ],
  },
  {
    kind: 'connector',
    key: 'connectorIn',
    column: 'connector_in_id',
    label: 'Connector towards the module',
    group: FITTING,
  },
  {
    kind: 'connector',
    key: 'connectorOut',
    column: 'connector_out_id',
    label: 'Connector towards the neighbours',
    group: FITTING,
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
