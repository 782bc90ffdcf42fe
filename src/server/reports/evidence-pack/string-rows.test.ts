import { describe, expect, it } from 'vitest';
import { sampleFigures, sampleString } from '../../../domain/cases/sample-case';
import type { StringHistory } from '../../../schemas/api/string';
import type { EvidenceString } from './data';
import { stringRows } from './string-rows';

const history = {} as StringHistory; // the rows draw none
const strings = (count: number, drawn: number): EvidenceString[] =>
  Array.from({ length: count }, (_, i) => ({
    id: `s${i}`,
    name: `A${i + 1}`,
    built: {
      id: `s${i}`,
      name: `A${i + 1}`,
      plane: 'Roof',
      kind: 'monitored',
      unitType: 'Unit K',
      inverter: 'INV 1',
      input: i + 1,
      zone: 'Zone 1',
      logger: null,
      leavesArray: true,
      cableResistance: 0.1,
      transmitters: [],
      slots: [],
    },
    drawn: i < drawn ? { day: history, week: history } : null,
  }));
const figures = (count: number) =>
  sampleFigures(Array.from({ length: count }, (_, i) => sampleString({ id: `s${i}`, name: `A${i + 1}` })));

describe('the strings of a case on paper', () => {
  it('are all named; those without a sheet are counted, with where they are found', () => {
    const { words, rows } = stringRows({
      strings: strings(20, 16),
      case: { before: figures(19), after: null },
    });
    expect(rows.map((r) => r[0])).toEqual(Array.from({ length: 20 }, (_, i) => `A${i + 1}`));
    expect(rows.filter((r) => r.at(-1) === 'in the ZIP')).toHaveLength(4);
    expect(words).toMatch(/^16\sstrings have a sheet .* 4 more .*as-built\.csv .*“readings”.*ZIP/);
    expect(rows[0]?.[4]).toMatch(/240.*V; 6 of 6 pass/);
    expect(rows[19]?.[4]).toBe('not kept');
  });

  it('say what was found again where it was looked at', () => {
    const { words, columns, rows } = stringRows({
      strings: strings(2, 2),
      case: { before: figures(2), after: { ...figures(1), outcome: 'held' } },
    });
    expect(words).toBeNull();
    expect(rows.every((r) => r.length === columns.length)).toBe(true);
    expect(rows[1]?.[5]).toBe('no longer on the as-built');
  });
});
