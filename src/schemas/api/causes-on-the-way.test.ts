import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { causeSent } from './cause-sent';
import { causesAfter, received, receivedCause, sent, sentCause } from './causes-on-the-way';
import type { CauseNow } from './now';

const ids = Array.from({ length: 4 }, (_, k) => `00000000-0000-4000-8000-00000000000${k}`);
const moments = ['2026-12-03T05:00:00.000Z', '2026-12-03T05:01:00.000Z'];
const unit = fc.record({
  stringId: fc.constantFrom(...ids),
  stringName: fc.constant('A1'),
  position: fc.option(fc.integer({ min: 1, max: 40 })),
  serial: fc.option(fc.string({ maxLength: 20 })),
  since: fc.constantFrom(...moments),
});
const causeWith = (units: CauseNow['units'], siteId = ids[0]!, key = 'silent:alone'): CauseNow => ({
  key: `${key}@${siteId}`,
  verdict: 'silent',
  siteId,
  siteName: 'Mill Glade',
  since: moments[0]!,
  sharedPart: null,
  headline: 'Units are silent',
  evidence: 'Nothing was heard of them.',
  alternatives: [],
  confidence: 0.5,
  units,
  lossWhPerDay: null,
});
const inOrder = (units: CauseNow['units']): string[] => units.map((u) => JSON.stringify(u)).sort();

describe('causes on their way to a browser', () => {
  it('arrive with every unit, whatever is known of each', () => {
    fc.assert(
      fc.property(fc.array(unit), (units) => {
        const over = causeSent.parse(JSON.parse(JSON.stringify(sentCause(causeWith(units)))));
        const arrived = receivedCause(over);
        expect(inOrder(arrived.units)).toEqual(inOrder(units));
        expect({ ...arrived, units: [] }).toEqual(causeWith([]));
      }),
    );
  });

  it('a hundred units of an absent logger take less than a fifth of what they are', () => {
    const units = Array.from({ length: 100 }, (_, k) => ({
      stringId: ids[k % 4]!,
      stringName: `S${k % 4}`,
      position: 1 + (k >> 2),
      serial: `FU-0000${2500 + k}`,
      since: moments[0]!,
    }));
    const cause = causeWith(units);
    expect(JSON.stringify(sentCause(cause)).length).toBeLessThan(JSON.stringify(cause).length / 5);
    expect(received(sent({ at: moments[0]!, causes: [cause] })).causes[0]?.units).toHaveLength(100);
  });

  it('of some sites replace what was known of these, and leave the others', () => {
    const [here, there] = [causeWith([], ids[0]), causeWith([], ids[1])];
    const other = causeWith([], ids[0], 'stuck:alone');
    const known = [here, there];
    expect(causesAfter(known, {})).toBe(known);
    expect(causesAfter(known, { causesAt: [{ site: ids[0]!, causes: [sentCause(other)] }] })).toEqual([
      there,
      other,
    ]);
    expect(causesAfter(known, { causesAt: [{ site: ids[1]!, causes: [] }] })).toEqual([here]);
    expect(causesAfter(known, { causes: [sentCause(other)] })).toEqual([other]);
  });
});
