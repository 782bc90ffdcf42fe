import type { UnitState, Verdict } from '../verdicts/codes';
import type { SiteCondition, SlotCondition, StringCondition } from './site';

/** A site for the tests of this folder: strings on two transmitters, two gateways, one logger. */

export const NOW = 1_750_000_000;

export function slotOf(position: number, more: Partial<SlotCondition> = {}): SlotCondition {
  return {
    position,
    serial: `WK-${String(position).padStart(4, '0')}`,
    state: 'passing',
    verdict: 'ok',
    sinceS: NOW - 3600,
    seenS: NOW - 20,
    gateway: 'G1',
    ...more,
  };
}

export function stringOf(name: string, n: number, more: Partial<StringCondition> = {}): StringCondition {
  return {
    id: `id-${name}`,
    name,
    kind: 'monitored',
    releasedBy: 'keep_alive',
    zone: 'Z1',
    transmitters: ['T1'],
    logger: 'L1',
    inverter: 'I1',
    input: 1,
    slots: Array.from({ length: n }, (_, i) => slotOf(i + 1, { serial: `${name}-${i + 1}` })),
    finding: null,
    ...more,
  };
}

export function siteOf(strings: StringCondition[], more: Partial<SiteCondition> = {}): SiteCondition {
  return {
    name: 'Mill',
    atS: NOW,
    reportIntervalS: 60,
    strings,
    zones: [{ name: 'Z1', inForce: 'released' }],
    transmitters: [
      { name: 'T1', zone: 'Z1', inForce: 'released' },
      { name: 'T2', zone: 'Z1', inForce: 'released' },
    ],
    gateways: [
      { name: 'G1', lastHeardS: NOW - 10 },
      { name: 'G2', lastHeardS: NOW - 10 },
    ],
    loggers: [{ name: 'L1', connected: true }],
    inputs: [{ inverter: 'I1', number: 1, currentA: 7 }],
    ...more,
  };
}

/** The same string with some of its units in another state and verdict. */
export function withUnits(
  string: StringCondition,
  positions: readonly number[] | 'all',
  state: UnitState | null,
  verdict: Verdict,
): StringCondition {
  return {
    ...string,
    slots: string.slots.map((s) =>
      positions === 'all' || positions.includes(s.position) ? { ...s, state, verdict } : s,
    ),
  };
}
