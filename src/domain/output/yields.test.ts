import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type YieldRecord, yields } from './yields';

const inputs = { p0: 4000, gammaPmp: -0.004, intervalH: 0.25, temperatureModuleAnnual: 42 };
const record: fc.Arbitrary<YieldRecord> = fc.record({
  poaGlobal: fc.option(fc.double({ min: 0, max: 1300, noNaN: true })),
  temperatureModule: fc.option(fc.double({ min: -30, max: 80, noNaN: true })),
  powerOut: fc.option(fc.double({ min: 0, max: 5000, noNaN: true })),
  powerDc: fc.option(fc.double({ min: 0, max: 5200, noNaN: true })),
  available: fc.boolean(),
});

describe('yields', () => {
  it('are finite or null whatever is missing', () => {
    fc.assert(
      fc.property(fc.array(record, { maxLength: 40 }), (records) => {
        for (const value of Object.values(yields(records, inputs)) as (number | null)[]) {
          if (value !== null) expect(Number.isFinite(value)).toBe(true);
        }
      }),
    );
  });

  it('don’t change with a gap in the irradiance, and say that there was one', () => {
    const day = [200, 500, 800, 500].map((poaGlobal) => ({
      poaGlobal,
      temperatureModule: 40,
      powerOut: poaGlobal * 3.4,
    }));
    const whole = yields(day, inputs);
    const gap = yields([...day, { poaGlobal: null, temperatureModule: 40, powerOut: 3000 }], inputs);
    expect(gap.performanceRatio).toBeCloseTo(whole.performanceRatio ?? NaN, 12);
    expect(whole.completeness).toBe(1);
    expect(gap.completeness).toBe(0.8);
  });

  it('close: reference is final yield, system loss and capture loss', () => {
    const result = yields(
      [
        { poaGlobal: 600, temperatureModule: 40, powerOut: 2000, powerDc: 2100 },
        { poaGlobal: 900, temperatureModule: 50, powerOut: 3000, powerDc: 3150 },
      ],
      inputs,
    );
    const { finalYieldH, systemLossH, captureLossH, referenceYieldH, arrayYieldH } = result;
    expect(finalYieldH + (systemLossH ?? NaN) + (captureLossH ?? NaN)).toBeCloseTo(referenceYieldH, 12);
    expect(arrayYieldH).toBeCloseTo(finalYieldH + (systemLossH ?? NaN), 12);
  });

  it('correct for heat: a hot plant’s ratio at 25 °C is above its plain one', () => {
    const hot = yields([{ poaGlobal: 1000, temperatureModule: 60, powerOut: 3200 }], inputs);
    expect(hot.performanceRatioStc).toBeGreaterThan(hot.performanceRatio ?? NaN);
    const mean = yields([{ poaGlobal: 1000, temperatureModule: 60, powerOut: 3200 }], {
      ...inputs,
      temperatureModuleAnnual: 60,
    });
    expect(mean.performanceRatioAnnual).toBeCloseTo(mean.performanceRatio ?? NaN, 12);
  });

  it('count availability by daylight only', () => {
    const result = yields(
      [
        { poaGlobal: 0, temperatureModule: 10, powerOut: 0, available: false },
        { poaGlobal: 500, temperatureModule: 30, powerOut: 0, available: false },
        { poaGlobal: 500, temperatureModule: 30, powerOut: 1700, available: true },
        { poaGlobal: 500, temperatureModule: 30, powerOut: 1700 },
      ],
      inputs,
    );
    expect(result.availability).toBe(0.5);
    expect(yields([], inputs)).toMatchObject({ availability: null, performanceRatio: null, completeness: 0 });
  });

  it('refuse by name', () => {
    expect(() => yields([], { ...inputs, p0: 0 })).toThrow(/p0/);
    expect(() => yields([], { ...inputs, gammaPmp: -0.4 })).toThrow(/gammaPmp/);
    expect(() => yields([], { ...inputs, intervalH: 0 })).toThrow(/intervalH/);
    expect(() => yields([{ poaGlobal: Number.NaN, temperatureModule: 1, powerOut: 1 }], inputs)).toThrow(
      /records\[0\].poaGlobal/,
    );
  });
});
