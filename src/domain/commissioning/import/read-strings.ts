/** What the rows of one string say together: positions without gaps, one plane, one input, enough to make it. */
import { importStringSaid } from '../../../words/domain-import';
import type { ImportColumn } from './columns';
import type { Faults, RawRow } from './read-rows';
import {
  bareName,
  inputName,
  type ImportChoices,
  type KnownNames,
  type KnownString,
  type NewString,
} from './table';

export interface StringRows {
  name: string;
  known: KnownString | undefined;
  rows: RawRow[];
}

/** Rows by string, in the order in which strings first appear. */
export function byString(rows: readonly RawRow[], names: KnownNames): StringRows[] {
  const known = new Map(names.strings.map((s) => [s.name, s]));
  const groups = new Map<string, StringRows>();
  for (const row of rows) {
    if (row.string === undefined) continue;
    let group = groups.get(row.string);
    if (!group)
      groups.set(row.string, (group = { name: row.string, known: known.get(row.string), rows: [] }));
    group.rows.push(row);
  }
  return [...groups.values()];
}

/** Positions that come twice, and positions that nobody has: a string has every position from 1 to its last. */
export function checkPositions({ name, known, rows }: StringRows, faults: Faults): void {
  const first = new Map<number, number>();
  for (const row of rows) {
    if (row.position === undefined) continue;
    const before = first.get(row.position);
    if (before === undefined) first.set(row.position, row.line);
    else
      faults.add(
        row.line,
        'position',
        'position_double',
        importStringSaid.positionTwice(row.position, name, before),
        importStringSaid.positionTwiceRemedy,
      );
  }
  const last = Math.max(0, ...first.keys());
  // a faulty position may be the missing one: said once is enough
  if (rows.some((r) => r.position === undefined)) return;
  const missing: number[] = [];
  for (let p = (known?.slots ?? 0) + 1; p <= last; p++) if (!first.has(p)) missing.push(p);
  const next = rows.find(
    (r) => r.position !== undefined && missing[0] !== undefined && r.position > missing[0],
  );
  if (missing.length > 0 && next)
    faults.add(
      next.line,
      'position',
      'position_missing',
      known
        ? importStringSaid.positionsMissingKnown(name, known.slots, spans(missing), last)
        : importStringSaid.positionsMissing(name, spans(missing)),
      importStringSaid.positionsMissingRemedy,
    );
}

/** "3, 5–7": numbers in order, runs drawn together. */
export function spans(numbers: readonly number[]): string {
  const runs: [number, number][] = [];
  for (const n of numbers) {
    const last = runs.at(-1);
    if (last && last[1] === n - 1) last[1] = n;
    else runs.push([n, n]);
  }
  return runs.map(([a, b]) => (a === b ? `${a}` : `${a}–${b}`)).join(', ');
}

/** What all rows of the string agree on in one column; contradictions become faults. */
function agreed<K extends 'plane' | 'zone' | 'logger'>(
  group: StringRows,
  column: K,
  faults: Faults,
): string | null | undefined {
  let value: string | null | undefined = null;
  for (const row of group.rows) {
    const cell = row[column];
    if (cell === undefined) return undefined;
    if (cell === null || cell === value) continue;
    if (value !== null) {
      contradiction(group, row.line, column, value, cell, faults);
      return undefined;
    }
    value = cell;
  }
  return value;
}

function contradiction(
  group: StringRows,
  line: number,
  column: ImportColumn,
  before: string,
  now: string,
  faults: Faults,
): void {
  faults.add(
    line,
    column,
    'string_contradicts',
    importStringSaid.contradicts(group.name, column, before, now),
    importStringSaid.contradictsRemedy(column),
  );
}

function agreedInput(group: StringRows, faults: Faults): string | null | undefined {
  let value: string | null = null;
  for (const row of group.rows) {
    if (row.input === undefined) return undefined;
    if (row.input === null) continue;
    const name = inputName(row.input.inverter, row.input.number);
    if (value !== null && name !== value) {
      contradiction(group, row.line, 'input', value, name, faults);
      return undefined;
    }
    value = name;
  }
  return value;
}

const sameSet = (a: readonly string[], b: readonly string[]): boolean =>
  a.length === b.length && a.every((x) => b.includes(x));

/** A string that is there stays on its plane, input and zone: a file that says otherwise is asked about. */
export function checkKnown(group: StringRows, faults: Faults): void {
  const { known, name, rows } = group;
  if (!known) return;
  const line = rows[0]?.line ?? 1;
  const differs = (column: ImportColumn, said: string | null | undefined, is: string | null) => {
    if (said === null || said === undefined || said === is) return;
    faults.add(
      line,
      column,
      'string_differs',
      importStringSaid.differs(name, column, is, said),
      importStringSaid.differsRemedy,
      { suggestion: is },
    );
  };
  differs('plane', agreed(group, 'plane', faults), known.plane);
  differs('zone', agreed(group, 'zone', faults), known.zone);
  differs('logger', agreed(group, 'logger', faults), known.logger);
  differs('input', agreedInput(group, faults), inputName(known.inverter, known.input));
  const senders = rows.find((r) => r.transmitters)?.transmitters;
  if (senders && !sameSet(senders, known.transmitters))
    differs('transmitters', senders.join('; '), known.transmitters.join('; '));
}

/** Gives new strings their inputs one after the other: those without a string first come, first served. */
export function freeInputs(names: KnownNames): () => { inverter: string; number: number } | undefined {
  const used = new Set(names.strings.map((s) => inputName(s.inverter, s.input)));
  const free = names.inputs.filter((i) => !used.has(inputName(i.inverter, i.number)));
  let n = 0;
  return () => free[n++];
}

/** The commonest of some words; null where there are none. */
function commonest(words: readonly (string | null | undefined)[]): string | null {
  const counts = new Map<string, number>();
  for (const word of words) if (word) counts.set(word, (counts.get(word) ?? 0) + 1);
  return [...counts].sort((a, b) => b[1] - a[1])[0]?.[0] ?? null;
}

/** A string that is not there yet, from the file and from what is chosen for all new ones; undefined: not possible. */
export function readNewString(
  group: StringRows,
  choices: ImportChoices,
  names: KnownNames,
  nextFree: ReturnType<typeof freeInputs>,
  faults: Faults,
): NewString | undefined {
  const { name, rows } = group;
  const line = rows[0]?.line ?? 1;
  const defaults = choices.newStrings;
  if (!defaults) {
    const near = names.strings.find(
      (s) => bareName(s.name).replace(/\W/g, '') === bareName(name).replace(/\W/g, ''),
    );
    faults.add(
      line,
      'string',
      'string_unknown',
      importStringSaid.unknown(name),
      near ? importStringSaid.unknownNear(near.name) : importStringSaid.unknownRemedy,
      { suggestion: near?.name ?? null },
    );
    return undefined;
  }
  const missing = (column: ImportColumn): undefined => {
    faults.add(
      line,
      column,
      'string_incomplete',
      importStringSaid.incomplete(name, column),
      importStringSaid.incompleteRemedy,
    );
    return undefined;
  };
  // what the file says and is wrong has its fault already
  const settled = (column: 'plane' | 'zone'): string | undefined => {
    const said = agreed(group, column, faults);
    return said === undefined ? undefined : (said ?? defaults[column] ?? missing(column));
  };
  const plane = settled('plane');
  const zone = settled('zone');
  const saidInput = agreedInput(group, faults);
  const wanted =
    saidInput === undefined
      ? undefined
      : saidInput !== null
        ? saidInput
        : defaults.input === 'each_next'
          ? (() => {
              const next = nextFree();
              return next && inputName(next.inverter, next.number);
            })()
          : defaults.input;
  const input = names.inputs.find((i) => inputName(i.inverter, i.number) === wanted);
  if (!input && saidInput === null) {
    if (defaults.input === 'each_next')
      faults.add(
        line,
        'input',
        'string_incomplete',
        importStringSaid.noInputLeft(name),
        importStringSaid.noInputLeftRemedy,
      );
    else missing('input');
  }
  const typeName = rows.some((r) => r.unitType === undefined)
    ? undefined
    : (commonest(rows.map((r) => r.unitType)) ?? defaults.unitType ?? missing('unitType'));
  const unitType = names.unitTypes.find((t) => t.name === typeName);
  const moduleType = rows.some((r) => r.moduleType === undefined)
    ? undefined
    : (commonest(rows.map((r) => r.moduleType)) ?? defaults.moduleType ?? missing('moduleType'));
  if (!unitType) return undefined;
  const saidLogger = agreed(group, 'logger', faults);
  const logger = saidLogger ?? defaults.logger;
  if (unitType.kind !== 'shutdown_only' && !logger && saidLogger !== undefined) missing('logger');
  const saidSenders = rows.find((r) => r.transmitters)?.transmitters;
  const transmitters = saidSenders ?? defaults.transmitters;
  if (
    unitType.kind === 'shutdown_only' &&
    transmitters.length === 0 &&
    !rows.some((r) => r.transmitters === undefined)
  )
    missing('transmitters');
  if (!plane || !zone || !input || !moduleType) return undefined;
  return {
    name,
    line,
    slots: Math.max(1, ...rows.map((r) => r.position ?? 0)),
    plane,
    inverter: input.inverter,
    input: input.number,
    zone,
    unitType: unitType.name,
    kind: unitType.kind,
    moduleType,
    logger: logger ?? null,
    transmitters,
  };
}
