import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { inverterSheetOf } from '../../equipment/inverter-type';
import { moduleSheetOf } from '../../equipment/module-fields';
import type { ModuleSheet } from '../../equipment/module-type';
import { starterEquipment } from '../../equipment/starter';
import { unitSheetOf } from '../../equipment/unit-fields';
import type { BuiltSite, BuiltString } from './built-site';
import { figure, type DesignCheck } from './design-finding';
import { designTemperatures, estimatedTemperatures } from './design-temperatures';
import { checkSiteDesign } from './site-design';

const STARTER = starterEquipment();
const MODULES = STARTER.modules.map(moduleSheetOf);
const UNITS = STARTER.units.map(unitSheetOf);
const of = <T extends { name: string }>(types: readonly T[], name: string): T => {
  const found = types.find((t) => t.name === name);
  if (!found) throw new Error(`no ${name}`);
  return found;
};
const MONO = of(MODULES, 'Mono 450, 144 half cells');
const POLY = of(MODULES, 'Poly 285, 60 cells');
const UNIT = of(UNITS, 'Reporting unit, both sides');
const SILENT = of(UNITS, 'Shutdown unit');
const INVERTER = of(STARTER.inverters.map(inverterSheetOf), 'Roof inverter 50 kW, 8 inputs');

const slots = (n: number, module: ModuleSheet = MONO, unit: string | null = UNIT.name) =>
  Array.from({ length: n }, (_, i) => ({ position: i + 1, module, unitTypeName: unit }));
const SOUTH = { name: 'South roof', surfaceTilt: 18, surfaceAzimuth: 180 };
const string = (name: string, changed: Partial<BuiltString> = {}): BuiltString => ({
  id: name,
  name,
  unit: UNIT,
  slots: slots(14),
  input: { id: `input of ${name}`, name: 'Inverter 1, input 1' },
  inverter: INVERTER,
  plane: SOUTH,
  homeRunLeavesArray: true,
  ...changed,
});
const site = (strings: BuiltString[], changed: Partial<BuiltSite> = {}): BuiltSite => ({
  ruleSet: 'rapid_shutdown_30s',
  structure: 'other_building',
  temperatures: { coldest: { value: -10, from: 'entered' }, hottest: { value: 36, from: 'entered' } },
  strings,
  connectors: new Map(
    STARTER.connectors.map((c) => [
      String(c.name),
      { id: String(c.name), name: String(c.name), maker: String(c.maker), family: String(c.family) },
    ]),
  ),
  pairs: [],
  ...changed,
});
const shared = { id: 'one', name: 'Inverter 1, input 1' };
const find = (built: BuiltSite, check: DesignCheck) =>
  checkSiteDesign(built).filter((f) => f.check === check);
const outcomes = (built: BuiltSite, check: DesignCheck) => find(built, check).map((f) => f.outcome);

describe('a site’s design', () => {
  it('says once what holds for several strings, and sorts what is exceeded to the front', () => {
    const built = site([string('A2'), string('A10'), string('A1'), string('B1', { slots: slots(20) })]);
    const findings = checkSiteDesign(built);
    expect(find(built, 'unit_power').map((f) => f.strings.map((s) => s.name))).toEqual([
      ['A1', 'A2', 'A10', 'B1'],
    ]);
    expect(find(built, 'string_voltage_building')[0]).toMatchObject({
      outcome: 'exceeded',
      strings: [{ name: 'B1' }],
      limit: 1000,
    });
    const ranks = findings.map((f) =>
      ['exceeded', 'cannot_tell', 'within', 'not_required'].indexOf(f.outcome),
    );
    expect(ranks).toEqual([...ranks].sort((a, b) => a - b));
    expect(new Set(findings.map((f) => f.key)).size).toBe(findings.length);
  });

  it('finds slots without a unit, and units of another type', () => {
    const holes = slots(14).map((s) =>
      s.position === 5 || s.position === 9 ? { ...s, unitTypeName: null } : s,
    );
    const [hole] = find(site([string('A1', { slots: holes })]), 'slots_without_unit');
    expect(hole).toMatchObject({ outcome: 'exceeded', value: 2, safety: true });
    expect(hole?.words).toMatch(/positions 5 and 9.*can’t shut down/);
    const mixed = slots(14).map((s) => (s.position === 3 ? { ...s, unitTypeName: SILENT.name } : s));
    expect(outcomes(site([string('A1', { slots: mixed })]), 'mixed_units_in_string')).toEqual(['exceeded']);
    expect(outcomes(site([string('A1')]), 'mixed_units_in_string')).toEqual([]);
  });

  it('adds up modules of different types, and says that the weaker one sets the current', () => {
    const both = [...slots(7), ...slots(7, POLY).map((s) => ({ ...s, position: s.position + 7 }))];
    const built = site([string('A1', { slots: both })]);
    const cold = 7 * 49.3 * (1 + 0.0027 * 35) + 7 * 38.5 * (1 + 0.0031 * 35);
    expect(find(built, 'string_voltage_inverter')[0]?.value).toBeCloseTo(cold, 6);
    expect(find(built, 'mixed_modules_in_string')[0]).toMatchObject({ outcome: 'exceeded', safety: false });
  });

  it('holds strings of one input against each other', () => {
    const one = (name: string, changed: Partial<BuiltString> = {}) =>
      string(name, { input: shared, ...changed });
    expect(outcomes(site([one('A1'), one('A2')]), 'shared_input_voltage')).toEqual(['within']);
    const uneven = site([one('A1'), one('A2', { slots: slots(12) })]);
    expect(find(uneven, 'shared_input_voltage')[0]).toMatchObject({
      outcome: 'exceeded',
      safety: false,
      strings: [{ name: 'A1' }, { name: 'A2' }],
    });
    const east = { name: 'East roof', surfaceTilt: 18, surfaceAzimuth: 95 };
    expect(outcomes(site([one('A1'), one('A2', { plane: east })]), 'shared_input_planes')).toEqual([
      'exceeded',
    ]);
    // on a nearly flat roof the azimuth means nothing
    const flat = (surfaceAzimuth: number) => ({
      name: `flat ${surfaceAzimuth}`,
      surfaceTilt: 3,
      surfaceAzimuth,
    });
    expect(
      outcomes(site([one('A1', { plane: flat(0) }), one('A2', { plane: flat(180) })]), 'shared_input_planes'),
    ).toEqual([]);
    // 359° and 1° are two degrees apart
    const north = (surfaceAzimuth: number) => ({
      name: `${surfaceAzimuth}`,
      surfaceTilt: 30,
      surfaceAzimuth,
    });
    expect(
      outcomes(
        site([one('A1', { plane: north(359) }), one('A2', { plane: north(1) })]),
        'shared_input_planes',
      ),
    ).toEqual([]);
    expect(
      outcomes(
        site([one('A1'), one('A2', { unit: SILENT, slots: slots(14, MONO, SILENT.name) })]),
        'mixed_units_on_input',
      ),
    ).toEqual(['exceeded']);
    expect(outcomes(site([one('A1'), one('A2'), one('A3')]), 'strings_per_input')).toEqual(['exceeded']);
    expect(outcomes(site([one('A1'), one('A2'), one('A3')]), 'series_fuse')).toEqual([
      'cannot_tell', // a fuse of 18.1 to 20 A fits; whether one is there isn't known
    ]);
  });

  it('looks at connectors: identical, documented, not documented, not entered', () => {
    const on = (module: ModuleSheet, pairs: BuiltSite['pairs'] = []) =>
      find(site([string('A1', { slots: slots(10, module) })], { pairs }), 'connector_module_unit')[0];
    expect(on(MONO)?.outcome).toBe('within');
    expect(on(POLY)).toMatchObject({ outcome: 'exceeded', safety: true });
    expect(on(POLY)?.words).toMatch(/fire risk/);
    const pairs = [{ first: 'Halyard 4', second: 'Oxbow 30', evidence: 'Statement 7, page 2' }];
    expect(on(POLY, pairs)?.outcome).toBe('within');
    expect(on(POLY, pairs)?.words).toMatch(/Statement 7, page 2/);
    expect(on({ ...MONO, connector: null })?.outcome).toBe('cannot_tell');
  });

  it('an inverter without a type: one finding a check, with what to do', () => {
    const built = site([
      string('A1', { inverter: null }),
      string('A2', { inverter: null, slots: slots(12) }),
    ]);
    const untold = checkSiteDesign(built).filter((f) => f.outcome === 'cannot_tell');
    expect(untold.length).toBeGreaterThan(3);
    for (const f of untold) {
      expect(f.strings).toHaveLength(2);
      expect(f.remedy).toBe('Give the inverter its type.');
    }
  });

  it('leaves out a string that has no slot yet', () => {
    expect(checkSiteDesign(site([string('A1', { slots: [] })]))).toEqual([]);
  });

  it('longer strings are never better by the cold limits, nor worse by the hot one', () => {
    const cold = ['string_voltage_inverter', 'string_voltage_building', 'shutdown_outside_array'] as const;
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 62 }), fc.integer({ min: -40, max: 25 }), (n, coldest) => {
        const at = (count: number) =>
          site([string('A1', { slots: slots(count) })], {
            temperatures: {
              coldest: { value: coldest, from: 'entered' },
              hottest: { value: 40, from: 'entered' },
            },
          });
        for (const check of cold)
          if (outcomes(at(n), check)[0] === 'exceeded')
            expect(outcomes(at(n + 1), check)[0]).toBe('exceeded');
        if (outcomes(at(n), 'mppt_window_hot')[0] === 'within')
          expect(outcomes(at(n + 1), 'mppt_window_hot')[0]).toBe('within');
      }),
      { numRuns: 60 },
    );
  });
});

describe('design temperatures', () => {
  it('a site’s own go first; estimates are marked', () => {
    const place = { latitude: 51.5, altitude: 40, temperatureMax: null };
    expect(designTemperatures({ ...place, temperatureMin: -9 })).toMatchObject({
      coldest: { value: -9, from: 'entered' },
      hottest: { from: 'estimated' },
    });
  });
  it('estimates lie on the wide side of what pages quote for places (from memory, °C)', () => {
    // extreme annual mean minima as commonly quoted; orders of magnitude only
    for (const [latitude, altitude, coldest, hottest] of [
      [33.4, 340, 0, 46],
      [41.9, 200, -22, 36],
      [51.5, 40, -6, 33],
      [59.3, 40, -19, 30],
      [28.6, 220, 3, 45],
      [-33.9, 40, 4, 40],
    ] as const) {
      const estimate = estimatedTemperatures(latitude, altitude);
      expect(estimate.coldest).toBeLessThanOrEqual(coldest);
      expect(estimate.hottest).toBeGreaterThanOrEqual(hottest);
    }
  });
  it('are in bounds everywhere', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -90, max: 90, noNaN: true }),
        fc.integer({ min: -450, max: 6000 }),
        (lat, alt) => {
          const { coldest, hottest } = estimatedTemperatures(lat, alt);
          expect(coldest).toBeGreaterThanOrEqual(-60);
          expect(hottest).toBeLessThanOrEqual(55);
          expect(coldest).toBeLessThan(hottest);
        },
      ),
    );
  });
});

describe('figures in sentences', () => {
  it.each([
    [1081.84, 'V', '1,082\u00a0V'],
    [17.44, 'A', '17.4\u00a0A'],
    [8.4, 'V', '8.4\u00a0V'],
    [0.66, 'V', '0.66\u00a0V'],
    [-3, '°C', '−3\u00a0°C'],
    [15, 's', '15\u00a0s'],
    [2, '', '2'],
  ])('%d %s', (value, unit, text) => expect(figure(value, unit)).toBe(text));
});
