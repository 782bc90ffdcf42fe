import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { diodeParameters } from '../module/diode-parameters';
import { maximumPowerPoint, vocOfDiode, voltageAtCurrent } from '../module/single-diode';
import { stringCurveOf, stringMaximumPowerPoint } from './curve';
import { type StringElement, type StringModule, evenly } from './elements';
import { parallelStrings } from './parallel';
import { type SeriesString, seriesString, stringVoltageAt } from './series';

/** ms: many runs, on a busy machine. */
const SLOW = 60_000;

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true, noDefaultInfinity: true });

/** A made-up 60-cell module. */
const module: StringModule = {
  reference: {
    alphaIsc: 0.005,
    idealityVoltageRef: 1.55,
    photocurrentRef: 9.9,
    saturationCurrentRef: 2.8e-11,
    resistanceShuntRef: 420,
    resistanceSeries: 0.25,
  },
  bypassForwardVoltage: 0.5,
};
const passing = (poaGlobal = 900, temperatureCell = 45): StringElement => ({
  kind: 'module',
  module,
  groups: evenly(3, poaGlobal, temperatureCell),
});
const inShutdown: StringElement = { kind: 'in_shutdown', shutdownVoltage: 0.6, bypassVoltage: -0.5 };
const unpowered: StringElement = { kind: 'unpowered', bypassVoltage: -0.5 };
const reversed: StringElement = { kind: 'reversed', module, groups: evenly(3, 900, 45) };
const optimizing = (poaGlobal: number): StringElement => ({
  kind: 'optimizing',
  module,
  groups: evenly(3, poaGlobal, 45),
  efficiency: 0.985,
  currentOutMax: 15,
  bypassVoltage: -0.5,
});
const times = (n: number, element: StringElement): StringElement[] =>
  Array.from({ length: n }, () => element);
const ready = (elements: StringElement[], resistance = 0): SeriesString => {
  const string = seriesString(elements, resistance);
  if (!string) throw new Error('a lead is open');
  return string;
};
const at900 = diodeParameters(module.reference, 900, 45);
const voc = vocOfDiode(at900);

describe('open circuit', () => {
  // common practice: 0.6 V a unit in shutdown, 6 units 3.6 V, 14 units 8.4 V
  it.each([
    [6, 3.6],
    [14, 8.4],
  ])('%i units in shutdown give %f V', (n, expected) => {
    expect(stringVoltageAt(times(n, inShutdown), 0)).toBeCloseTo(expected, 9);
  });

  it('adds passing modules and units in shutdown', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 30 }), fc.integer({ min: 0, max: 30 }), (p, s) => {
        const string = [...times(p, passing()), ...times(s, inShutdown)];
        expect(stringVoltageAt(string, 0)).toBeCloseTo(p * voc + s * 0.6, 6);
      }),
    );
  });

  it('knows a module not mated, a unit left out, a reversed and a missing module, and an open lead', () => {
    expect(stringVoltageAt([...times(13, inShutdown), unpowered], 0)).toBeCloseTo(13 * 0.6, 9);
    expect(stringVoltageAt([...times(13, inShutdown), passing()], 0)).toBeCloseTo(13 * 0.6 + voc, 6);
    expect(stringVoltageAt([...times(13, passing()), reversed], 0)).toBeCloseTo(12 * voc, 6);
    expect(stringVoltageAt([...times(13, passing()), { kind: 'missing' }], 0)).toBeCloseTo(13 * voc, 6);
    expect(stringVoltageAt([...times(13, passing()), { kind: 'open' }], 0)).toBeNull();
    expect(stringCurveOf([{ kind: 'open' }])).toBeNull();
    expect(stringVoltageAt(times(14, reversed), 0)).toBeCloseTo(-14 * voc, 6);
  });
});

const group = fc.record({
  poaGlobal: fc.oneof(fc.constant(0), between(1, 1300)),
  temperatureCell: between(-20, 80),
});
const anyElement: fc.Arbitrary<StringElement> = fc.oneof(
  {
    weight: 6,
    arbitrary: fc
      .array(group, { minLength: 3, maxLength: 3 })
      .map((groups) => ({ kind: 'module' as const, module, groups })),
  },
  {
    weight: 1,
    arbitrary: fc.constantFrom<StringElement>(inShutdown, unpowered, reversed, { kind: 'missing' }),
  },
  { weight: 1, arbitrary: between(100, 1200).map(optimizing) },
);
const anyString = fc.array(anyElement, { minLength: 1, maxLength: 14 });

describe('under current', () => {
  it(
    'is the sum of its parts at any current',
    () => {
      fc.assert(
        fc.property(anyString, between(0, 14), between(0, 2), (elements, current, resistance) => {
          const whole = ready(elements, resistance).voltageAt(current);
          const parts = elements.reduce((sum, element) => sum + ready([element]).voltageAt(current), 0);
          expect(Number.isFinite(whole)).toBe(true);
          expect(whole).toBeCloseTo(parts - current * resistance, 6);
        }),
      );
    },
    SLOW,
  );

  it('falls with current, and gives current and voltage as one curve', () => {
    fc.assert(
      fc.property(anyString, between(0.01, 14), (elements, current) => {
        const string = ready(elements, 0.01);
        const voltage = string.voltageAt(current);
        expect(string.voltageAt(current + 0.1)).toBeLessThan(voltage);
        expect(string.voltageAt(0)).toBeGreaterThan(voltage);
        // optimizing units step down at their current limit: there a voltage has no current of its own
        expect(string.voltageAt(string.currentAt(voltage) * (1 - 1e-9))).toBeGreaterThanOrEqual(
          voltage - 1e-4,
        );
        expect(string.currentAt(voltage)).toBeCloseTo(current, 6);
      }),
    );
  });

  it('is n modules when all are alike', () => {
    const string = ready(times(12, passing()));
    expect(string.voltageAt(7)).toBeCloseTo(12 * voltageAtCurrent(at900, 7), 6);
    const best = stringMaximumPowerPoint(times(12, passing()));
    expect(best?.p).toBeCloseTo(12 * maximumPowerPoint(at900).pmp, 4);
  });

  it('loses a bypassed third of a module with the current unchanged', () => {
    const dark = [{ poaGlobal: 0, temperatureCell: 45 }, ...evenly(2, 900, 45)];
    const whole = ready(times(12, passing())).voltageAt(7);
    const short = ready([...times(11, passing()), { kind: 'module', module, groups: dark }]).voltageAt(7);
    expect(whole - short).toBeCloseTo(voltageAtCurrent(at900, 7) / 3 + 0.5, 6);
  });

  it('passes units in shutdown by their bypass, against none of the current', () => {
    const string = ready([...times(9, passing()), ...times(3, inShutdown)]);
    expect(string.voltageAt(7)).toBeCloseTo(9 * voltageAtCurrent(at900, 7) - 3 * 0.5, 6);
    expect(() => string.voltageAt(-1)).toThrow(/blocks/);
    expect(string.currentAt(string.voc + 10)).toBe(0);
    expect(ready(times(9, passing())).currentAt(9 * voc + 10)).toBeLessThan(0);
  });

  it('gives no power and no NaN from a string all in shutdown', () => {
    const curve = stringCurveOf(times(14, inShutdown));
    expect(curve).toMatchObject({ isc: 0, mpp: null, localMaxima: [], groupsAtMpp: 0 });
    expect(curve?.voc).toBeCloseTo(8.4, 9);
  });

  it('has optimizing units hold their power and never raise their voltage', () => {
    fc.assert(
      fc.property(between(200, 1200), between(0.1, 15), (poaGlobal, current) => {
        const p = diodeParameters(module.reference, poaGlobal, 45);
        const { imp, pmp } = maximumPowerPoint(p);
        const voltage = ready([optimizing(poaGlobal)]).voltageAt(current);
        expect(voltage).toBeLessThanOrEqual(vocOfDiode(p));
        expect(voltage * current).toBeLessThanOrEqual(pmp * 0.985 * (1 + 1e-6));
        if (current >= imp * 1.001) expect(voltage * current).toBeCloseTo(pmp * 0.985, 4);
      }),
    );
  });

  it(
    'finds the highest of several peaks',
    () => {
      fc.assert(
        fc.property(anyString, between(0, 1), (elements, share) => {
          const curve = stringCurveOf(elements, 0, 2);
          if (!curve) throw new Error('a lead is open');
          const current = share * curve.isc;
          const power = current * ready(elements).voltageAt(current);
          expect(power).toBeLessThanOrEqual((curve.mpp?.p ?? 0) * (1 + 1e-6) + 1e-6);
          for (const point of curve.points) expect(Number.isFinite(point.v)).toBe(true);
        }),
      );
    },
    SLOW,
  );

  it('finds the power of a unit that holds it level over many currents', () => {
    for (const poaGlobal of [99, 100, 100.00000000000003, 101, 200]) {
      const curve = stringCurveOf(
        [
          {
            kind: 'optimizing',
            module,
            groups: evenly(3, poaGlobal, 45),
            efficiency: 0.985,
            currentOutMax: 15,
            bypassVoltage: -0.5,
          },
        ],
        0,
        2,
      );
      expect(curve?.mpp?.p).toBeGreaterThan(0.25 * poaGlobal);
      expect(curve?.localMaxima).toHaveLength(1);
    }
  });

  it('refuses by name', () => {
    expect(() => seriesString([passing()], -1)).toThrow(/resistance/);
    expect(() => seriesString([{ kind: 'in_shutdown', shutdownVoltage: 0.6, bypassVoltage: 1 }])).toThrow(
      /bypassVoltage/,
    );
    expect(() => seriesString([passing(3000)])).toThrow(/poaGlobal/);
    expect(() => seriesString([{ kind: 'module', module, groups: [] }])).toThrow(/groups/);
    expect(() => ready([passing()]).voltageAt(Number.NaN)).toThrow(/current/);
    expect(() => stringCurveOf([passing()], 0, 1)).toThrow(/count/);
  });
});

describe('strings in parallel', () => {
  const full = ready(times(12, passing()));

  it('are one string when alone', () => {
    const alone = parallelStrings([full]);
    expect(alone.voc).toBe(full.voc);
    expect(alone.maximumPowerPoint()?.p).toBeCloseTo(
      stringMaximumPowerPoint(times(12, passing()))?.p ?? NaN,
      4,
    );
    expect(alone.voltageAt(5)).toBeCloseTo(full.voltageAt(5), 6);
  });

  it(
    'share a voltage and add their currents',
    () => {
      fc.assert(
        fc.property(
          fc.array(anyString, { minLength: 1, maxLength: 3 }),
          between(0, 500),
          (strings, voltage) => {
            const input = parallelStrings(strings.map((elements) => ready(elements, 0.05)));
            const currents = input.currentsAt(voltage);
            expect(currents.every(Number.isFinite)).toBe(true);
            expect(input.currentAt(voltage)).toBeCloseTo(
              currents.reduce((sum, current) => sum + current, 0),
              9,
            );
          },
        ),
        { numRuns: 30 },
      );
    },
    SLOW,
  );

  it('give no more than each would alone', () => {
    const held = ready([...times(9, passing()), ...times(3, inShutdown)]);
    const input = parallelStrings([full, held]);
    const apart =
      (parallelStrings([full]).maximumPowerPoint()?.p ?? NaN) +
      (parallelStrings([held]).maximumPowerPoint()?.p ?? NaN);
    expect(input.maximumPowerPoint()?.p).toBeLessThan(apart);
    expect(input.maximumPowerPoint()?.p).toBeGreaterThan(
      parallelStrings([full]).maximumPowerPoint()?.p ?? NaN,
    );
  });

  it('cost the string with units in shutdown its current, down to nothing', () => {
    const alone = parallelStrings([full, full]);
    const currentWith = (k: number) => {
      const held = ready([...times(12 - k, passing()), ...times(k, inShutdown)]);
      const input = parallelStrings([full, full, held]);
      return input.currentsAt(input.maximumPowerPoint()?.v ?? NaN)[2] ?? NaN;
    };
    const currents = [0, 1, 2, 3, 6, 12].map(currentWith);
    expect([...currents].sort((a, b) => b - a)).toEqual(currents);
    expect(currents[5]).toBe(0);
    expect(alone.maximumPowerPoint()?.v).toBeGreaterThan(0);
  });

  it('feed a string of plain modules that is too short, and rest at its own balance', () => {
    const short = ready(times(9, passing()));
    const input = parallelStrings([full, short]);
    const [out = NaN, back = NaN] = input.currentsAt(input.voc);
    expect(out + back).toBeCloseTo(0, 6);
    expect(back).toBeLessThan(0);
    expect(input.voc).toBeLessThan(full.voc);
    expect(input.voc).toBeGreaterThan(short.voc);
  });

  it('refuse what they can’t give', () => {
    expect(() => parallelStrings([])).toThrow(/at least one string/);
    expect(() => parallelStrings([full]).voltageAt(1000)).toThrow(/current must be between 0/);
  });
});
