import type { HistoryQuery, UnitsQuery } from '../../schemas/api/string';
import type { Tx } from '../db/transaction';
import { noSuchString, readHistory, readUnits } from '../services/string-history';
import { stringFacts } from '../queries/string-facts';
import { csvResponse, type Cell, type Column } from './csv';

const rounded = (value: number | null | undefined, digits: number): number | null =>
  value === null || value === undefined ? null : Number(value.toFixed(digits));
const instant = (seconds: number): Date => new Date(seconds * 1000);
const dayOf = (seconds: number): string => instant(seconds).toISOString().slice(0, 10);

async function nameOf(tx: Tx, ref: string): Promise<string> {
  const facts = await stringFacts(tx, ref);
  if (!facts) throw noSuchString();
  return `${facts.siteName} ${facts.name}`;
}

/**
 * The voltage history as a download; rows are the steps shown, gaps left out. Times in UTC.
 * @throws AppError as `readHistory`
 */
export async function historyCsv(tx: Tx, ref: string, query: HistoryQuery, now: Date): Promise<Response> {
  const name = await nameOf(tx, ref);
  const history = await readHistory(tx, ref, query, now);
  const expected = history.expected.at.map((at, i) => ({ at, i }));
  let next = 0;
  const rows = history.at.flatMap((at, i) => {
    if (history.voltage[i] === null) return [];
    while (next + 1 < expected.length && (expected[next + 1]?.at ?? Infinity) <= at) next++;
    return [{ at, i, e: (expected[next]?.at ?? Infinity) <= at ? next : -1 }];
  });
  const column = (
    header: string,
    values: readonly (number | null)[],
    digits: number,
  ): Column<(typeof rows)[0]> => ({
    header,
    value: (r): Cell => rounded(values[r.i], digits),
  });
  return csvResponse(
    `${name} voltage ${history.range} to ${dayOf(history.to)}`,
    [
      { header: 'time (UTC)', value: (r) => instant(r.at) },
      column('voltage, mean (V)', history.voltage, 2),
      column('voltage, lowest (V)', history.low, 2),
      column('voltage, highest (V)', history.high, 2),
      column('energy in the step (Wh)', history.energy, 2),
      { header: 'expected from (V)', value: (r) => rounded(history.expected.low[r.e], 1) },
      { header: 'expected to (V)', value: (r) => rounded(history.expected.high[r.e], 1) },
    ],
    rows,
  );
}

/**
 * One quantity of chosen units over a day as a download, one column a position. Times in UTC.
 * @throws AppError as `readUnits`
 */
export async function unitsCsv(tx: Tx, ref: string, query: UnitsQuery, now: Date): Promise<Response> {
  const name = await nameOf(tx, ref);
  const units = await readUnits(tx, ref, query, now);
  const rows = units.at.map((at, i) => ({ at, i }));
  return csvResponse(
    `${name} units ${units.quantity} ${dayOf(units.to)}`,
    [
      { header: 'time (UTC)', value: (r) => instant(r.at) },
      ...units.lines.map((line): Column<(typeof rows)[0]> => ({
        header: `position ${line.position} (${units.unit})`,
        value: (r) => rounded(line.values[r.i], 3),
      })),
    ],
    rows,
  );
}
