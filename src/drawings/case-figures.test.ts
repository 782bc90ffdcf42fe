import { describe, expect, it } from 'vitest';
import { sampleFigures, sampleString } from '../domain/cases/sample-case';
import { comparedFigures, lightInWords, partsInWords, unitsInWords } from './case-figures';

describe('figures of a case in words', () => {
  it('compares the site and the strings that the case is about', () => {
    const before = sampleFigures([
      sampleString({ voltage: 200.4, passing: 5, shutdown: 1, stuck: 1 }),
      sampleString({ id: 'b4', name: 'B4', slots: [] }),
    ]);
    const lines = comparedFigures(before, sampleFigures());
    expect(lines.filter((l) => l.subject === 'B4')).toEqual([]);
    expect(lines.find((l) => l.subject === 'B3' && l.figure === 'Units')).toEqual({
      subject: 'B3',
      figure: 'Units',
      before: '5 of 6 pass, 1 stuck',
      after: '6 of 6 pass',
    });
    expect(lines.find((l) => l.figure === 'Voltage')?.before).toBe('200\u00a0V of 240\u00a0V expected');
    expect(comparedFigures(before, null).every((l) => l.after === null)).toBe(true);
    expect(comparedFigures(before, sampleFigures([])).at(-1)?.after).toBe('no longer on the as-built');
  });

  it('says what it does not know', () => {
    expect(unitsInWords(sampleString({ shutdownOnly: true }))).toBe('units tell nothing themselves');
    expect(unitsInWords(sampleString({ passing: 0, unheard: 6 }))).toBe('0 of 6 pass, 6 unheard');
    expect(lightInWords(sampleFigures([], { is: 'dark', elevation: -12, poaGlobal: null }))).toBe(
      'dark, sun 12° below the horizon',
    );
  });

  it('names parts by string and position', () => {
    expect(
      partsInWords(
        [
          { stringName: 'B3', position: 9 },
          { stringName: 'B3', position: 5 },
        ],
        ['B3', 'B4'],
      ),
    ).toBe('B3 positions 5 and 9, B4 (whole string)');
  });
});
