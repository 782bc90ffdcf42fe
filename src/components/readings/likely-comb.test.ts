import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { interpretReading } from '../../domain/readings/interpret';
import { conditionOf } from '../../drawings/condition';
import { readForm } from './form';
import { DEFAULTS } from './form-choices';
import { likelyComb } from './likely-comb';

const questionOf = (some: Partial<typeof DEFAULTS>) => readForm({ ...DEFAULTS, v: '7.8', ...some }).question!;
const counted = (
  some: Partial<typeof DEFAULTS>,
  kind: Parameters<typeof likelyComb>[0]['kind'],
  count: number,
) => {
  const tally: Record<string, number> = {};
  for (const slot of likelyComb({ kind, count }, questionOf(some)) ?? [])
    tally[conditionOf(slot)] = (tally[conditionOf(slot)] ?? 0) + 1;
  return tally;
};

describe('the string as an explanation has it', () => {
  it('shows how many units do what', () => {
    expect(counted({}, 'all_in_shutdown', 14)).toEqual({ shutdown: 14 });
    expect(counted({}, 'unmated', 1)).toEqual({ shutdown: 13, empty: 1 });
    expect(counted({ commanded: 'released' }, 'unmated', 2)).toEqual({ passing: 12, empty: 2 });
    expect(counted({ commanded: 'released' }, 'some_passing', 9)).toEqual({ passing: 9, shutdown: 5 });
    expect(counted({ light: 'night' }, 'unpowered', 14)).toEqual({ dark: 14 });
  });
  it('marks what passes though shutdown is commanded, and not what was never spoken to', () => {
    expect(counted({}, 'some_passing', 3)).toEqual({ not_shutting_down: 3, shutdown: 11 });
    expect(counted({ kind: 'monitored', heard: '10' }, 'all_passing', 14)).toEqual({
      passing: 4,
      not_shutting_down: 10,
    });
    expect(counted({ kind: 'monitored', heard: '0' }, 'all_passing', 14)).toEqual({ passing: 14 });
  });
  it('has a bar for each unit or none at all, whatever is read', () => {
    fc.assert(
      fc.property(
        fc.record({
          kind: fc.constantFrom('shutdown_only', 'monitored', 'optimizing'),
          units: fc.integer({ min: 1, max: 63 }).map(String),
          commanded: fc.constantFrom('shutdown', 'released', 'unknown'),
          light: fc.constantFrom('bright', 'dull', 'snow', 'night'),
          v: fc.double({ min: -900, max: 900, noNaN: true }).map((v) => v.toFixed(1)),
        }),
        (some) => {
          const question = questionOf(some);
          for (const h of interpretReading(question).likely) {
            const comb = likelyComb(h, question);
            if (comb) expect(comb).toHaveLength(question.units);
          }
        },
      ),
      { numRuns: 60 },
    );
  });
});
