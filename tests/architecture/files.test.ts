import { describe, expect, it } from 'vitest';
import { codeOf, isTest, sources, stringsOf } from './sources';

const all = sources();
const MOST_LINES = 400;

/** SQL as we write it: a statement in lower case at the start of a string. */
const SQL = [
  /^\s*(select|with)\s[\s\S]*\b(from|as)\b/,
  /^\s*select\s+[a-z_]+\s*\(/,
  /^\s*insert\s+into\s/,
  /^\s*update\s+\w+[\s\S]*\bset\b/,
  /^\s*delete\s+from\s/,
  /^\s*(create|alter|drop|truncate)\s+(table|index|view|function|role|database)\s/,
];
const isSql = (text: string): boolean => SQL.some((pattern) => pattern.test(text));

/** Words for people are none, also where they begin with "with". */
const MAY_HOLD_SQL = /^(src\/(words|server\/(queries|db|up))\/|migrations\/|seeds\/|tests\/)/;

describe('files', () => {
  it(`have at most ${MOST_LINES} lines`, () => {
    const long = all
      .map(({ file, text }) => ({ file, lines: text.trimEnd().split('\n').length }))
      .filter(({ lines }) => lines > MOST_LINES);
    expect(long).toEqual([]);
  });

  it('with SQL are queries, migrations, seeds or the database layer', () => {
    const found = all
      .filter(({ file }) => !MAY_HOLD_SQL.test(file) && !isTest(file) && !file.endsWith('.css'))
      .flatMap(({ file, text }) =>
        stringsOf(file, text)
          .filter(isSql)
          .map((sql) => `${file}: ${sql.trim().slice(0, 60)}`),
      );
    expect(found).toEqual([]);
  });

  it.each([
    ['select id from site', true],
    ['  insert into event (at) values (now())', true],
    ['update string set name = 1', true],
    [`select pg_notify('live', '1')`, true],
    ['with x as (select 1) select * from x', true],
    ['Select a site from the list', false],
    ['select', false],
    ['update the roster', false],
  ])('%s: SQL is %s', (text, expected) => {
    expect(isSql(text)).toBe(expected);
  });

  it('of the domain are pure: no clock, no randomness, no I/O', () => {
    const impure = [
      /\bDate\.now\s*\(/,
      /\bnew Date\(\s*\)/,
      /\bMath\.random\s*\(/,
      /\bprocess\./,
      /\bfetch\s*\(/,
      /\bcrypto\./,
      /\bset(Timeout|Interval)\s*\(/,
      /\bconsole\./,
      /\bperformance\./,
    ];
    const found = all
      .filter(({ file }) => file.startsWith('src/domain/') && !isTest(file))
      .flatMap(({ file, text }) => {
        const code = codeOf(file, text).replace(/\/\*[\s\S]*?\*\/|\/\/.*$/gm, '');
        return impure.filter((pattern) => pattern.test(code)).map((pattern) => `${file}: ${pattern.source}`);
      });
    expect(found).toEqual([]);
  });
});
