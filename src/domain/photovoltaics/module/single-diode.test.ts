import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type DiodeReference, diodeParameters, parametersOfGroup } from './diode-parameters';
import { pvwattsDc } from './pvwatts';
import {
  currentAtVoltage,
  curvePoints,
  iscOfDiode,
  maximumPowerPoint,
  vocOfDiode,
  voltageAtCurrent,
} from './single-diode';
import { translatePoint } from './translation';

/** ms: many runs, on a busy machine. */
const SLOW = 60_000;

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true, noDefaultInfinity: true });
/** Made-up silicon modules of 36 to 96 cells. */
const silicon: fc.Arbitrary<DiodeReference> = fc
  .record({
    cells: fc.integer({ min: 36, max: 96 }),
    ideality: between(0.9, 1.4),
    photocurrentRef: between(2, 20),
    vocOfCell: between(0.55, 0.75),
    resistanceSeries: between(0, 0.6),
    resistanceShuntRef: between(50, 5000),
    alpha: between(0, 0.001),
  })
  .map(({ cells, ideality, photocurrentRef, vocOfCell, alpha, ...rest }) => {
    const idealityVoltageRef = cells * ideality * 0.025693;
    return {
      ...rest,
      photocurrentRef,
      idealityVoltageRef,
      alphaIsc: alpha * photocurrentRef,
      saturationCurrentRef: photocurrentRef * Math.exp((-cells * vocOfCell) / idealityVoltageRef),
    };
  });
const light = between(0, 2000);
const temperature = between(-90, 150);
const usualTemperature = between(-40, 100);

describe('single diode', () => {
  it(
    'has no NaN anywhere it is stated for',
    () => {
      fc.assert(
        fc.property(silicon, light, temperature, (reference, poaGlobal, temperatureCell) => {
          const p = diodeParameters(reference, poaGlobal, temperatureCell);
          for (const value of Object.values(curvePoints(p))) {
            expect(Number.isFinite(value)).toBe(true);
            expect(value).toBeGreaterThanOrEqual(-1e-9);
          }
        }),
        { numRuns: 1000 },
      );
    },
    SLOW,
  );

  it('gives less power than voc times isc, with every point in its order', () => {
    fc.assert(
      fc.property(silicon, between(1, 2000), usualTemperature, (reference, poaGlobal, temperatureCell) => {
        const points = curvePoints(diodeParameters(reference, poaGlobal, temperatureCell));
        expect(points.pmp).toBeLessThan(points.voc * points.isc);
        expect(points.vmp).toBeLessThan(points.voc);
        expect(points.imp).toBeLessThan(points.isc);
        expect(points.ix).toBeLessThanOrEqual(points.isc);
        expect(points.ixx).toBeLessThanOrEqual(points.imp);
        expect(points.fillFactor).toBeGreaterThan(0.2);
        expect(points.fillFactor).toBeLessThan(1);
      }),
    );
  });

  it('has a voc that falls with temperature and rises with light', () => {
    fc.assert(
      fc.property(silicon, between(10, 1990), between(-40, 95), (reference, poaGlobal, temperatureCell) => {
        const voc = (g: number, t: number) => vocOfDiode(diodeParameters(reference, g, t));
        const here = voc(poaGlobal, temperatureCell);
        expect(voc(poaGlobal, temperatureCell + 5)).toBeLessThan(here);
        expect(voc(poaGlobal + 10, temperatureCell)).toBeGreaterThan(here);
      }),
    );
  });

  it('answers current and voltage as one curve, over voc and beyond isc too', () => {
    fc.assert(
      fc.property(
        silicon,
        between(1, 2000),
        usualTemperature,
        between(-1, 1.5),
        (reference, poaGlobal, temperatureCell, share) => {
          const p = diodeParameters(reference, poaGlobal, temperatureCell);
          const isc = iscOfDiode(p);
          const voltage = voltageAtCurrent(p, share * isc);
          expect(Math.abs(currentAtVoltage(p, voltage) - share * isc)).toBeLessThan(1e-8 * isc);
        },
      ),
    );
  });

  it('has nothing above its maximum power point', () => {
    fc.assert(
      fc.property(
        silicon,
        between(1, 2000),
        usualTemperature,
        between(0, 1),
        (reference, poaGlobal, temperatureCell, share) => {
          const p = diodeParameters(reference, poaGlobal, temperatureCell);
          const voltage = share * vocOfDiode(p);
          const { pmp } = maximumPowerPoint(p);
          expect(voltage * currentAtVoltage(p, voltage)).toBeLessThanOrEqual(pmp * (1 + 1e-12));
        },
      ),
    );
  });

  it('is the sum of its groups', () => {
    fc.assert(
      fc.property(
        silicon,
        between(1, 2000),
        usualTemperature,
        fc.integer({ min: 1, max: 6 }),
        (r, g, t, n) => {
          const p = diodeParameters(r, g, t);
          const current = iscOfDiode(p) * 0.9;
          const group = voltageAtCurrent(parametersOfGroup(p, n), current);
          expect(n * group).toBeCloseTo(voltageAtCurrent(p, current), 6);
        },
      ),
    );
  });

  it('rests in the dark', () => {
    fc.assert(
      fc.property(silicon, temperature, (reference, temperatureCell) => {
        const p = diodeParameters(reference, 0, temperatureCell);
        expect(curvePoints(p)).toEqual({
          isc: 0,
          voc: 0,
          imp: 0,
          vmp: 0,
          pmp: 0,
          ix: 0,
          ixx: 0,
          fillFactor: 0,
        });
        expect(voltageAtCurrent(p, 0)).toBe(0);
        expect(voltageAtCurrent(p, -1)).toBeGreaterThan(0);
        expect(() => voltageAtCurrent(p, 1)).toThrow(/current must not be above 0 A/);
      }),
    );
  });

  it('refuses by name', () => {
    const reference = {
      alphaIsc: 0.004,
      idealityVoltageRef: 1.5,
      photocurrentRef: 9,
      saturationCurrentRef: 1e-10,
      resistanceShuntRef: 300,
      resistanceSeries: 0.3,
    };
    expect(() => diodeParameters(reference, -1, 25)).toThrow(/poaGlobal must be between 0 and 2000/);
    expect(() => diodeParameters(reference, 1000, 151)).toThrow(/temperatureCell/);
    expect(() => diodeParameters({ ...reference, resistanceShuntRef: 0 }, 1, 25)).toThrow(
      /resistanceShuntRef/,
    );
    const p = diodeParameters(reference, 1000, 25);
    expect(() => currentAtVoltage(p, Number.NaN)).toThrow(/voltage/);
    expect(() => voltageAtCurrent(p, Infinity)).toThrow(/current/);
  });
});

describe('pvwattsDc', () => {
  it('is proportional to light, never negative, and has the manual’s branch for low light', () => {
    const module = { pdc0: 400, gammaPmp: -0.0035 };
    fc.assert(
      fc.property(light, temperature, (poaGlobal, temperatureCell) => {
        const power = pvwattsDc(poaGlobal, temperatureCell, module);
        expect(power).toBeGreaterThanOrEqual(0);
        expect(pvwattsDc(poaGlobal / 2, temperatureCell, module)).toBeCloseTo(power / 2, 8);
      }),
    );
    // the two branches meet at 125 W/m²
    expect(pvwattsDc(124.999999, 25, module, true)).toBeCloseTo(pvwattsDc(125, 25, module), 4);
    expect(pvwattsDc(50, 25, module, true)).toBeCloseTo(8, 9);
  });
});

describe('translatePoint', () => {
  const coefficients = { alphaIsc: 0.005, betaVoc: -0.13, resistanceSeries: 0.3, kappa: 0.001 };
  it('leaves a point where it is under the same conditions, and comes back from others nearly', () => {
    fc.assert(
      fc.property(
        between(300, 1200),
        between(0, 75),
        between(0, 9),
        (poaGlobal, temperatureCell, current) => {
          const point = { current, voltage: 30, isc: 9, poaGlobal, temperatureCell };
          const same = translatePoint(point, point, coefficients);
          expect(same.current).toBeCloseTo(current, 12);
          expect(same.voltage).toBeCloseTo(30, 12);
        },
      ),
    );
  });

  it('refuses by name', () => {
    const point = { current: 5, voltage: 30, isc: 9, poaGlobal: 0, temperatureCell: 25 };
    expect(() => translatePoint(point, { poaGlobal: 1000, temperatureCell: 25 }, coefficients)).toThrow(
      /point.poaGlobal/,
    );
  });
});
