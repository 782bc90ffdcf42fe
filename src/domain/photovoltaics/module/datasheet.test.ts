import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { ModuleType } from '../../equipment/module-type';
import { moduleFromDatasheet } from './datasheet';
import { vocOf } from './open-circuit';
import { type DiodeReference, diodeParameters } from './diode-parameters';
import { curvePoints, maximumPowerPoint, vocOfDiode } from './single-diode';

/** ms: many runs, on a busy machine. */
const SLOW = 60_000;

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true, noDefaultInfinity: true });

const sheet: ModuleType = {
  name: 'made-up 60-cell module',
  vocRef: 41.2,
  iscRef: 9.9,
  vmpRef: 34.3,
  impRef: 9.4,
  betaVoc: -0.0029,
  alphaIsc: 0.0005,
  gammaPmp: -0.0037,
  cellsInSeries: 60,
  bypassGroups: 3,
  noct: 45,
};

/** The datasheet that a module of known parameters would have. */
function sheetOf(reference: DiodeReference, cellsInSeries: number): ModuleType {
  const at = (temperature: number) => curvePoints(diodeParameters(reference, 1000, temperature));
  const [cold, here, warm] = [at(15), at(25), at(35)];
  return {
    name: 'made up',
    vocRef: here.voc,
    iscRef: here.isc,
    vmpRef: here.vmp,
    impRef: here.imp,
    betaVoc: (warm.voc - cold.voc) / 20 / here.voc,
    alphaIsc: reference.alphaIsc / here.isc,
    gammaPmp: (warm.pmp - cold.pmp) / 20 / here.pmp,
    cellsInSeries,
    bypassGroups: 3,
    noct: 45,
  };
}

describe('moduleFromDatasheet', () => {
  // few runs: each fit takes some hundred curves
  it(
    'finds the five parameters behind a datasheet that five parameters made',
    () => {
      const behind = fc
        .record({
          ideality: between(0.95, 1.25),
          vocOfCell: between(0.6, 0.72),
          photocurrentRef: between(5, 18),
          resistanceSeries: between(0.1, 0.35),
          resistanceShuntRef: between(150, 1500),
          cells: fc.constantFrom(54, 60, 66, 72),
        })
        .map(({ ideality, vocOfCell, cells, ...rest }) => {
          const idealityVoltageRef = ideality * cells * 0.025693;
          const reference = {
            ...rest,
            idealityVoltageRef,
            alphaIsc: 0.0005 * rest.photocurrentRef,
            saturationCurrentRef: rest.photocurrentRef * Math.exp((-cells * vocOfCell) / idealityVoltageRef),
          };
          return { reference, cells };
        });
      fc.assert(
        fc.property(behind, ({ reference, cells }) => {
          const { parameters, fit } = moduleFromDatasheet(sheetOf(reference, cells));
          expect(fit.quality).toBe('good');
          expect(fit.remarks).toEqual([]);
          for (const error of [fit.voc, fit.isc, fit.vmp, fit.imp, fit.pmp, fit.betaVoc, fit.gammaPmp]) {
            expect(Math.abs(error)).toBeLessThan(1e-4);
          }
          for (const [poaGlobal, temperature] of [
            [200, 25],
            [800, 55],
            [1100, 70],
            [400, -10],
          ] as const) {
            const true_ = maximumPowerPoint(diodeParameters(reference, poaGlobal, temperature));
            const fitted = maximumPowerPoint(diodeParameters(parameters, poaGlobal, temperature));
            expect(Math.abs(fitted.pmp / true_.pmp - 1)).toBeLessThan(0.002);
            expect(Math.abs(fitted.vmp / true_.vmp - 1)).toBeLessThan(0.002);
          }
        }),
        { numRuns: 12 },
      );
    },
    SLOW,
  );

  it('meets an ordinary datasheet and tells how well', () => {
    const { parameters, fit } = moduleFromDatasheet(sheet);
    expect(fit.quality).toBe('good');
    const points = curvePoints(diodeParameters(parameters, 1000, 25));
    expect(points.voc).toBeCloseTo(sheet.vocRef, 6);
    expect(points.isc).toBeCloseTo(sheet.iscRef, 6);
    expect(points.vmp).toBeCloseTo(sheet.vmpRef, 3);
    expect(points.imp).toBeCloseTo(sheet.impRef, 3);
    expect(fit.ideality).toBeGreaterThan(0.9);
    expect(fit.ideality).toBeLessThan(1.2);
    expect(Math.abs(fit.gammaPmp)).toBeLessThan(0.1);
  });

  it('gives the nearest module to a datasheet that no module meets, and says so', () => {
    const { fit, parameters } = moduleFromDatasheet({ ...sheet, vmpRef: 38, impRef: 9.8 });
    expect(fit.quality).toBe('poor');
    expect(fit.remarks.join(' ')).toMatch(/vmp and imp can't both be met/);
    expect(curvePoints(diodeParameters(parameters, 1000, 25)).voc).toBeCloseTo(sheet.vocRef, 6);
  });

  it('points at a cell count or coefficients that don’t fit the voltage', () => {
    const wrongCells = moduleFromDatasheet({ ...sheet, cellsInSeries: 120 });
    expect(wrongCells.fit.remarks.join(' ')).toMatch(/check the cell count/);
    const oddGamma = moduleFromDatasheet({ ...sheet, gammaPmp: -0.0055 });
    expect(oddGamma.fit.remarks.join(' ')).toMatch(/gammaPmp that follows differs/);
  });

  it.each<[Partial<ModuleType>, RegExp]>([
    [{ vocRef: 0 }, /vocRef/],
    [{ vmpRef: 42 }, /vmpRef \(42 V\) must be below vocRef \(41.2 V\)/],
    [{ impRef: 10 }, /impRef \(10 A\) must be below iscRef \(9.9 A\)/],
    [{ betaVoc: -0.29 }, /betaVoc must be between -0.02 and 0 1\/K, but is -0.29/],
    [{ cellsInSeries: 60.5 }, /cellsInSeries must be a whole number/],
    [{ iscRef: Number.NaN }, /iscRef/],
    [{ cellsInSeries: 300 }, /cellsInSeries 300 makes 0.14 V a cell/],
  ])('refuses %o', (change, named) => {
    expect(() => moduleFromDatasheet({ ...sheet, ...change })).toThrow(named);
    expect(() => moduleFromDatasheet({ ...sheet, ...change })).toThrow(RangeError);
  });
});

describe('vocOf', () => {
  it('is the datasheet’s value at standard conditions and falls with temperature', () => {
    expect(vocOf(sheet, 1000, 25)).toBe(sheet.vocRef);
    fc.assert(
      fc.property(between(0, 2000), between(-90, 149), (poaGlobal, temperatureCell) => {
        const here = vocOf(sheet, poaGlobal, temperatureCell);
        expect(here).toBeGreaterThanOrEqual(0);
        // the datasheet's own fall outweighs the thermal voltage down to about a hundredth of full light
        if (poaGlobal > 10) expect(vocOf(sheet, poaGlobal, temperatureCell + 1)).toBeLessThan(here);
      }),
    );
    expect(vocOf(sheet, 0, 25)).toBe(0);
    expect(() => vocOf(sheet, -1, 25)).toThrow(/poaGlobal/);
    expect(() => vocOf(sheet, 1000, 25, 5)).toThrow(/ideality/);
  });

  it('keeps within 1 % of the fitted module from 100 W/m² up and −20 to 80 °C', () => {
    const { parameters } = moduleFromDatasheet(sheet);
    for (const poaGlobal of [100, 200, 500, 1000, 1300]) {
      for (const temperature of [-20, 0, 25, 50, 80]) {
        const exact = vocOfDiode(diodeParameters(parameters, poaGlobal, temperature));
        expect(Math.abs(vocOf(sheet, poaGlobal, temperature) / exact - 1)).toBeLessThan(0.01);
      }
    }
  });
});
