import { describe, expect, it } from 'vitest';
import type { SlotNow } from '../../schemas/api/now';
import { workbenchView } from '../../schemas/api/workbench';
import { chosenUnits, DEFAULTS, permanentAddress, shifted, unitsInAddress } from './view';

const slot = (position: number, verdict: SlotNow['verdict'] = 'ok'): SlotNow => ({
  position,
  serial: `S${position}`,
  roofPlace: '',
  state: 'passing',
  verdict,
  since: null,
  seen: null,
  voltage: 38,
  voltageIn: null,
  current: 8,
  power: 300,
  temperature: 40,
  signal: -60,
  gateway: null,
  assumed: false,
  expected: 38,
});
const slots = [slot(1), slot(2, 'stuck'), slot(3), slot(4, 'flapping')];

describe('the view in the address', () => {
  it('has the defaults that the server reads from an empty one', () => {
    expect(workbenchView.parse({})).toEqual(DEFAULTS);
  });

  it('begins with the units in trouble, and keeps "none" apart from nothing said', () => {
    expect(chosenUnits(DEFAULTS, slots)).toEqual([2, 4]);
    expect(chosenUnits({ units: 'none' }, slots)).toEqual([]);
    expect(chosenUnits({ units: '3,1,3,60' }, slots)).toEqual([3, 1]);
    expect(unitsInAddress([])).toBe('none');
    expect(unitsInAddress([9, 2])).toBe('2,9');
  });

  it('is written out for a link that shows the same tomorrow, and reads back as itself', () => {
    const present = { day: '2026-12-01', atS: 1_796_133_799, units: [2, 4] };
    const address = permanentAddress('/sites/s/strings/t', { ...DEFAULTS, quantity: 'power' }, present);
    const read = workbenchView.parse(Object.fromEntries(new URL(address, 'http://x').searchParams));
    expect(read).toEqual({
      ...DEFAULTS,
      quantity: 'power',
      on: '2026-12-01',
      at: '1796133780',
      units: '2,4',
    });
    // written out already: nothing is added
    expect(permanentAddress('/sites/s/strings/t', read, { ...present, day: '2027-01-01', units: [] })).toBe(
      address,
    );
  });

  it('takes what can’t be read as if it were left out', () => {
    const read = workbenchView.parse({
      range: 'century',
      at: 'x',
      units: '1,2,3,4,5,6,7,8,9',
      on: '2026-13-01',
    });
    expect(read).toEqual(DEFAULTS);
  });

  it('goes from day to day over the ends of months and years', () => {
    expect(shifted('2026-12-31', 1)).toBe('2027-01-01');
    expect(shifted('2028-03-01', -1)).toBe('2028-02-29');
  });
});
