import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { UNIT_PRESETS } from '../../src/domain/equipment/unit-type';
import { checkStringDesign, type StringDesign } from '../../src/domain/photovoltaics/limits/string-design';
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

const design: StringDesign = {
  module: {
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
  },
  unit: { name: 'made-up unit', ...UNIT_PRESETS.monitored },
  modulesPerString: 14,
  stringsOnInput: 2,
  ruleSet: 'rapid_shutdown_30s',
  homeRunLeavesArray: true,
  temperatureMin: -15,
  temperatureCellMax: 70,
  inputVoltageMax: 1000,
  inputCurrentMax: 30,
  mpptMin: 200,
};
const outcomes = (changed: Partial<StringDesign>) =>
  Object.fromEntries(
    checkStringDesign({ ...design, ...changed }).map((finding) => [finding.check, finding.outcome]),
  );

describe('a string’s design', () => {
  it('within every limit', () => {
    expect(new Set(Object.values(outcomes({})))).toEqual(new Set(['within']));
  });

  it.each<[string, Partial<StringDesign>, string, string]>([
    ['too long for the inverter', { modulesPerString: 22 }, 'string_voltage_cold', 'exceeded'],
    ['too short for the window', { modulesPerString: 6 }, 'mppt_window_hot', 'exceeded'],
    ['inverter not entered', { inputVoltageMax: null }, 'string_voltage_cold', 'cannot_tell'],
    ['too many strings', { stringsOnInput: 3 }, 'input_current', 'exceeded'],
    [
      'too many units in shutdown',
      { modulesPerString: 46, inputVoltageMax: 3000 },
      'shutdown_outside_array',
      'exceeded',
    ],
    ['home run stays', { homeRunLeavesArray: false }, 'shutdown_outside_array', 'not_required'],
    ['slow unit under the older rule', { ruleSet: 'rapid_shutdown_10s' }, 'shutdown_time', 'exceeded'],
    ['older rule', { ruleSet: 'rapid_shutdown_10s' }, 'shutdown_inside_array', 'not_required'],
    ['hazard-control system', { ruleSet: 'hazard_control' }, 'shutdown_inside_array', 'cannot_tell'],
    ['no rule', { ruleSet: 'none' }, 'shutdown_time', 'not_required'],
    ['unit that holds', { unit: { ...design.unit, onCommandLoss: 'holds' } }, 'shutdown_time', 'exceeded'],
    ['unit too weak in current', { unit: { ...design.unit, currentMax: 12 } }, 'unit_current', 'exceeded'],
    [
      'unit too weak in voltage',
      { unit: { ...design.unit, voltageInMax: 45 } },
      'unit_voltage_cold',
      'exceeded',
    ],
    [
      'module above 80 V',
      {
        module: { ...design.module, vocRef: 75, vmpRef: 62 },
        unit: { ...design.unit, voltageInMax: 100 },
      },
      'shutdown_inside_array',
      'exceeded',
    ],
    [
      'optimizing units',
      { unit: { name: 'o', ...UNIT_PRESETS.optimizing } },
      'string_voltage_cold',
      'cannot_tell',
    ],
  ])('%s', (_, changed, check, outcome) => {
    expect(outcomes(changed)[check]).toBe(outcome);
  });

  it('names the parameter that can’t be', () => {
    expect(() => checkStringDesign({ ...design, modulesPerString: 0 })).toThrow(/modulesPerString/);
    expect(() => checkStringDesign({ ...design, temperatureMin: -200 })).toThrow(/temperature/);
  });
});
