import fc from 'fast-check';
import { renderToStaticMarkup } from 'react-dom/server';
import { createElement } from 'react';
import { describe, expect, it } from 'vitest';
import { startOf, tried, type Example } from './example';
import { EXAMPLES, type ExampleKey } from './examples';
import { MethodSheet } from './MethodSheet';
import { NOTES } from './notes';

const example = (key: ExampleKey): Example => EXAMPLES[key];
const KEYS = Object.keys(EXAMPLES) as ExampleKey[];
const wordsOf = (key: ExampleKey, some: Record<string, string> = {}): string => {
  const { outcome, faults } = tried(example(key), { ...startOf(example(key)), ...some });
  if (!outcome) throw new Error(JSON.stringify(faults));
  return [outcome.finding, ...outcome.figures.flatMap((f) => [f.label, f.value])].join(' | ');
};
/** Texts that the fields of an example allow. */
function typings(of: Example): fc.Arbitrary<Record<string, string>> {
  const fields = of.inputs.map((input): [string, fc.Arbitrary<string>] => [
    input.key,
    input.kind === 'choice'
      ? fc.constantFrom(...input.options.map((o) => o.value))
      : input.whole
        ? fc.integer({ min: input.min, max: input.max }).map(String)
        : fc
            .double({ min: input.min, max: input.max, noNaN: true })
            .map((x) =>
              String(Math.min(input.max, Math.max(input.min, Math.round(x * 100) / 100))).replace('.', ','),
            ),
  ]);
  return fc.record(Object.fromEntries(fields));
}

describe('the notes', () => {
  it('each has an example, a formula, a source and limits, once', () => {
    expect(NOTES.map((note) => note.key).sort()).toEqual([...KEYS].sort());
    for (const note of NOTES) {
      expect(note.formulas.length).toBeGreaterThan(0);
      expect(note.sources.length).toBeGreaterThan(0);
      expect(note.limits.length).toBeGreaterThan(0);
    }
  });
  it.each(NOTES)('$key is set in MathML and promises nothing', (note) => {
    const html = renderToStaticMarkup(createElement(MethodSheet, { note }));
    expect(html).toMatch(/<math[^>]*>.*<\/math>/s);
    expect(html).not.toMatch(/\bsafe(ly)?\b|undefined|NaN|\[object/i);
  });
});

describe('the live examples', () => {
  it.each(KEYS)('%s answers at its start and for all that its fields allow', (key) => {
    expect(wordsOf(key)).not.toBe('');
    fc.assert(
      fc.property(typings(example(key)), (some) => {
        expect(wordsOf(key, some)).not.toMatch(/\bsafe(ly)?\b|undefined|NaN|Infinity|\[object/i);
      }),
      { numRuns: 40 },
    );
  });
  it('a wrong figure is named at its field, and no answer stands', () => {
    const start = startOf(example('expected'));
    const { outcome, faults } = tried(example('expected'), { ...start, poa: '9000', cell: 'warm' });
    expect(outcome).toBeNull();
    expect(faults.poa).toContain('9000 is outside what is possible');
    expect(faults.cell).toContain('"warm" is no number');
  });
});

describe('they say what the judgements say', () => {
  it('8.4 V beside a like string at 8.4 V: all in shutdown', () => {
    expect(wordsOf('reading', { volts: '8,4' })).toMatch(/^All 14 units are in shutdown/);
  });
  it('passing 130 s after shutdown was commanded', () => {
    expect(wordsOf('verdict')).toMatch(/^Verdict: not shutting down\. State: passing/);
  });
  it('in shutdown long after the release is stuck, soon after it is not', () => {
    expect(wordsOf('verdict', { command: 'released', reports: 'shutdown', after: '1200' })).toMatch(
      /^Verdict: stuck/,
    );
    expect(wordsOf('verdict', { command: 'released', reports: 'shutdown', after: '30' })).toMatch(
      /^As it should be/,
    );
  });
  it('nothing said while shutdown is commanded is unconfirmed', () => {
    expect(wordsOf('verdict', { reports: 'nothing' })).toMatch(/^Verdict: unconfirmed/);
  });
  it('96 V on a home run whose units claim shutdown', () => {
    expect(wordsOf('conductors')).toContain('NEC 690.12(B)(1)');
    expect(wordsOf('conductors', { volts: '8.4' })).toMatch(/^Nothing contradicts/);
    expect(wordsOf('conductors', { strings: '2' })).toContain('which one can not be told');
  });
  it('all units of one gateway', () => {
    expect(wordsOf('causes')).toContain('Gateway 1');
    expect(wordsOf('causes', { first: '0', second: '0' })).toMatch(/^Nothing is silent/);
  });
  it('two of 14 missing on four days, and too few days', () => {
    expect(wordsOf('low-output')).toMatch(/^A3 makes 1\d % less/);
    expect(wordsOf('low-output', { days: '2' })).toMatch(/was low on 2 of 5 days/);
  });
  it('a third missing all day is bypassed cells, nothing is held, some hours are shade', () => {
    expect(wordsOf('weak-unit')).toMatch(/^Unit 5 gives 2 of 3 parts/);
    expect(wordsOf('weak-unit', { volts: '-0,5' })).toMatch(/^Unit 5 passes nothing/);
    expect(wordsOf('weak-unit', { hours: '4' })).toMatch(/^Unit 5 is low for part of the day/);
    expect(wordsOf('weak-unit', { volts: '33.9' })).toMatch(/^No unit/);
    expect(wordsOf('weak-unit', { units: '3' })).toMatch(/^Can’t tell/);
  });
  it('a unit of another string, unless the strings are alike', () => {
    expect(wordsOf('membership')).toMatch(/^It carries the current of another string: A2/);
    expect(wordsOf('membership', { apart: '0' })).toMatch(/^Can’t tell/);
  });
  it('a quarter of an ohm more than before', () => {
    expect(wordsOf('resistance')).toMatch(/^0\.2\d Ω more than its past/);
    expect(wordsOf('resistance', { now: '0.4' })).toMatch(/^Nothing unusual/);
  });
  it('a test passes by an instrument and never by reports', () => {
    expect(wordsOf('shutdown-test')).toContain('Result | passed');
    expect(wordsOf('shutdown-test', { instrument: 'none' })).toContain('Result | consistent');
    expect(wordsOf('shutdown-test', { light: 'night' })).toContain('Result | not witnessed');
    expect(wordsOf('shutdown-test', { seconds: '45', after: '96' })).toContain('Result | failed');
  });
  it('no forecast from three', () => {
    expect(wordsOf('roll-call', { heard: '3' })).toMatch(/^Too few/);
  });
  it('PR of 24.6 kWh at 40 kW and 760 W/m²: 0.615 over 0.76 (IEC 61724-1)', () => {
    expect(wordsOf('yields')).toMatch(/^Performance ratio 80\.9/);
  });
});
