import { describe, expect, it } from 'vitest';
import { Prepared, prepareRepeated, type Querying } from './prepared';

const long = (n: number): string => `select ${n}, ${'x'.repeat(200)}`;
const named = (prepared: Prepared, text: string, times: number): (string | undefined)[] =>
  Array.from({ length: times }, () => prepared.nameOf(text));

describe('statements that come again', () => {
  it('have a name from the fourth time on, each its own', () => {
    const prepared = new Prepared();
    expect(named(prepared, long(1), 5)).toEqual([undefined, undefined, undefined, 'w1', 'w1']);
    expect(named(prepared, long(2), 5)).toEqual([undefined, undefined, undefined, 'w2', 'w2']);
  });

  it('have none where they are short, or where there are many already', () => {
    const prepared = new Prepared();
    expect(named(prepared, 'commit', 9).filter(Boolean)).toEqual([]);
    for (let i = 0; i < 120; i++) expect(named(prepared, long(i), 4).at(-1)).toBe(`w${i + 1}`);
    expect(named(prepared, long(120), 9).filter(Boolean)).toEqual([]);
    expect(prepared.nameOf(long(7))).toBe('w8');
  });

  it('get another name where the plan is outdated, and keep it after other errors', () => {
    const prepared = new Prepared();
    named(prepared, long(1), 4);
    prepared.failed(long(1), Object.assign(new Error('unique'), { code: '23505' }));
    expect(prepared.nameOf(long(1))).toBe('w1');
    prepared.failed(long(1), Object.assign(new Error('result type'), { code: '0A000' }));
    expect(named(prepared, long(1), 4)).toEqual([undefined, undefined, undefined, 'w2']);
  });

  it('leave alone what is no plain statement', () => {
    const seen: unknown[] = [];
    const connection: Querying = { query: (statement) => seen.push(statement) };
    prepareRepeated(connection);
    class Cursor {
      text = long(1);
    }
    for (let i = 0; i < 5; i++) connection.query(new Cursor(), () => undefined);
    expect(seen.every((s) => s instanceof Cursor)).toBe(true);
  });

  it('are prepared also where a pool hands over a text with its values', () => {
    const seen: unknown[][] = [];
    const connection: Querying = { query: (...asked: unknown[]) => seen.push(asked) };
    prepareRepeated(connection);
    const answer = () => undefined;
    for (let i = 0; i < 4; i++) connection.query(long(1), [i], answer);
    expect(seen.slice(0, 3)).toEqual([0, 1, 2].map((i) => [long(1), [i], answer]));
    expect(seen[3]?.[0]).toEqual({ text: long(1), values: [3], name: 'w1' });
  });

  it('are asked again by themselves where the plan is outdated; where that fails too, the first error counts', () => {
    const outdated = Object.assign(new Error('cached plan must not change result type'), { code: '0A000' });
    const aborted = Object.assign(new Error('current transaction is aborted'), { code: '25P02' });
    const answered = (again: Error | null): unknown => {
      let unnamed = 0;
      const connection: Querying = {
        query: (...asked: unknown[]) => {
          const [statement, answer] = asked as [{ name?: string }, (e: Error | null, rows?: string) => void];
          if (statement.name) answer(outdated);
          else answer(++unnamed > 3 ? again : null, 'rows');
        },
      };
      prepareRepeated(connection);
      let got: unknown;
      for (let i = 0; i < 4; i++)
        connection.query({ text: long(1), values: [] }, (error, rows) => (got = error ?? rows));
      expect(unnamed).toBe(4);
      return got;
    };
    expect(answered(null)).toBe('rows');
    expect(answered(aborted)).toBe(outdated);
  });
});
