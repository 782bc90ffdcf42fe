import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type DiodeReference, diodeParameters } from './diode-parameters';
import { fastModule, fastModuleFrom } from './fast';
import { currentAtVoltage, curvePoints, voltageAtCurrent } from './single-diode';

/** ms: many runs, on a busy machine. */
const SLOW = 60_000;

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true, noDefaultInfinity: true });

/** Made-up modules: an ordinary one, one of half-cut cells, and one with a poor shunt. */
const modules: DiodeReference[] = [
  {
    alphaIsc: 0.005,
    idealityVoltageRef: 1.55,
    photocurrentRef: 9.9,
    saturationCurrentRef: 2.8e-11,
    resistanceShuntRef: 420,
    resistanceSeries: 0.25,
  },
  {
    alphaIsc: 0.006,
    idealityVoltageRef: 1.31,
    photocurrentRef: 13.9,
    saturationCurrentRef: 5e-12,
    resistanceShuntRef: 138,
    resistanceSeries: 0.15,
  },
  {
    alphaIsc: 0.004,
    idealityVoltageRef: 1.8,
    photocurrentRef: 10.1,
    saturationCurrentRef: 2e-9,
    resistanceShuntRef: 40,
    resistanceSeries: 0.4,
  },
];

describe.each(modules)('fastModule of a module with Rsh $resistanceShuntRef Ω', (reference) => {
  const fast = fastModuleFrom(reference);

  it(
    'keeps its stated distance from the exact model',
    () => {
      fc.assert(
        fc.property(
          between(1, 1500),
          between(-40, 100),
          between(0, 1.02),
          (poaGlobal, temperature, share) => {
            const p = diodeParameters(reference, poaGlobal, temperature);
            const { voc, isc, vmp, imp, pmp } = curvePoints(p);
            expect(Math.abs(fast.voc(poaGlobal, temperature) - voc)).toBeLessThan(1e-4 * voc);
            expect(Math.abs(fast.isc(poaGlobal, temperature) - isc)).toBeLessThan(1e-3 * isc);
            const best = fast.mpp(poaGlobal, temperature);
            const allowed = poaGlobal >= 20 ? 5e-4 : 2e-3;
            expect(Math.abs(best.vmp / vmp - 1)).toBeLessThan(allowed);
            expect(Math.abs(best.imp / imp - 1)).toBeLessThan(allowed);
            expect(Math.abs((best.vmp * best.imp) / pmp - 1)).toBeLessThan(allowed);
            const current = share * isc;
            const exact = voltageAtCurrent(p, current);
            if (exact > 0) {
              expect(Math.abs(fast.voltageAt(poaGlobal, temperature, current) - exact)).toBeLessThan(
                1e-4 * voc,
              );
            }
            const voltage = share * voc;
            const flow = fast.currentAt(poaGlobal, temperature, voltage);
            expect(Math.abs(flow - currentAtVoltage(p, voltage))).toBeLessThan(1e-3 * isc);
          },
        ),
        { numRuns: 1000 },
      );
    },
    SLOW,
  );

  it('answers by the exact model outside its tables, and never with NaN', () => {
    fc.assert(
      fc.property(
        between(0, 2000),
        between(-90, 150),
        between(-20, 40),
        (poaGlobal, temperature, current) => {
          expect(Number.isFinite(fast.voc(poaGlobal, temperature))).toBe(true);
          const { vmp, imp } = fast.mpp(poaGlobal, temperature);
          expect(Number.isFinite(vmp * imp)).toBe(true);
          expect(fast.voltageAt(poaGlobal, temperature, current)).not.toBeNaN();
          expect(fast.currentAt(poaGlobal, temperature, 30)).not.toBeNaN();
        },
      ),
      { numRuns: 500 },
    );
    expect(fast.voc(0, 25)).toBe(0);
    expect(fast.mpp(0, 25)).toEqual({ vmp: 0, imp: 0 });
    expect(fast.voltageAt(0, 25, 1)).toBe(-Infinity);
    expect(fast.voltageAt(0, 25, 0)).toBe(0);
    expect(fast.mpp(1600, 120).imp).toBeGreaterThan(fast.mpp(1400, 120).imp);
  });

  it('refuses by name', () => {
    expect(() => fast.voc(-1, 25)).toThrow(/poaGlobal/);
    expect(() => fast.mpp(1000, 200)).toThrow(/temperatureCell/);
    expect(() => fast.voltageAt(Number.NaN, 25, 1)).toThrow(/poaGlobal/);
  });
});

describe('fastModule of a datasheet', () => {
  it('gives the datasheet back', () => {
    const fast = fastModule({
      name: 'made-up 72-cell module',
      vocRef: 49.5,
      iscRef: 11.6,
      vmpRef: 41.5,
      impRef: 10.85,
      betaVoc: -0.0027,
      alphaIsc: 0.0005,
      gammaPmp: -0.0035,
      cellsInSeries: 72,
      bypassGroups: 3,
      noct: 45,
    });
    expect(fast.voc(1000, 25)).toBeCloseTo(49.5, 2);
    expect(fast.isc(1000, 25)).toBeCloseTo(11.6, 2);
    expect(fast.mpp(1000, 25).vmp).toBeCloseTo(41.5, 1);
    expect(fast.mpp(1000, 25).imp).toBeCloseTo(10.85, 2);
  });
});
