import { describe, expect, it } from 'vitest';
import { gappedLine } from './gapped-line';

describe('a line with gaps', () => {
  it('breaks off at what is not known and goes on behind it', () => {
    expect(
      gappedLine([
        [0, 10],
        [1, 20.26],
        [2, null],
        [3, 30],
        [4, 40],
      ]),
    ).toBe('M0.0 10.0L1.0 20.3M3.0 30.0L4.0 40.0');
  });
  it('is nothing where nothing is known', () => {
    expect(gappedLine([[0, null]])).toBe('');
    expect(gappedLine([])).toBe('');
  });
});
