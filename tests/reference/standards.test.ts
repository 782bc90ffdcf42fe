import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { UNIT_PRESETS, type UnitSheet } from '../../src/domain/equipment/unit-type';
import type { ModuleSheet } from '../../src/domain/equipment/module-type';
import type { StringDesign } from '../../src/domain/photovoltaics/limits/design';
import { checkStringDesign } from '../../src/domain/photovoltaics/limits/string-design';
import { BUILDING_VOLTAGE } from '../../src/domain/photovoltaics/limits/string-voltage';
import {
  VOLTAGE_INSIDE_ARRAY,
  VOLTAGE_OUTSIDE_ARRAY,
  circuitCurrents,
  coldVoltageFactor,
  mostUnitsInShutdown,
} from '../../src/domain/photovoltaics/limits/string-sizing';

interface Fact {
  document: string;
  clause: string;
  what: string;
  value: number | string;
  unit: string;
  status: string;
  confidence: string;
}

/** standards_facts.json without what was only remembered: that is not fit to check anything against. */
const facts = (
  JSON.parse(readFileSync(new URL('standards_facts.json', import.meta.url), 'utf8')) as { facts: Fact[] }
).facts.filter((fact) => !fact.status.startsWith('memory') && fact.confidence === 'high');

const valueOf = (clause: string, what: string): number | string => {
  const fact = facts.find((candidate) => candidate.clause === clause && candidate.what.includes(what));
  if (!fact) throw new Error(`no fact on ${clause}: ${what}`);
  return fact.value;
};

describe('NEC Table 690.7(A), as quoted by others', () => {
  const rows = facts.filter((fact) => fact.clause === 'Table 690.7(A)');
  it('has its thirteen rows', () => expect(rows).toHaveLength(13));
  it.each(rows.map((row) => [row.what, row] as const))('%s', (_, row) => {
    const [, warm = NaN, cold = NaN] = (/ambient (-?\d+) to (-?\d+) degC/.exec(row.what) ?? []).map(Number);
    for (let temperature = cold; temperature <= warm; temperature += 0.5) {
      expect(coldVoltageFactor(temperature), `${temperature} °C`).toBe(row.value);
    }
  });
});

describe('NEC limits, as quoted by others', () => {
  it('690.12(B): 30 V outside the array, 80 V inside', () => {
    expect(VOLTAGE_OUTSIDE_ARRAY).toBe(valueOf('690.12(B)(1)', 'controlled conductors outside'));
    expect(VOLTAGE_INSIDE_ARRAY).toBe(valueOf('690.12(B)(2)', 'controlled conductors inside'));
  });

  it('690.8: 125 % twice on isc', () => {
    const currents = circuitCurrents(10, 2);
    expect(currents.currentMax).toBe(20 * Number(valueOf('690.8(A)(1)', 'maximum circuit current')));
    expect(currents.conductorMin).toBe(20 * Number(valueOf('690.8', 'combined factor on Isc')));
  });

  it('30 V over a unit’s highest shutdown voltage', () => {
    // common practice: 0.6 V a unit; 0.66 V is the upper tolerance of the preset
    expect(mostUnitsInShutdown(0.6)).toBe(50);
    expect(mostUnitsInShutdown(0.66)).toBe(45);
    expect(mostUnitsInShutdown(1)).toBe(30);
  });
});

const MODULE: ModuleSheet = {
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
  voltageSystemMax: 1500,
  fuseMax: 20,
  lengthM: 1.7,
  widthM: 1,
  connector: null,
};
const UNIT: UnitSheet = {
  name: 'made-up unit',
  ...UNIT_PRESETS.monitored,
  voltageSystemMax: 1500,
  powerMax: 400,
  connectorIn: null,
  connectorOut: null,
};
const INVERTER = {
  name: 'made-up inverter',
  acPowerMax: 10_000,
  inputs: 2,
  stringsPerInput: 2,
  voltageMax: 1000,
  mpptMin: 200,
  mpptMax: 850,
  currentMax: 24,
  iscMax: 30,
};
const ONE = { iscRef: MODULE.iscRef, impRef: MODULE.impRef };
const of = (count: number, module: Partial<ModuleSheet> = {}): StringDesign['modules'] => [
  { type: { ...MODULE, ...module }, count },
];
const design: StringDesign = {
  modules: of(14),
  unit: UNIT,
  inverter: INVERTER,
  onInput: [ONE, ONE],
  ruleSet: 'rapid_shutdown_30s',
  structure: 'other_building',
  homeRunLeavesArray: true,
  temperatures: { coldest: { value: -15, from: 'entered' }, hottest: { value: 39, from: 'entered' } },
};
const findings = (changed: Partial<StringDesign>) =>
  new Map(checkStringDesign({ ...design, ...changed }).map((finding) => [finding.check as string, finding]));
const outcomeOf = (changed: Partial<StringDesign>, check: string) => findings(changed).get(check)?.outcome;

describe('a string’s design', () => {
  it('within every limit', () => {
    const open = [...findings({}).values()].filter((f) => f.outcome !== 'within');
    expect(open).toEqual([]);
  });

  it.each<[string, Partial<StringDesign>, string, string]>([
    ['too long for the inverter', { modules: of(22) }, 'string_voltage_inverter', 'exceeded'],
    [
      'too long for a dwelling',
      { structure: 'one_or_two_family_dwelling' },
      'string_voltage_building',
      'exceeded',
    ],
    ['too long for a building', { modules: of(22) }, 'string_voltage_building', 'exceeded'],
    [
      'away from buildings',
      { modules: of(22), structure: 'not_on_building' },
      'string_voltage_building',
      'within',
    ],
    [
      'modules for 600 V',
      { modules: of(14, { voltageSystemMax: 600 }) },
      'string_voltage_module',
      'exceeded',
    ],
    ['units for 600 V', { unit: { ...UNIT, voltageSystemMax: 600 } }, 'string_voltage_unit', 'exceeded'],
    ['too short for the window', { modules: of(6) }, 'mppt_window_hot', 'exceeded'],
    ['too long for the window', { modules: of(23) }, 'mppt_window_cold', 'exceeded'],
    ['inverter not entered', { inverter: null }, 'string_voltage_inverter', 'cannot_tell'],
    ['too many strings', { onInput: [ONE, ONE, ONE] }, 'input_short_circuit', 'exceeded'],
    [
      'too much current',
      { inverter: { ...INVERTER, currentMax: 18 } },
      'input_operating_current',
      'exceeded',
    ],
    ['fuses needed', { onInput: [ONE, ONE, ONE] }, 'series_fuse', 'cannot_tell'],
    [
      'no fuse fits',
      { modules: of(14, { fuseMax: 15 }), onInput: [ONE, ONE, ONE] },
      'series_fuse',
      'exceeded',
    ],
    ['too many units in shutdown', { modules: of(46) }, 'shutdown_outside_array', 'exceeded'],
    ['home run stays', { homeRunLeavesArray: false }, 'shutdown_outside_array', 'not_required'],
    ['slow unit under the older rule', { ruleSet: 'rapid_shutdown_10s' }, 'shutdown_time', 'exceeded'],
    ['older rule', { ruleSet: 'rapid_shutdown_10s' }, 'shutdown_inside_array', 'not_required'],
    ['hazard-control system', { ruleSet: 'hazard_control' }, 'shutdown_inside_array', 'cannot_tell'],
    ['no rule', { ruleSet: 'none' }, 'shutdown_time', 'not_required'],
    ['unit that holds', { unit: { ...UNIT, onCommandLoss: 'holds' } }, 'shutdown_time', 'exceeded'],
    ['unit too weak in current', { unit: { ...UNIT, currentMax: 12 } }, 'unit_current', 'exceeded'],
    ['unit too weak in power', { unit: { ...UNIT, powerMax: 300 } }, 'unit_power', 'exceeded'],
    ['unit too weak in voltage', { unit: { ...UNIT, voltageInMax: 45 } }, 'unit_voltage_cold', 'exceeded'],
    [
      'module above 80 V',
      { modules: of(10, { vocRef: 75, vmpRef: 62, cellsInSeries: 110 }) },
      'shutdown_inside_array',
      'exceeded',
    ],
    [
      'optimizing units',
      { unit: { ...UNIT, ...UNIT_PRESETS.optimizing } },
      'string_voltage_inverter',
      'cannot_tell',
    ],
  ])('%s', (_, changed, check, outcome) => {
    expect(outcomeOf(changed, check)).toBe(outcome);
  });

  it('600 V on one- and two-family dwellings: NEC 690.7, as quoted by others', () => {
    const fact = (
      JSON.parse(readFileSync(new URL('standards_facts.json', import.meta.url), 'utf8')) as { facts: Fact[] }
    ).facts.find((f) => f.clause === '690.7' && f.what.includes('one- and two-family'));
    expect(fact?.status).toBe('secondary');
    expect(BUILDING_VOLTAGE.one_or_two_family_dwelling.limit).toBe(fact?.value);
  });

  it('with an estimated temperature only what certainly holds is said', () => {
    const estimated = (count: number): Partial<StringDesign> => ({
      modules: of(count),
      temperatures: { coldest: { value: -30, from: 'estimated' }, hottest: { value: 39, from: 'entered' } },
    });
    // 41.2 V × (1 + 0.0029 × 55) = 47.8 V a module: 21 reach 1003 V only at the estimate, 25 pass 1000 V at 25 °C
    expect(outcomeOf(estimated(20), 'string_voltage_inverter')).toBe('within');
    expect(outcomeOf(estimated(21), 'string_voltage_inverter')).toBe('cannot_tell');
    expect(outcomeOf(estimated(25), 'string_voltage_inverter')).toBe('exceeded');
  });

  it('every finding that asks for something says what to do', () => {
    for (const finding of findings({ modules: of(46), onInput: [ONE, ONE, ONE], inverter: null }).values()) {
      expect(finding.words).not.toBe('');
      expect(finding.clause).not.toBe('');
      if (finding.outcome === 'exceeded' || finding.outcome === 'cannot_tell')
        expect(finding.remedy, finding.check).toBeTruthy();
    }
  });

  it('names the parameter that can’t be', () => {
    expect(() => findings({ modules: [] })).toThrow(/modulesPerString/);
    expect(() =>
      findings({ temperatures: { ...design.temperatures, coldest: { value: -200, from: 'entered' } } }),
    ).toThrow(/temperature/);
  });
});
