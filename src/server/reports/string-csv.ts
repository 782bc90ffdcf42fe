import type { HistoryQuery, UnitsQuery } from '../../schemas/api/string';
import type { Tx } from '../db/transaction';
import { noSuchString } from '../services/string-axis';
import { readHistory } from '../services/string-history';
import { readHeat, readUnits } from '../services/string-units';
import { readLoop } from '../services/string-loop';
import { stringFacts } from '../queries/string-facts';
import { csvResponse, type Cell, type Column } from './csv';
import { stringHeads } from '../../words/csv-heads-site';

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
 * The history shown as a download; rows are the steps shown, gaps left out. Times in UTC.
 * @throws AppError as `readHistory`
 */
export async function historyCsv(tx: Tx, ref: string, query: HistoryQuery, now: Date): Promise<Response> {
  const name = await nameOf(tx, ref);
  const history = await readHistory(tx, ref, query, now);
  const expected = history.expected.at.map((at, i) => ({ at, i }));
  let next = 0;
  const rows = history.at.flatMap((at, i) => {
    if (history.values[i] === null) return [];
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
    `${name} ${history.quantity} ${history.range} to ${dayOf(history.to)}`,
    [
      { header: stringHeads.timeUtc, value: (r) => instant(r.at) },
      column(stringHeads.mean(history.quantity, history.unit), history.values, 3),
      column(stringHeads.lowest(history.quantity, history.unit), history.low, 3),
      column(stringHeads.highest(history.quantity, history.unit), history.high, 3),
      column(stringHeads.energyInTheStepWh, history.energy, 2),
      { header: stringHeads.expectedFrom(history.unit), value: (r) => rounded(history.expected.low[r.e], 3) },
      { header: stringHeads.expectedTo(history.unit), value: (r) => rounded(history.expected.high[r.e], 3) },
    ],
    rows,
  );
}

/**
 * Every unit's figures of a day as a download, one row a step. Times in UTC.
 * @throws AppError as `readHeat`
 */
export async function heatCsv(
  tx: Tx,
  ref: string,
  query: Parameters<typeof readHeat>[2],
  now: Date,
): Promise<Response> {
  const name = await nameOf(tx, ref);
  const heat = await readHeat(tx, ref, query, now);
  const rows = heat.at.map((at, i) => ({ at, i }));
  return csvResponse(
    `${name} units ${heat.quantity} ${heat.day} all`,
    [
      { header: stringHeads.timeUtc, value: (r) => instant(r.at) },
      ...heat.rows.map((row): Column<(typeof rows)[0]> => ({
        header: stringHeads.position(row.position, heat.unit),
        value: (r) => rounded(row.values[r.i], 3),
      })),
    ],
    rows,
  );
}

/**
 * The points of the resistance as a download. Times in UTC.
 * @throws AppError as `readLoop`
 */
export async function loopCsv(
  tx: Tx,
  ref: string,
  query: Parameters<typeof readLoop>[2],
  now: Date,
): Promise<Response> {
  const name = await nameOf(tx, ref);
  const loop = await readLoop(tx, ref, query, now);
  return csvResponse(
    `${name} loop ${loop.fromDay} to ${loop.day}`,
    [
      { header: stringHeads.timeUtc, value: (p) => instant(p.at) },
      { header: stringHeads.stringCurrentA, value: (p) => rounded(p.ownA, 3) },
      { header: stringHeads.sumLessTheInputV, value: (p) => rounded(p.gapV, 3) },
    ],
    loop.points,
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
      { header: stringHeads.timeUtc, value: (r) => instant(r.at) },
      ...units.lines.map((line): Column<(typeof rows)[0]> => ({
        header: stringHeads.position(line.position, units.unit),
        value: (r) => rounded(line.values[r.i], 3),
      })),
    ],
    rows,
  );
}
