import type { ModuleType } from '../../domain/equipment/module-type';
import { sharedReadingsSheets } from '../../words/shared-readings';

/** Datasheets of no maker in particular: what modules of such a size usually print. */

export const SHEETS = {
  m60: {
    name: sharedReadingsSheets.n60CellsAbout330,
    vocRef: 40.6,
    iscRef: 10.3,
    vmpRef: 33.9,
    impRef: 9.75,
    betaVoc: -0.0028,
    alphaIsc: 0.0005,
    gammaPmp: -0.0036,
    cellsInSeries: 60,
    bypassGroups: 3,
    noct: 45,
  },
  m108: {
    name: sharedReadingsSheets.n108HalfCellsAbout,
    vocRef: 37.3,
    iscRef: 13.9,
    vmpRef: 31.2,
    impRef: 13.15,
    betaVoc: -0.0027,
    alphaIsc: 0.00048,
    gammaPmp: -0.0034,
    cellsInSeries: 54,
    bypassGroups: 3,
    noct: 44,
  },
  m144: {
    name: sharedReadingsSheets.n144HalfCellsAbout,
    vocRef: 49.9,
    iscRef: 14.0,
    vmpRef: 41.9,
    impRef: 13.1,
    betaVoc: -0.0026,
    alphaIsc: 0.00046,
    gammaPmp: -0.0034,
    cellsInSeries: 72,
    bypassGroups: 3,
    noct: 44,
  },
} as const satisfies Record<string, ModuleType>;
export type SheetKey = keyof typeof SHEETS;
export const SHEET_KEYS = Object.keys(SHEETS) as SheetKey[];
