import { describe, expect, it } from 'vitest';
import type { SlotNow, StringNow } from '../../schemas/api/now';
import { confirmFaults, UNCONFIRMED } from './Confirm';
import { apart, nameOf, seatAt, slotLabel, typicalCurrent } from './evidence';

const slot = (position: number, current: number | null, more: Partial<SlotNow> = {}): SlotNow =>
  ({ position, serial: `U-${position}`, current, state: 'passing', ...more }) as SlotNow;
const string = (slots: SlotNow[]): StringNow => ({ id: 'c3', name: 'C3', slots }) as StringNow;

describe('what the newest reports say of a unit in a slot', () => {
  const c3 = string([slot(1, 9), slot(2, 9.2), slot(3, 9.1), slot(4, 7.5), slot(5, null)]);
  it('its string’s current leaves the unit itself out, and needs three that report', () => {
    expect(typicalCurrent(c3, 4)).toBe(9.1);
    expect(typicalCurrent(string([slot(1, 9), slot(2, 9), slot(3, null)]), null)).toBeNull();
  });
  it('how far apart they are, and nothing where hardly any current flows', () => {
    expect(apart(7.5, 9)).toBeCloseTo(1 / 6, 9);
    expect(apart(0.1, 0.2)).toBeNull();
    expect(apart(null, 9)).toBeNull();
  });
  it('a place by its string and position', () => {
    const seat = seatAt([c3], { stringId: 'c3', position: 4 });
    expect(seat && nameOf(seat)).toBe('C3-4');
    expect(seatAt([c3], { stringId: 'c3', position: 0 })).toBeNull();
    expect(seatAt([c3], null)).toBeNull();
  });
  it('a slot in a list says who stands there and whether anybody hears it', () => {
    expect(slotLabel(slot(4, 7, { serial: null }), null)).toBe('4 · no unit');
    expect(slotLabel(slot(4, 7), new Set(['U-4']))).toBe('4 · U-4');
    expect(slotLabel(slot(4, null), new Set())).toBe('4 · U-4, unheard');
    expect(slotLabel(slot(4, null, { state: 'silent' }), null)).toBe('4 · U-4, silent');
  });
});

describe('before a change of the as-built is written', () => {
  it('what was seen, why, and the physical check are asked for', () => {
    expect(Object.keys(confirmFaults(UNCONFIRMED))).toEqual(['seen', 'reason', 'checked']);
    expect(confirmFaults({ seen: 'label reads so', reason: 'misread', checked: true })).toEqual({});
  });
});
