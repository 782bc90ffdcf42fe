import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { serialOfCode } from './code';

describe('the serial in a code', () => {
  it('is the whole text of a plain bar code', () => {
    expect(serialOfCode(' un-4711 ')).toBe('UN-4711');
    fc.assert(
      fc.property(fc.stringMatching(/^[A-Z][A-Z0-9-]{3,20}$/), (serial) => {
        expect(serialOfCode(serial)).toBe(serial);
      }),
    );
  });
  // GS1 General Specifications: (01) 14 digits, (21) serial of up to 20 characters, FNC1 ends variable fields
  it('is field 21 of a GS1 element string', () => {
    expect(serialOfCode('0104012345678901' + '21UN4711')).toBe('UN4711');
    expect(serialOfCode('(01)04012345678901(10)LOT7(21)UN4711')).toBe('UN4711');
    expect(serialOfCode(']d2' + '\u001d0104012345678901' + '10LOT7\u001d' + '21UN4711')).toBe('UN4711');
    expect(serialOfCode('0104012345678901' + '11250601' + '21UN4711\u001d10LOT7')).toBe('UN4711');
  });
  it('is what stands after its name', () => {
    expect(serialOfCode('Model: Watcher 15\nS/N: un-4711\nDate: 2026-05')).toBe('UN-4711');
    expect(serialOfCode('P=W15;SN=UN-4711;V=2')).toBe('UN-4711');
    expect(serialOfCode('https://units.example/u?sn=UN-4711')).toBe('UN-4711');
    expect(serialOfCode('https://units.example/u/UN-4711')).toBe('UN-4711');
  });
  it('is shown as it is where nothing in it is one', () => {
    expect(serialOfCode('hello there')).toBe('hello there');
  });
});
