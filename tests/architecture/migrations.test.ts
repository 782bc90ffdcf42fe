import fs from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { ROOT, stringsOf } from './sources';

/**
 * Migrations run while loggers report and people look. What would stop them for long is refused here; the rules stand in
 * DEVELOPERS.md, "A change of the schema while it runs".
 */

/** Migrations before this rule; they are frozen. */
const FIRST = '20261201180000';
const LARGE =
  '(?:string|input|inverter|weather|packed)_frame(?:_\\d{8})?|(?:string|site)_quarter(?:_\\d{8})?|string_day|unit_event|event|late_frame';
const ON_LARGE = new RegExp(`\\balter\\s+table\\s+(?:if\\s+exists\\s+)?(?:only\\s+)?(?:${LARGE})\\b`);
const VOLATILE = '(?:random|gen_random_uuid|clock_timestamp|timeofday|nextval|uuid_generate_v\\d)';

const statementsOf = (texts: readonly string[]): string[] =>
  texts.flatMap((text) =>
    text
      .replace(/--.*$/gm, '')
      .split(';')
      .map((s) => s.toLowerCase().replace(/\s+/g, ' ').trim()),
  );

const REFUSED: [why: string, pattern: RegExp][] = [
  [
    'rewrites the table: add a column, fill it in pieces, then use it',
    / (?:alter|modify)(?: column)? \w+ (?:set data )?type /,
  ],
  ['rewrites the table: a default that differs from row to row', new RegExp(` default \\(?${VOLATILE}\\(`)],
  [
    'rewrites the table',
    / generated (?:always|by default) as |\b(?:small|big)?serial\b| set (?:un)?logged\b| set access method /,
  ],
  [
    'reads every row under its lock: NOT VALID first, VALIDATE CONSTRAINT in a later migration',
    / add (?:constraint \w+ )?(?:check|foreign key)(?!.* not valid)/,
  ],
  ['reads every row under its lock: a CHECK … NOT VALID, validated, comes before', / set not null\b/],
];

/** What a migration would do to a table of readings that may not be done while the rest runs. */
export function faultsOf(texts: readonly string[]): string[] {
  const all = statementsOf(texts);
  const faults: string[] = [];
  const patient = all.some((s) => /\block_timeout\b/.test(s));
  for (const s of all) {
    const say = (why: string): void => void faults.push(`${why}: ${s.slice(0, 80)}`);
    if (ON_LARGE.test(s)) {
      if (!patient) say('waits for its lock for ever, and everybody behind it: set local lock_timeout first');
      for (const [why, pattern] of REFUSED) if (pattern.test(s)) say(why);
    }
    if (
      new RegExp(`\\bcreate (?:unique )?index (?!concurrently)[^(]* on (?!only )(?:${LARGE})\\b`).test(s) ||
      new RegExp(`\\breindex (?!.*concurrently).*\\b(?:${LARGE})\\b`).test(s)
    )
      say('keeps writers out while it builds: CREATE INDEX CONCURRENTLY a partition, ON ONLY for the parent');
    if (new RegExp(`\\b(?:cluster|vacuum full) (?:${LARGE})\\b`).test(s)) say('rewrites the table');
    if (new RegExp(`^(?:with .*)?update (?:only )?(?:${LARGE})\\b`).test(s))
      say('changes every row in one transaction: a job does it in pieces');
  }
  return faults;
}

describe('migrations', () => {
  it('hold up no reading', () => {
    const found = fs
      .readdirSync(path.join(ROOT, 'migrations'))
      .filter((file) => file >= FIRST)
      .flatMap((file) => {
        const text = fs.readFileSync(path.join(ROOT, 'migrations', file), 'utf8');
        return faultsOf(stringsOf(file, text)).map((fault) => `${file}: ${fault}`);
      });
    expect(found).toEqual([]);
  });

  const PATIENT = `set local lock_timeout = '3s';`;
  it.each([
    ['alter table string_frame add humidity int2[]', 1],
    [`${PATIENT} alter table string_frame add humidity int2[]`, 0],
    [`${PATIENT} alter table only string_frame alter column signal type int4[]`, 1],
    [`${PATIENT} alter table packed_frame add made timestamptz default clock_timestamp()`, 1],
    [`${PATIENT} alter table packed_frame add made timestamptz default now()`, 0],
    [`${PATIENT} alter table string_quarter add n bigserial`, 1],
    [`${PATIENT} alter table event add constraint told check (detail <> '{}')`, 1],
    [`${PATIENT} alter table event add constraint told check (detail <> '{}') not valid`, 0],
    [`${PATIENT} alter table event validate constraint told`, 0],
    [`${PATIENT} alter table input_frame alter voltage set not null`, 1],
    [`${PATIENT} alter table string_frame_20261130 set unlogged`, 1],
    ['create index event_kind on event (kind)', 1],
    ['create index concurrently event_kind on event (kind)', 0],
    ['create index string_frame_mask on only string_frame (mask)', 0],
    [`update string_frame set signal = '{}'`, 1],
    ['vacuum full string_day', 1],
    ['create table string_frame_note (id int4)', 0],
    ['alter table site add colour text', 0],
  ])('%s: %i faults', (sql, faults) => {
    expect(faultsOf([sql])).toHaveLength(faults);
  });
});
