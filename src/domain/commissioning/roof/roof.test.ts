import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ordinal } from '../../../words/domain-roof';
import { compass, layString, placeWords, startAfter, type Laying } from './lay';
import { outlineArea, outlineFault, within, type Outline } from './outline';

const LAYING: Laying = {
  count: 14,
  start: { x: 10, y: 5 },
  direction: 90,
  nextRow: 'right',
  perRow: 7,
  moduleLength: 1.72,
  moduleWidth: 1.13,
  orientation: 'portrait',
  gapAlong: 0.02,
  gapAcross: 0.02,
  serpentine: true,
  surfaceTilt: 0,
  surfaceAzimuth: 180,
};

describe('a string on the roof', () => {
  it('runs along the first row and back along the second', () => {
    const laid = layString(LAYING);
    expect(laid[0]).toMatchObject({ x: 10, y: 5, row: 0, column: 0 });
    expect(laid[6]).toMatchObject({ x: 16.9, y: 5, column: 6 });
    expect(laid[7]).toMatchObject({ x: 16.9, y: 3.26, row: 1, column: 6 });
    expect(laid[13]).toMatchObject({ x: 10, y: 3.26, column: 0 });
    const plain = layString({ ...LAYING, serpentine: false });
    expect(plain[7]).toMatchObject({ x: 10, y: 3.26, column: 0 });
  });
  it('lies closer in plan down a slope, by its cosine', () => {
    const steep = layString({ ...LAYING, surfaceTilt: 60 });
    expect(steep[7]?.y).toBeCloseTo(5 - 1.74 / 2, 3);
    expect(steep[6]?.x).toBeCloseTo(16.9, 3);
  });
  it('keeps neighbours in a row a module and a gap apart, whatever the direction', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 63 }),
        fc.integer({ min: 1, max: 20 }),
        fc.integer({ min: 0, max: 359 }),
        fc.constantFrom<Laying['nextRow']>('left', 'right'),
        fc.constantFrom<Laying['orientation']>('portrait', 'landscape'),
        fc.boolean(),
        (count, perRow, direction, nextRow, orientation, serpentine) => {
          const laid = layString({ ...LAYING, count, perRow, direction, nextRow, orientation, serpentine });
          expect(laid.map((m) => m.position)).toEqual(Array.from({ length: count }, (_, i) => i + 1));
          const apart = (orientation === 'portrait' ? 1.13 : 1.72) + 0.02;
          laid.forEach((m, i) => {
            const next = laid[i + 1];
            if (next && next.row === m.row)
              expect(Math.hypot(next.x - m.x, next.y - m.y)).toBeCloseTo(apart, 2);
          });
          expect(new Set(laid.map((m) => `${m.row} ${m.column}`)).size).toBe(count);
        },
      ),
    );
  });
  it('says where each module is as a person would', () => {
    const words = (some: Partial<Laying>, from = '') => {
      const laying = { ...LAYING, surfaceTilt: 20, ...some };
      return placeWords(laying, layString(laying), from);
    };
    expect(words({})[4]).toBe('upper row, fifth from the west end');
    expect(words({}, 'gable')[9]).toBe('lower row, fifth from the gable');
    expect(words({ nextRow: 'left' })[0]).toBe('lower row, first from the west end');
    expect(words({ perRow: 14 })[12]).toBe('13th from the west end');
    expect(words({ perRow: 3 })[0]).toBe('top row, first from the west end');
    expect(words({ perRow: 3 })[4]).toBe('second row from the top, second from the west end');
    expect(words({ surfaceTilt: 1 })[13]).toBe('second row, first from the west end');
    expect(ordinal(21)).toBe('21st');
    expect(ordinal(112)).toBe('112th');
    expect(compass(-90)).toBe('west');
  });
  it('lets the next string start on the next row', () => {
    expect(startAfter(LAYING)).toEqual({ x: 10, y: 1.52 });
    expect(startAfter({ ...LAYING, count: 10 })).toEqual({ x: 10, y: 1.52 });
  });
});

describe('an outline', () => {
  const square: Outline = [
    [0, 0],
    [10, 0],
    [10, 8],
    [0, 8],
  ];
  it('is right as a simple line round some metres', () => {
    expect(outlineFault(square)).toBeNull();
    expect(outlineFault([])).toBeNull();
    expect(outlineArea(square)).toBe(80);
    expect(within(square, { x: 5, y: 4 })).toBe(true);
    expect(within(square, { x: 11, y: 4 })).toBe(false);
    expect(within([], { x: 11, y: 4 })).toBe(true);
  });
  it('is told what is wrong with it', () => {
    expect(outlineFault(square.slice(0, 2))).toContain('three points');
    expect(
      outlineFault([
        [0, 0],
        [10, 8],
        [10, 0],
        [0, 8],
      ]),
    ).toContain('crosses');
    expect(
      outlineFault([
        [0, 0],
        [0.1, 0],
        [0, 0.1],
      ]),
    ).toContain('square metre');
    expect(
      outlineFault([
        [0, 0],
        [Number.NaN, 1],
        [1, 1],
      ]),
    ).toContain('2000 m');
  });
  it('turned or moved holds the same', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 359 }), fc.integer({ min: -50, max: 50 }), (turn, by) => {
        const [c, s] = [Math.cos(turn), Math.sin(turn)];
        const moved = square.map(([x, y]): [number, number] => [c * x - s * y + by, s * x + c * y - by]);
        expect(outlineFault(moved)).toBeNull();
        expect(outlineArea(moved)).toBeCloseTo(80, 6);
        expect(within(moved, { x: c * 5 - s * 4 + by, y: s * 5 + c * 4 - by })).toBe(true);
      }),
    );
  });
});
