import { describe, expect, it } from 'vitest';
import { explanationsOf, type ExplanationInput } from './explanations';
import type { LoopFinding } from './resistance';
import type { Signature } from './signature';
import type { WeakUnit } from './weak-unit';

const signature = (kind: Signature['kind'], more: Partial<Signature['figures']> = {}): Signature => ({
  kind,
  words: '',
  count: kind === 'units_missing' ? 2 : null,
  figures: {
    voltageRatio: 0.857,
    currentRatio: 1.001,
    modulesMissing: 2.0,
    shadeAzimuth: null,
    driftPerDay: null,
    ...more,
  },
  confidence: 0.85,
  couldBe: [],
});
const weak = (kind: WeakUnit['kind'], unit: number, ratio: number): WeakUnit => ({
  unit,
  kind,
  count: kind === 'bypassed_substring' ? 1 : null,
  ratio,
  share: 0.9,
  words: `Unit ${unit + 1} is ${kind}`,
  threshold: { ratio: 0.94, source: '' },
  confidence: 0.9,
  couldBe: [],
});
const loop = (outcome: LoopFinding['outcome'], ohm: number): LoopFinding => ({
  outcome,
  words: 'words',
  fit: { ohm, low: ohm - 0.02, high: ohm + 0.02, sharedOhm: null, gain: 0, samples: 90, highestA: 10 },
  above: { ohm, low: ohm - 0.02, high: ohm + 0.02, comparedWith: 'other strings' },
  heatW: null,
  threshold: { ohm: 0.1, source: '' },
  couldBe: [],
  confidence: 0.9,
});
const input = (more: Partial<ExplanationInput> = {}): ExplanationInput => ({
  outcome: 'low',
  signature: signature('units_missing'),
  units: 14,
  bypassGroups: 3,
  loop: null,
  weak: [],
  held: [],
  ...more,
});
const fits = (of: ExplanationInput) => Object.fromEntries(explanationsOf(of).map((e) => [e.key, e.fit]));

describe('which explanation fits', () => {
  it('begins with the one whose figures agree, and shows them', () => {
    const [first] = explanationsOf(input());
    expect(first).toMatchObject({ key: 'units_missing', fit: 'fits', confidence: 0.85 });
    expect(first?.figures.map((f) => [f.measured, f.would])).toEqual([
      ['2.00', 'a whole number'],
      ['1.001', '1.000'],
    ]);
  });

  it('does not call a thing refuted that was never judged', () => {
    const night = fits(input({ outcome: null, signature: null, weak: null }));
    expect(new Set(Object.values(night))).toEqual(new Set(['cant_tell']));
    expect(fits(input({ outcome: 'as_expected', signature: null })).shade).toBe('does_not');
    expect(fits(input({ outcome: 'cant_tell', signature: null })).shade).toBe('cant_tell');
  });

  it('takes what units say themselves before any night has judged', () => {
    const [first] = explanationsOf(input({ outcome: null, signature: null, held: [4, 11] }));
    expect(first).toMatchObject({ key: 'units_missing', fit: 'fits' });
    expect(first?.words).toContain('positions 4, 11');
  });

  it('lets two explanations stand beside each other, the surer first', () => {
    const both = explanationsOf(
      input({
        signature: signature('current_low'),
        weak: [weak('bypassed_substring', 6, 0.665)],
        loop: loop('excess', 0.4),
      }),
    );
    expect(both.filter((e) => e.fit === 'fits').map((e) => e.key)).toEqual([
      'bypassed_substring',
      'loop_resistance',
      'current_low',
    ]);
    expect(both[0]?.figures[0]).toMatchObject({ measured: '0.665', would: '0.333 or 0.667' });
  });

  it('tells part of a day from the whole, and writes small losses with a real minus', () => {
    expect(fits(input({ weak: [weak('part_of_day', 2, 0.97)] })).shade).toBe('partly');
    const lower = explanationsOf(input({ loop: loop('usual', -0.004) })).find(
      (e) => e.key === 'loop_resistance',
    );
    expect(lower?.figures[0]?.measured).toBe('0.00 Ω (−0.02 to 0.02)');
  });
});
