import { describe, expect, it } from 'vitest';
import type { RollCallRun } from '../../schemas/api/roll-call';
import { outlookOf } from './outlook';
import type { RollTally, RollUnit } from './tally';

const START = Date.parse('2026-12-01T10:00:00Z');
const run: RollCallRun = {
  id: '00000000-0000-4000-8000-000000000001',
  startedAt: new Date(START).toISOString(),
  startedBy: 'Odile Nkemelu',
  personOnSite: 'Per Aalto',
  stoppedAt: null,
  stoppedBy: null,
};
const unit = (stringName: string, position: number, heardAfterS: number | null): RollUnit => ({
  stringId: stringName,
  stringName,
  position,
  serial: `${stringName}-${position}`,
  roofPlace: '',
  answer:
    heardAfterS === null
      ? null
      : {
          serial: `${stringName}-${position}`,
          at: new Date(START + heardAfterS * 1000).toISOString(),
          stringId: null,
          position,
          gateway: 'gateway 1',
          signal: -60,
        },
  signal: -60,
});
const tallyOfUnits = (units: RollUnit[]): RollTally => ({
  roster: units.length,
  heard: units.filter((u) => u.answer).length,
  units,
  strings: [],
  gateways: [{ name: 'gateway 1', heard: 0, weakest: null, lastHeardAt: null, silent: false }],
  missing: units.filter((u) => !u.answer),
  unknown: [],
  weakest: null,
  mute: 0,
  emptySlots: 0,
});
const at = (s: number) => new Date(START + s * 1000);

describe('the outlook of a roll call', () => {
  const stirring = Array.from({ length: 60 }, (_, i) =>
    unit(i < 30 ? 'A1' : 'A2', i, i < 52 ? 10 + i * 10 : null),
  );
  it('says nothing from too few', () => {
    expect(outlookOf(tallyOfUnits([unit('A1', 1, 5), unit('A1', 2, null)]), run, at(60))).toBeNull();
  });
  it('expects no more than are missing, later than now, in a band round the line', () => {
    const outlook = outlookOf(tallyOfUnits(stirring), run, at(600));
    expect(outlook?.expected).toBeGreaterThan(0);
    expect(outlook?.expected).toBeLessThanOrEqual(8);
    for (const p of outlook?.curve ?? []) {
      expect(p.atS).toBeGreaterThanOrEqual(at(600).getTime() / 1000);
      expect(p.low).toBeLessThanOrEqual(p.expected + 1);
      expect(p.high).toBeGreaterThanOrEqual(p.expected - 1);
      expect(p.high).toBeLessThanOrEqual(60);
    }
  });
  it('names the string of which nobody stirred', () => {
    const dead = Array.from({ length: 14 }, (_, i) => unit('B4', i, null));
    const outlook = outlookOf(tallyOfUnits([...stirring, ...dead]), run, at(600));
    expect(outlook?.notStirred).toEqual([{ kind: 'string', group: 'B4', units: 14 }]);
  });
  it('stands on those that had answered before, without taking them for quick ones', () => {
    const earlier = Array.from({ length: 40 }, (_, i) => unit('C1', i, -3600));
    const alone = outlookOf(tallyOfUnits(stirring), run, at(600));
    const both = outlookOf(tallyOfUnits([...stirring, ...earlier]), run, at(600));
    expect(both?.expected).toBe(alone?.expected);
    expect(both?.curve[0]?.expected).toBeCloseTo((alone?.curve[0]?.expected ?? 0) + 40, 6);
  });
});
