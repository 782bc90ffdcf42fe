import type { EquipmentFamily } from './families';
import type { Field } from './fields';

/**
 * Heads of columns in files of types. They are what an import finds its fields by, so they are the same in every language:
 * each installation reads what another has written.
 */
const HEADS: Readonly<Record<string, string>> = {
  name: 'Name',
  vocRef: 'Open-circuit voltage voc',
  iscRef: 'Short-circuit current isc',
  vmpRef: 'Voltage at maximum power vmp',
  impRef: 'Current at maximum power imp',
  betaVoc: 'Coefficient of voc',
  alphaIsc: 'Coefficient of isc',
  gammaPmp: 'Coefficient of maximum power',
  cellsInSeries: 'Cells in series',
  bypassGroups: 'Bypass groups',
  noct: 'Nominal operating cell temperature',
  lengthM: 'Length',
  widthM: 'Width',
  connector: 'Connector of the leads',
  voltageSystemMax: 'Maximum system voltage',
  fuseMax: 'Maximum series fuse',
  kind: 'Kind',
  outOfBox: 'Out of the box',
  releasedBy: 'Released by',
  onCommandLoss: 'When its command stops',
  commandLossAfterS: 'Shuts down after',
  shutdownVoltageNominal: 'Shutdown voltage',
  shutdownVoltageMin: 'Shutdown voltage, lowest',
  shutdownVoltageMax: 'Shutdown voltage, highest',
  bypassVoltage: 'Voltage while bypassed',
  measures: 'Measures',
  voltageAccuracy: 'Accuracy of voltage',
  currentAccuracy: 'Accuracy of current',
  voltageInMax: 'Maximum input voltage',
  currentMax: 'Maximum current',
  powerMax: 'Maximum module power',
  insulationTestMax: 'Insulation test up to',
  facesAllowed: 'Faces allowed',
  connectorIn: 'Connector towards the module',
  connectorOut: 'Connector towards the neighbours',
  maker: 'Maker',
  family: 'Type',
  tool: 'Tools',
  voltageMax: 'Maximum voltage',
  temperatureMax: 'Maximum temperature',
  acPowerMax: 'Maximum AC power',
  inputs: 'Inputs',
  stringsPerInput: 'Strings an input takes',
  mpptMin: 'MPPT window, from',
  mpptMax: 'MPPT window, to',
  iscMax: 'Maximum short-circuit current',
};
/** Where a family calls it otherwise. */
const OTHERWISE: Readonly<Partial<Record<EquipmentFamily, Readonly<Record<string, string>>>>> = {
  inverters: { voltageMax: 'Maximum DC voltage', currentMax: 'Maximum operating current' },
};

/** The fields of a family with the heads of their columns. @throws RangeError for a field that has none: name it above */
export const withHeads = (family: EquipmentFamily, fields: readonly Field[]): readonly Field[] =>
  fields.map((field): Field => {
    const head = OTHERWISE[family]?.[field.key] ?? HEADS[field.key];
    if (head === undefined) throw new RangeError(`a file of ${family} has no head for ${field.key}`);
    return { ...field, head };
  });
