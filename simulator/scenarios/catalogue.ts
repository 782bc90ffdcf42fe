import type { ModuleType } from '../../src/domain/equipment/module-type';
import { UNIT_PRESETS, type UnitType } from '../../src/domain/equipment/unit-type';

/** Equipment of our own invention, with figures of the size that such equipment has. */

export const MODULE_TYPES: ModuleType[] = [
  {
    name: 'Mono 450, 144 half cells',
    vocRef: 49.3,
    iscRef: 11.6,
    vmpRef: 41.1,
    impRef: 10.95,
    betaVoc: -0.0027,
    alphaIsc: 0.00048,
    gammaPmp: -0.0034,
    cellsInSeries: 72,
    bypassGroups: 3,
    noct: 45,
  },
  {
    name: 'Mono 430, 108 half cells',
    vocRef: 38.7,
    iscRef: 13.95,
    vmpRef: 32.3,
    impRef: 13.32,
    betaVoc: -0.0025,
    alphaIsc: 0.00045,
    gammaPmp: -0.003,
    cellsInSeries: 54,
    bypassGroups: 3,
    noct: 43,
  },
  {
    name: 'Poly 285, 60 cells',
    vocRef: 38.5,
    iscRef: 9.45,
    vmpRef: 31.6,
    impRef: 9.02,
    betaVoc: -0.0031,
    alphaIsc: 0.00055,
    gammaPmp: -0.004,
    cellsInSeries: 60,
    bypassGroups: 3,
    noct: 46,
  },
];

export const UNIT_TYPES: UnitType[] = [
  { ...UNIT_PRESETS.monitored, name: 'Reporting unit, both sides', measures: 'both' },
  { ...UNIT_PRESETS.monitored, name: 'Reporting unit, output side' },
  { ...UNIT_PRESETS.monitored, name: 'Reporting unit that holds', onCommandLoss: 'holds' },
  {
    ...UNIT_PRESETS.monitored,
    name: 'Reporting unit on keep-alive',
    measures: 'both',
    outOfBox: 'shutdown',
    releasedBy: 'keep_alive',
  },
  { ...UNIT_PRESETS.shutdown_only, name: 'Shutdown unit' },
  { ...UNIT_PRESETS.optimizing, name: 'Optimizing unit' },
];

export const [BOTH_SIDES, OUTPUT_SIDE, HOLDING, ON_KEEP_ALIVE, SHUTDOWN_ONLY, OPTIMIZING] = [
  'Reporting unit, both sides',
  'Reporting unit, output side',
  'Reporting unit that holds',
  'Reporting unit on keep-alive',
  'Shutdown unit',
  'Optimizing unit',
] as const;
export const [MONO_450, MONO_430, POLY_285] = [
  'Mono 450, 144 half cells',
  'Mono 430, 108 half cells',
  'Poly 285, 60 cells',
] as const;
