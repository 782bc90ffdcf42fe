import { describe, expect, it } from 'vitest';
import { UNIT_PRESETS } from '../../equipment/unit-type';
import { MODULE } from '../../readings/sample-readings';
import { readingAround, type KeptReading, type ReadSite } from './around';
import { judgeReading, type TakenReading } from './judge-reading';
import { stagesFor, usualCommand } from './stages';

const AT = '2026-11-03T10:00:00.000Z';
const taken = (more: Partial<TakenReading> = {}): TakenReading => ({
  stage: 'before_energising',
  kind: 'positive_to_negative',
  light: 'bright',
  meterMode: 'high_impedance',
  commanded: 'unknown',
  voltage: 8.4,
  at: AT,
  ...more,
});
const site = (
  kind: 'shutdown_only' | 'monitored',
  readings: Record<string, KeptReading[]> = {},
  heard: Record<string, number> = {},
): ReadSite => ({
  unitTypes: [{ id: 'u', ...UNIT_PRESETS[kind] }],
  moduleTypes: [{ id: 'm', ...MODULE }],
  strings: ['B1', 'B2', 'B3'].map((name) => ({
    id: name,
    name,
    units: 14,
    unitTypeId: 'u',
    moduleTypeId: 'm',
    heard: heard[name] ?? 0,
    readings: readings[name] ?? [],
  })),
});
const judged = (sheet: ReadSite, reading: TakenReading) =>
  judgeReading(reading, readingAround(sheet, 'B2', reading));

describe('the stages of a string', () => {
  it('follow what releases its units', () => {
    expect(stagesFor(UNIT_PRESETS.shutdown_only)).toEqual(['before_energising', 'after_keep_alive']);
    expect(stagesFor(UNIT_PRESETS.monitored)).toEqual(['before_energising', 'after_roll_call']);
    expect(usualCommand('after_keep_alive', 'unknown')).toBe('released');
    expect(usualCommand('after_roll_call', 'shutdown')).toBe('shutdown');
  });
});

describe('what a reading means at its stage', () => {
  it('a shutdown-only string of 14 at 8.4 V on day one is healthy (common practice: 0.6 V a unit)', () => {
    const finding = judged(site('shutdown_only'), taken());
    expect(finding).toMatchObject({ outcome: 'as_expected', obeysInitiator: true });
    expect(finding.expectedLowV).toBeLessThan(8.4);
    expect(finding.expectedHighV).toBeGreaterThan(8.4);
    // after keep-alive the same figure is not
    expect(
      judged(site('shutdown_only'), taken({ stage: 'after_keep_alive', commanded: 'released' })).outcome,
    ).toBe('finding');
  });

  it('a monitored string at full voltage before the roll call is healthy and does not obey', () => {
    const finding = judged(site('monitored'), taken({ voltage: 550 }));
    expect(finding).toMatchObject({ outcome: 'as_expected', obeysInitiator: false });
    expect(finding.cautions.join(' ')).toContain('treat the string as live');
    // heard and commanded: the same figure is the gravest
    const after = judged(
      site('monitored', {}, { B2: 14 }),
      taken({ stage: 'after_roll_call', commanded: 'shutdown', voltage: 550 }),
    );
    expect(after.outcome).toBe('finding');
  });

  it('a negative one is reversed, not bad input', () => {
    const finding = judged(site('shutdown_only'), taken({ voltage: -8.4 }));
    expect(finding.outcome).toBe('finding');
    expect(finding.headline).toContain('do not connect');
  });

  it('at night nothing is proved, and no word of it says safe', () => {
    const finding = judged(site('shutdown_only'), taken({ light: 'night', voltage: 0.02 }));
    expect(finding.outcome).toBe('proves_nothing');
    expect(JSON.stringify(finding)).not.toMatch(/\bsafe\b/i);
  });
});

describe('what stands around a reading', () => {
  const sibling = (more: Partial<KeptReading> = {}): KeptReading => ({ ...taken({ voltage: 8.4 }), ...more });
  it('is other strings under the same light, and none of another stage, light or hour', () => {
    const used = (reading: KeptReading) => judged(site('shutdown_only', { B1: [reading] }), taken()).siblings;
    expect(used(sibling())).toEqual(['B1']);
    expect(used(sibling({ light: 'dull' }))).toEqual([]);
    expect(used(sibling({ stage: 'after_keep_alive' }))).toEqual([]);
    expect(used(sibling({ at: '2026-11-03T11:00:00.000Z' }))).toEqual([]);
    expect(used(sibling({ kind: 'positive_to_earth' }))).toEqual([]);
  });

  it('leaves out strings that the roll call has reached and this one not', () => {
    const sheet = site('monitored', { B1: [sibling({ voltage: 8.4 })] }, { B1: 14 });
    expect(judged(sheet, taken({ voltage: 550 })).siblings).toEqual([]);
  });

  it('with siblings tells one unit of 0.6 V that no meter tells alone', () => {
    const readings = { B1: [sibling({ voltage: 8.4 })], B3: [sibling({ voltage: 8.42 })] };
    const alone = judged(site('shutdown_only'), taken({ voltage: 7.8 }));
    const beside = judged(site('shutdown_only', readings), taken({ voltage: 7.8 }));
    const unmated = (f: typeof alone) => f.likely.find((h) => h.kind === 'unmated')?.probability ?? 0;
    expect(unmated(beside)).toBeGreaterThan(5 * unmated(alone));
  });
});

describe('readings to earth', () => {
  const own = (...readings: KeptReading[]) => site('monitored', { B2: readings });
  const to = (kind: TakenReading['kind'], voltage: number): KeptReading => taken({ kind, voltage });
  it('say what is still to be measured', () => {
    const finding = judged(site('monitored'), taken({ kind: 'positive_to_earth', voltage: 20 }));
    expect(finding).toMatchObject({ outcome: 'cant_tell', expectedV: null });
    expect(finding.headline).toContain('+ to − and − to earth');
  });
  it('together tell a floating string, or the place of a fault', () => {
    const between = to('positive_to_negative', 560);
    expect(
      judged(own(between, to('positive_to_earth', 12)), taken({ kind: 'negative_to_earth', voltage: -9 })),
    ).toMatchObject({ outcome: 'as_expected', earth: { outcome: 'no_fault_seen' } });
    const fault = judged(
      own(between, to('positive_to_earth', 200)),
      taken({ kind: 'negative_to_earth', voltage: -360 }),
    );
    expect(fault).toMatchObject({ outcome: 'finding', earth: { outcome: 'fault' } });
    // k : (n − k) = 360 : 200 of 14 modules
    expect(fault.headline).toContain('between positions 9 and 10');
  });
  it('turn a reading + to − that would be as expected into a finding', () => {
    const finding = judged(
      own(to('positive_to_earth', 200), to('negative_to_earth', -350)),
      taken({ voltage: 550 }),
    );
    expect(finding.outcome).toBe('finding');
    expect(finding.headline).toContain('touches earth');
  });
});
