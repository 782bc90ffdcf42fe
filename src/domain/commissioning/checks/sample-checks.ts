import { UNIT_PRESETS } from '../../equipment/unit-type';
import type { CheckContext, CheckKey, CheckStanding, Figures } from './definition';
import { CHECKS } from './list';

/** A sound string of 14 units and its records, for the tests of this folder. */

export const H4 = { id: 'c-h4', name: 'H4 set', maker: 'Tidewell', family: 'H4' };
export const K6 = { id: 'c-k6', name: 'K6 set', maker: 'Northgate', family: 'K6' };

export const context = (more: Partial<CheckContext> = {}): CheckContext => ({
  units: 14,
  emptySlots: 0,
  unitType: { ...UNIT_PRESETS.monitored, name: 'Watching unit' },
  module: {
    name: 'M60',
    vocRef: 41.2,
    iscRef: 11.4,
    vmpRef: 34.1,
    impRef: 10.8,
    betaVoc: -0.0028,
    alphaIsc: 0.0005,
    gammaPmp: -0.0036,
    cellsInSeries: 60,
    bypassGroups: 3,
    noct: 45,
  },
  ruleSet: 'rapid_shutdown_30s',
  connectors: [H4, K6],
  pairs: [],
  siblingCurrents: [],
  ...more,
});

export const standing = (check: CheckKey, more: Partial<CheckStanding> = {}): CheckStanding => ({
  check,
  result: 'pass',
  reason: '',
  figures: {},
  atS: 1_790_000_000,
  ...more,
});

const SOUND: Partial<Record<CheckKey, Figures>> = {
  connectors: { moduleLead: H4.id, unitInput: H4.id },
  earth_continuity: { resistance: 0.3 },
  voltage_to_earth: { between: 560, positive: 12, negative: -9 },
  string_current: { current: 9.8, method: 'operating' },
};
/** Every check passed, the insulation test not applicable. */
export const allPassed = (): CheckStanding[] =>
  CHECKS.map((c) =>
    c.key === 'insulation'
      ? standing('insulation', { result: 'not_applicable', reason: 'The maker of the units allows none.' })
      : standing(c.key, { figures: SOUND[c.key] ?? {} }),
  );
