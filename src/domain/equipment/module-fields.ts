import { moduleFieldTexts as texts } from '../../words/domain-equipment-fields';
import { NAME_FIELD, figure, numberOf, textOf, type Entry, type Field } from './fields';
import type { ModuleSheet } from './module-type';

export const MODULE_FIELDS: readonly Field[] = [
  NAME_FIELD,
  figure('vocRef', 'voc_ref', texts.vocRef, 'V', 1, 200),
  figure('iscRef', 'isc_ref', texts.iscRef, 'A', 0.1, 40),
  figure('vmpRef', 'vmp_ref', texts.vmpRef, 'V', 1, 200),
  figure('impRef', 'imp_ref', texts.impRef, 'A', 0.1, 40),
  figure('betaVoc', 'beta_voc', texts.betaVoc, '%/K', -1, 0, { scale: 0.01 }),
  figure('alphaIsc', 'alpha_isc', texts.alphaIsc, '%/K', -0.2, 0.5, { scale: 0.01 }),
  figure('gammaPmp', 'gamma_pmp', texts.gammaPmp, '%/K', -1, 0, { scale: 0.01 }),
  figure('cellsInSeries', 'cells_in_series', texts.cellsInSeries, '', 1, 300, { whole: true }),
  figure('bypassGroups', 'bypass_groups', texts.bypassGroups, '', 1, 12, { whole: true }),
  figure('noct', 'noct', texts.noct, '°C', 30, 70),
  figure('lengthM', 'length_m', texts.lengthM, 'm', 0.2, 4),
  figure('widthM', 'width_m', texts.widthM, 'm', 0.2, 4),
  {
    kind: 'connector',
    key: 'connector',
    column: 'connector_type_id',
    ...texts.connector,
  },
  figure('voltageSystemMax', 'voltage_system_max', texts.voltageSystemMax, 'V', 50, 2000),
  figure('fuseMax', 'fuse_max', texts.fuseMax, 'A', 1, 100),
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
