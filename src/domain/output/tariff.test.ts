import { describe, expect, it } from 'vitest';
import { priceOn, worthOf } from './tariff';

const tariffs = [
  { from: '2026-04-01', priceKWh: 0.3 },
  { from: '2025-01-01', priceKWh: 0.2 },
];

describe('tariffs', () => {
  it('hold from their day until the next, in whatever order they come', () => {
    expect(priceOn('2024-12-31', tariffs)).toBeNull();
    expect(priceOn('2025-01-01', tariffs)).toBe(0.2);
    expect(priceOn('2026-03-31', tariffs)).toBe(0.2);
    expect(priceOn('2026-04-01', tariffs)).toBe(0.3);
  });
  it('price each day at its own, and say what has none', () => {
    expect(
      worthOf(
        [
          { day: '2024-12-31', energyKWh: 5 },
          { day: '2026-03-31', energyKWh: 10 },
          { day: '2026-04-01', energyKWh: 10 },
        ],
        tariffs,
      ),
    ).toEqual({ money: 5, unpricedKWh: 5 });
    expect(worthOf([{ day: '2026-01-01', energyKWh: 1 }], [])).toBeNull();
  });
});
