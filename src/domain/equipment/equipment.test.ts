import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkModuleType } from '../photovoltaics/module/check-type';
import { moduleFromDatasheet } from '../photovoltaics/module/datasheet';
import { connectorPairFinding, type ConnectorIdentity } from './connectors';
import { EQUIPMENT_FAMILIES } from './families';
import { asKept, asTyped, type Entry } from './fields';
import { inverterSheetOf } from './inverter-type';
import { moduleSheetOf } from './module-fields';
import { FIELDS, judgeEntry } from './plausibility';
import { starterEquipment } from './starter';
import { presetEntry, unitSheetOf } from './unit-fields';
import { UNIT_KINDS } from './unit-type';

const STARTER = starterEquipment();

describe('whether two connectors may be mated (NEC 690.33(C))', () => {
  const half = (id: string, maker: string, family: string): ConnectorIdentity => ({
    id,
    name: id,
    maker,
    family,
  });
  const a = half('a', 'Tarn & Fell', 'Halyard 4');
  const b = half('b', 'Bittern Contact', 'K2');
  const pairs = [{ first: 'b', second: 'a', evidence: 'Statement 7, edition 3, page 2' }];

  it('identical: one entry, or two of one maker’s one type', () => {
    expect(connectorPairFinding(a, a, []).outcome).toBe('identical');
    expect(connectorPairFinding(a, half('a2', 'tarn & fell ', 'HALYARD 4'), []).outcome).toBe('identical');
  });
  it('documented, whichever half is named first', () => {
    for (const [x, y] of [
      [a, b],
      [b, a],
    ] as const) {
      const found = connectorPairFinding(x, y, pairs);
      expect(found).toMatchObject({ outcome: 'documented', fireRisk: false, remedy: null });
      expect(found.evidence).toBe('Statement 7, edition 3, page 2');
    }
  });
  it('a fire risk without a document, with a remedy and the clause', () => {
    const found = connectorPairFinding(a, b, []);
    expect(found).toMatchObject({ outcome: 'not_documented', fireRisk: true });
    expect(found.words).toMatch(/fire risk/);
    expect(found.clause).toMatch(/690\.33/);
    expect(found.remedy).toBeTruthy();
  });
  it('can’t be told while a half is not recorded, and then blocks too', () => {
    expect(connectorPairFinding(a, null, pairs)).toMatchObject({ outcome: 'unknown', fireRisk: true });
    expect(connectorPairFinding(null, null, pairs).outcome).toBe('unknown');
  });
  it('the same maker’s other type is not identical', () => {
    expect(connectorPairFinding(a, half('c', 'Tarn & Fell', 'Halyard 6'), []).outcome).toBe('not_documented');
  });
});

describe('the starter set', () => {
  it.each(EQUIPMENT_FAMILIES.flatMap((family) => STARTER[family].map((e) => [family, e.name, e] as const)))(
    '%s: %s has every field, contradicts nothing and raises no doubt',
    (family, _name, entry) => {
      for (const field of FIELDS[family]) expect(entry, field.key).toHaveProperty(field.key);
      for (const field of FIELDS[family]) {
        const value = entry[field.key];
        if (field.kind !== 'number' || typeof value !== 'number') continue;
        expect(asTyped(field, value), field.key).toBeGreaterThanOrEqual(field.min);
        expect(asTyped(field, value), field.key).toBeLessThanOrEqual(field.max);
      }
      expect(judgeEntry(family, entry)).toEqual({ conflicts: [], doubts: [] });
    },
  );
  it('names only connectors that it has', () => {
    const names = new Set(STARTER.connectors.map((c) => c.name));
    for (const e of [...STARTER.modules, ...STARTER.units])
      for (const key of ['connector', 'connectorIn', 'connectorOut'])
        if (e[key]) expect(names).toContain(e[key]);
    for (const p of STARTER.pairs) expect([p.first, p.second].every((n) => names.has(n))).toBe(true);
  });
  it('has datasheets that a module can have', () => {
    for (const e of STARTER.modules) {
      const sheet = moduleSheetOf(e);
      checkModuleType(sheet);
      expect(moduleFromDatasheet(sheet).fit.quality, sheet.name).not.toBe('poor');
    }
    for (const e of STARTER.units) expect(unitSheetOf(e).shutdownVoltage.nominal).toBe(0.6);
    for (const e of STARTER.inverters) expect(inverterSheetOf(e).mpptMin).toBeGreaterThan(0);
  });
});

const module_ = (changed: Entry): Entry => ({ ...STARTER.modules[0], ...changed });
const unit = (changed: Entry): Entry => ({ ...STARTER.units[0], ...changed });
const inverter = (changed: Entry): Entry => ({ ...STARTER.inverters[0], ...changed });

describe('what can’t be', () => {
  it.each([
    ['modules', module_({ vmpRef: 50 }), 'vmpRef'],
    ['modules', module_({ impRef: 11.6 }), 'impRef'],
    ['modules', module_({ cellsInSeries: 300 }), 'cellsInSeries'],
    ['units', unit({ shutdownVoltageMin: 0.7 }), 'shutdownVoltageMin'],
    ['units', unit({ shutdownVoltageMax: 0.5 }), 'shutdownVoltageMax'],
    ['units', unit({ measures: 'none' }), 'measures'],
    ['inverters', inverter({ mpptMin: 560 }), 'mpptMax'],
    ['inverters', inverter({ mpptMax: 700 }), 'mpptMax'],
    ['inverters', inverter({ iscMax: 10 }), 'iscMax'],
  ] as const)('%s %#: named at the field %s', (family, entry, field) => {
    const { conflicts, doubts } = judgeEntry(family, entry);
    expect(conflicts.map((c) => c.field)).toContain(field);
    expect(doubts).toEqual([]);
  });
});

describe('what is unusual', () => {
  const doubts = (family: 'modules' | 'units' | 'connectors' | 'inverters', entry: Entry) =>
    judgeEntry(family, entry).doubts.map((d) => d.key);
  it.each([
    ['fill_factor', module_({ vmpRef: 30, name: 'x' })],
    ['power_in_name', module_({ name: 'Mono 470' })],
    ['beta_voc', module_({ betaVoc: -0.0013 })],
    ['alpha_isc', module_({ alphaIsc: 0.0045 })],
    ['gamma_pmp', module_({ gammaPmp: -0.0015 })],
    ['gamma_pmp', module_({ gammaPmp: -0.0065 })],
    ['size', module_({ lengthM: 0.3 })],
    ['fuse', module_({ fuseMax: 12 })],
  ])('of a module: %s', (key, entry) => expect(doubts('modules', entry)).toContain(key));
  it('a coefficient in V/K is recognised and converted', () => {
    // 49.3 V × −0.27 %/K = −0.133 V/K, typed as if it were %/K
    const found = judgeEntry('modules', module_({ betaVoc: -0.00133 })).doubts;
    expect(found.find((d) => d.key === 'beta_voc')?.message).toMatch(/type −0\.270 %\/K/);
  });
  it.each([
    ['holds', unit({ onCommandLoss: 'holds' })],
    ['slow', unit({ commandLossAfterS: 45 })],
    ['shutdown_voltage', unit({ shutdownVoltageMax: 3 })],
    ['bypass_voltage', unit({ bypassVoltage: 0 })],
    ['passing_keep_alive', unit({ releasedBy: 'keep_alive' })],
    ['power', unit({ powerMax: 2500 })],
    ['accuracy', unit({ voltageAccuracy: 0.12 })],
  ])('of a unit: %s', (key, entry) => expect(doubts('units', entry)).toContain(key));
  it('of a connector: above what IEC 62852 covers', () => {
    expect(doubts('connectors', { ...STARTER.connectors[0], currentMax: 150 })).toEqual(['scope']);
  });
  it('of an inverter: power that its inputs can’t take', () => {
    expect(doubts('inverters', inverter({ acPowerMax: 60_000 }))).toContain('reach');
  });
});

describe('kinds are presets', () => {
  it.each(UNIT_KINDS)('%s fills every field and contradicts nothing', (kind) => {
    const entry = { ...presetEntry(kind), name: 'x' };
    expect(judgeEntry('units', entry).conflicts).toEqual([]);
    expect(unitSheetOf(entry).kind).toBe(kind);
  });
});

describe('numbers as typed and as kept', () => {
  it('come back as they were typed', () => {
    const fields = EQUIPMENT_FAMILIES.flatMap((f) => FIELDS[f]).filter((f) => f.kind === 'number');
    fc.assert(
      fc.property(fc.constantFrom(...fields), fc.integer({ min: 0, max: 100_000 }), (field, share) => {
        const typed = Number((field.min + ((field.max - field.min) * share) / 100_000).toPrecision(6));
        expect(asTyped(field, asKept(field, typed))).toBe(typed);
      }),
    );
  });
});
