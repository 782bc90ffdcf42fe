import { NAME_FIELD, figure, numberOf, textOf, type Entry, type Field } from './fields';
import type { ModuleSheet } from './module-type';

const POINTS = 'Datasheet at STC (1000 W/m², cell 25 °C, AM 1.5)';
const COEFFICIENTS = 'Temperature coefficients';
const BUILD = 'Build';
const LIMITS = 'Limits';

export const MODULE_FIELDS: readonly Field[] = [
  NAME_FIELD,
  figure('vocRef', 'voc_ref', 'Open-circuit voltage voc', POINTS, 'V', 1, 200),
  figure('iscRef', 'isc_ref', 'Short-circuit current isc', POINTS, 'A', 0.1, 40),
  figure('vmpRef', 'vmp_ref', 'Voltage at maximum power vmp', POINTS, 'V', 1, 200, {
    hint: 'Below voc; usually 80 to 86 % of it.',
  }),
  figure('impRef', 'imp_ref', 'Current at maximum power imp', POINTS, 'A', 0.1, 40, {
    hint: 'Below isc; usually 93 to 97 % of it.',
  }),
  figure('betaVoc', 'beta_voc', 'Coefficient of voc', COEFFICIENTS, '%/K', -1, 0, {
    scale: 0.01,
    hint: 'In % per K, negative. A sheet that gives V/K or mV/K: divide by voc, times 100.',
  }),
  figure('alphaIsc', 'alpha_isc', 'Coefficient of isc', COEFFICIENTS, '%/K', -0.2, 0.5, {
    scale: 0.01,
    hint: 'In % per K. A sheet that gives mA/K: divide by isc in mA, times 100.',
  }),
  figure('gammaPmp', 'gamma_pmp', 'Coefficient of maximum power', COEFFICIENTS, '%/K', -1, 0, {
    scale: 0.01,
    hint: 'In % per K, negative.',
  }),
  figure('cellsInSeries', 'cells_in_series', 'Cells in series', BUILD, '', 1, 300, {
    whole: true,
    hint: 'Of half-cut cells count those in series: 144 half cells are 72.',
  }),
  figure('bypassGroups', 'bypass_groups', 'Bypass groups', BUILD, '', 1, 12, {
    whole: true,
    hint: 'Sub-strings with a bypass diode each; usually 3.',
  }),
  figure('noct', 'noct', 'Nominal operating cell temperature', BUILD, '°C', 30, 70),
  figure('lengthM', 'length_m', 'Length', BUILD, 'm', 0.2, 4),
  figure('widthM', 'width_m', 'Width', BUILD, 'm', 0.2, 4),
  {
    kind: 'connector',
    key: 'connector',
    column: 'connector_type_id',
    label: 'Connector of the leads',
    group: BUILD,
    hint: 'What the label on the lead says. Design and install checks hold it against the unit’s.',
  },
  figure('voltageSystemMax', 'voltage_system_max', 'Maximum system voltage', LIMITS, 'V', 50, 2000),
  figure('fuseMax', 'fuse_max', 'Maximum series fuse', LIMITS, 'A', 1, 100, {
    hint: 'Also called reverse-current rating.',
  }),
];

/** What a new form begins with: what most sheets say. */
export const MODULE_DEFAULTS: Entry = {
  bypassGroups: 3,
  noct: 45,
  voltageSystemMax: 1000,
  fuseMax: 20,
  connector: null,
};

export function moduleSheetOf(entry: Entry): ModuleSheet {
  const n = (key: string) => numberOf(entry, key);
  return {
    name: textOf(entry, 'name'),
    vocRef: n('vocRef'),
    iscRef: n('iscRef'),
    vmpRef: n('vmpRef'),
    impRef: n('impRef'),
    betaVoc: n('betaVoc'),
    alphaIsc: n('alphaIsc'),
    gammaPmp: n('gammaPmp'),
    cellsInSeries: n('cellsInSeries'),
    bypassGroups: n('bypassGroups'),
    noct: n('noct'),
    lengthM: n('lengthM'),
    widthM: n('widthM'),
    voltageSystemMax: n('voltageSystemMax'),
    fuseMax: n('fuseMax'),
    connector: typeof entry.connector === 'string' ? entry.connector : null,
  };
}
