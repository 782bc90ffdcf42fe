import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type DayLight, type DaySums, figuresOf, lossSteps, sameDays } from './day-figures';
import { yields, type YieldRecord } from './yields';

const P0 = 100_000;
const GAMMA = -0.0035;

const record = fc.record({
  poaGlobal: fc.option(fc.double({ min: 0, max: 1200, noNaN: true }), { freq: 6 }),
  temperatureModule: fc.option(fc.double({ min: -20, max: 75, noNaN: true }), { freq: 6 }),
  powerOut: fc.option(fc.double({ min: 0, max: P0, noNaN: true }), { freq: 6 }),
});
const day = fc.array(record, { minLength: 96, maxLength: 96 });

/** The sums of a day as the roll-up makes them, from the same quarters. */
function sumsOf(date: string, records: readonly YieldRecord[]): DaySums {
  const light: DayLight = {
    days: 1,
    quartersDue: records.length,
    quartersLit: 0,
    insolation: 0,
    energyAcLit: 0,
    energyDcLit: 0,
    quartersWarm: 0,
    insolationWarm: 0,
    insolationTemperature: 0,
    energyAcWarm: 0,
    minutesLit: 600,
    limitedMinutes: 0,
    lostEnergy: 0,
    lostEnergyGrid: 0,
  };
  let energyAc = 0;
  for (const { poaGlobal, temperatureModule, powerOut } of records) {
    energyAc += (powerOut ?? 0) / 4;
    if (poaGlobal === null || powerOut === null) continue;
    light.quartersLit++;
    light.insolation += poaGlobal / 4;
    light.energyAcLit += powerOut / 4;
    if (temperatureModule === null) continue;
    light.quartersWarm++;
    light.insolationWarm += poaGlobal / 4;
    light.insolationTemperature += (poaGlobal * temperatureModule) / 4;
    light.energyAcWarm += powerOut / 4;
  }
  return {
    day: date,
    days: 1,
    energyAc,
    energyDc: energyAc,
    nameplate: P0,
    gammaPmp: GAMMA,
    complete: 1,
    lostMinutes: 60,
    lostMinutesGrid: 20,
    light,
  };
}

describe('figures from sums of days', () => {
  it('are those of all the records at once', () => {
    fc.assert(
      fc.property(day, day, fc.double({ min: 0, max: 50, noNaN: true }), (first, second, annual) => {
        const sums = [sumsOf('2026-06-01', first), sumsOf('2026-06-02', second)];
        const got = figuresOf(sums, 2, annual);
        const want = yields([...first, ...second], {
          p0: P0,
          gammaPmp: GAMMA,
          intervalH: 0.25,
          temperatureModuleAnnual: annual,
        });
        const near = (a: number | null, b: number | null) =>
          a === null || b === null ? expect(a).toBe(b) : expect(a).toBeCloseTo(b, 8);
        near(got.performanceRatio, want.performanceRatio);
        near(got.performanceRatioStc, want.performanceRatioStc);
        near(got.performanceRatioAnnual, want.performanceRatioAnnual);
        near(got.irradianceWeightedTemperature, want.irradianceWeightedTemperature);
        near(got.referenceYieldH, want.referenceYieldH);
        near(got.finalYieldH, want.finalYieldH);
        near(got.completenessLight, want.completeness);
        near(got.completenessTemperature, want.completenessWithTemperature);
      }),
      { numRuns: 60 },
    );
  });

  it('are the same from days summed into one entry', () => {
    fc.assert(
      fc.property(day, day, (first, second) => {
        const [a, b] = [sumsOf('2026-06-01', first), sumsOf('2026-06-02', second)];
        const whole: DaySums = {
          ...a,
          days: 2,
          energyAc: a.energyAc + b.energyAc,
          energyDc: a.energyDc + b.energyDc,
          complete: a.complete + b.complete,
          lostMinutes: a.lostMinutes + b.lostMinutes,
          lostMinutesGrid: a.lostMinutesGrid + b.lostMinutesGrid,
          light: Object.fromEntries(
            Object.entries(a.light!).map(([k, v]) => [k, v + b.light![k as keyof DayLight]]),
          ) as unknown as DayLight,
        };
        const [apart, together] = [figuresOf([a, b], 3, 20), figuresOf([whole], 3, 20)];
        for (const key of Object.keys(apart) as (keyof typeof apart)[])
          if (apart[key] === null) expect(together[key]).toBeNull();
          else expect(together[key]).toBeCloseTo(apart[key], 6);
      }),
      { numRuns: 40 },
    );
  });

  it('weigh each day by its own nameplate when modules were added', () => {
    const made = (date: string, nameplate: number, energyAc: number): DaySums => {
      const base = sumsOf(date, []);
      return {
        ...base,
        nameplate,
        energyAc,
        light: {
          ...base.light!,
          quartersDue: 96,
          quartersLit: 96,
          insolation: 5000,
          energyAcLit: energyAc,
        },
      };
    };
    const f = figuresOf([made('2026-06-01', 100_000, 400_000), made('2026-06-02', 200_000, 800_000)], 2);
    expect(f.performanceRatio).toBeCloseTo(1_200_000 / (100_000 * 5 + 200_000 * 5), 10);
    expect(f.specificYieldKWhKWp).toBeCloseTo((1_200 / 300) * 2, 10);
  });

  it('say nothing of light where there is no sensor, and count missing days', () => {
    const f = figuresOf([{ ...sumsOf('2026-06-01', []), light: null, energyAc: 5000 }], 30);
    expect(f.energyKWh).toBe(5);
    expect(f.performanceRatio).toBeNull();
    expect(f.availability).toBeNull();
    expect(f.completeness).toBeCloseTo(1 / 30, 10);
    expect(f.completenessLight).toBe(0);
    expect(() => figuresOf([sumsOf('2026-06-01', []), sumsOf('2026-06-02', [])], 1)).toThrow(RangeError);
  });

  it('take the grid’s minutes out of the plant’s own availability', () => {
    const f = figuresOf([sumsOf('2026-06-01', [])], 1);
    expect(f.availability).toBeCloseTo(0.9, 10);
    expect(f.availabilityOwn).toBeCloseTo(1 - 40 / 580, 10);
  });
});

describe('steps from light to energy', () => {
  it('add up, whatever the day', () => {
    fc.assert(
      fc.property(day, fc.double({ min: 0, max: 20, noNaN: true }), (records, kWh) => {
        const steps = lossSteps([sumsOf('2026-06-01', records)], [{ label: 'Stuck units', kWh }]);
        if (!steps) return;
        const total = steps[0]!.kWh;
        const taken = steps.slice(1, -1).reduce((sum, s) => sum + s.kWh, 0);
        expect(total - taken).toBeCloseTo(steps.at(-1)!.kWh, 6);
      }),
      { numRuns: 60 },
    );
  });
  it('are none without light', () => {
    expect(lossSteps([{ ...sumsOf('2026-06-01', []), light: null }], [])).toBeNull();
  });
});

describe('the same days of two years', () => {
  const day = (name: string, energyAc: number) => ({ day: name, energyAc });

  it('are those of which both have data', () => {
    const now = [day('2026-11-01', 10), day('2026-11-03', 30)];
    const before = [day('2025-11-01', 20), day('2025-11-02', 20), day('2025-11-03', 20)];
    expect(sameDays(now, before)).toEqual({ now: 40, before: 40, days: 2 });
    expect(sameDays([], before)).toEqual({ now: 0, before: 0, days: 0 });
  });

  it('put 29 February beside the 28th', () => {
    expect(sameDays([day('2028-02-29', 5)], [day('2027-02-28', 4)])).toEqual({ now: 5, before: 4, days: 1 });
  });
});
