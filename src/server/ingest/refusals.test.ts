import { describe, expect, it } from 'vitest';
import { kindOf } from './refusals';

describe('what is counted together', () => {
  it.each([
    ['frames[3].state[11]', 'is 9; 0 to 4 are known', 'frames[40].state[2]', 'is 77; 0 to 4 are known'],
    ['at[0]', "is 4000 s ahead of the server's clock", 'at[7]', "is 301 s ahead of the server's clock"],
    [
      'rows[0].inverter',
      '"Inverter 9" is not in the roster',
      'rows[3].inverter',
      '"Ω\u0000" is not in the roster',
    ],
  ])('%s: %s, and %s: %s', (field, reason, otherField, otherReason) => {
    expect(kindOf(field, reason)).toBe(kindOf(otherField, otherReason));
  });
  it('keeps apart what is wrong with another field, or in another way', () => {
    const kinds = [
      kindOf('frames[0].state', 'is missing'),
      kindOf('frames[0].via', 'is missing'),
      kindOf('frames[0].via', 'has 3 values'),
    ];
    expect(new Set(kinds).size).toBe(3);
  });
  it('is one short line whatever a logger makes of a name', () => {
    const kind = kindOf(`a\u0000b\n${'x'.repeat(1000)}`, 'is not known in this message');
    expect(kind.length).toBeLessThanOrEqual(200);
    // eslint-disable-next-line no-control-regex -- that is what must not be there
    expect(kind).not.toMatch(/[\u0000-\u001f]/);
  });
});
