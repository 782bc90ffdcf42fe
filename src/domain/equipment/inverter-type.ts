import { inverterFieldTexts as texts } from '../../words/domain-equipment-fields';
import { NAME_FIELD, figure, numberOf, textOf, type Entry, type Field } from './fields';

/** All that the catalogue says of an inverter's DC side. */
export interface InverterSheet {
  name: string;
  /** W */
  acPowerMax: number;
  inputs: number;
  stringsPerInput: number;
  /** V */
  voltageMax: number;
  mpptMin: number;
  mpptMax: number;
  /** A of one input: what it can use, and what it may see as short-circuit current. */
  currentMax: number;
  iscMax: number;
}

export const INVERTER_FIELDS: readonly Field[] = [
  NAME_FIELD,
  figure('acPowerMax', 'ac_power_max', texts.acPowerMax, 'kW', 0.1, 10_000, { scale: 1000 }),
  figure('inputs', 'inputs', texts.inputs, '', 1, 64, { whole: true }),
  figure('stringsPerInput', 'strings_per_input', texts.stringsPerInput, '', 1, 64, { whole: true }),
  figure('voltageMax', 'voltage_max', texts.voltageMax, 'V', 30, 2000),
  figure('mpptMin', 'mppt_min', texts.mpptMin, 'V', 1, 2000),
  figure('mpptMax', 'mppt_max', texts.mpptMax, 'V', 1, 2000),
  figure('currentMax', 'current_max', texts.currentMax, 'A', 1, 1000),
  figure('iscMax', 'isc_max', texts.iscMax, 'A', 1, 2000),
];

export const INVERTER_DEFAULTS: Entry = { stringsPerInput: 2 };

export function inverterSheetOf(entry: Entry): InverterSheet {
  const n = (key: string) => numberOf(entry, key);
  return {
    name: textOf(entry, 'name'),
    acPowerMax: n('acPowerMax'),
    inputs: n('inputs'),
    stringsPerInput: n('stringsPerInput'),
    voltageMax: n('voltageMax'),
    mpptMin: n('mpptMin'),
    mpptMax: n('mpptMax'),
    currentMax: n('currentMax'),
    iscMax: n('iscMax'),
  };
}
