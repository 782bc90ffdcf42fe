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
});
