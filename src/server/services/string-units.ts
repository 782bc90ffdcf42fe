import type { StringUnits, UnitQuantity, UnitsQuery } from '../../schemas/api/string';
import type { StringHeat } from '../../schemas/api/workbench';
import { localDay } from '../../drawings/times';
import type { Tx } from '../db/transaction';
import { importedUnits } from '../queries/history-readings';
import { stringFacts, type StringFacts } from '../queries/string-facts';
import { dayBounds } from '../queries/string-history';
import { staysOf, unitMinutes, unitQuarters, unitSteps, type UnitColumn } from '../queries/string-units';
import { gapFrom, movesOf, nightsOf, noSuchString } from './string-axis';

const UNIT: Record<UnitQuantity, string> = { voltage: 'V', current: 'A', temperature: '°C', power: 'W' };
const DAYS = { day: 1, week: 7, month: 31 } as const;
const HEAT_STEP_S = 300;

function columnOf(facts: StringFacts, quantity: UnitQuantity): UnitColumn {
  return quantity === 'voltage' && facts.measures === 'input' ? 'voltageIn' : quantity;
}

/**
 * One quantity of chosen units: over a day report by report (at least a minute apart), over a week or a month as means
 * of 15 minutes. Where nothing was reported in all that time, what was imported of single units.
 * @throws AppError not_found
 */
export async function readUnits(tx: Tx, ref: string, query: UnitsQuery, now: Date): Promise<StringUnits> {
  const facts = await stringFacts(tx, ref);
  if (!facts) throw noSuchString();
  const { from, to } = await dayBounds(tx, query.on ?? null, now, facts.timeZone, DAYS[query.range]);
  const chosen = query.positions
    ? [...new Set(query.positions.split(',').map(Number))].filter((p) => p >= 1 && p <= facts.slots)
    : Array.from({ length: facts.slots }, (_, i) => i + 1);
  const column = columnOf(facts, query.quantity);
  let resolution: StringUnits['resolution'] = query.range === 'day' ? 'minute' : 'quarter';
  let rows: { at: number; values: (number | null)[] | null }[] =
    resolution === 'minute' ? await unitMinutes(tx, facts.id, { from, to }, column) : [];
  let imported = false;
  if (rows.length === 0) {
    // of a day whose reports are no longer kept the roll-up stays
    const quarters = await unitQuarters(tx, facts.id, { from, to }, column);
    if (quarters.length > 0 || resolution === 'quarter') {
      rows = quarters;
      resolution = 'quarter';
    }
    if (quarters.length === 0) {
      rows = await importedUnits(tx, facts.id, { from, to }, query.quantity, 900, facts.slots);
      imported = rows.length > 0;
      if (imported) resolution = 'quarter';
    }
  }
  const at: number[] = [];
  const lines = chosen.map((position) => ({ position, values: [] as (number | null)[] }));
  let before = -Infinity;
  const stepS = resolution === 'quarter' ? 900 : Math.max(60, facts.reportIntervalS);
  const gap = gapFrom(
    rows.map((r) => r.at),
    stepS,
  );
  for (const row of rows) {
    if (row.at - before < stepS - 1) continue;
    if (before > 0 && row.at - before > gap) {
      at.push(before + stepS);
      for (const line of lines) line.values.push(null);
    }
    at.push(row.at);
    for (const line of lines) line.values.push(row.values?.[line.position - 1] ?? null);
    before = row.at;
  }
  return {
    quantity: query.quantity,
    unit: UNIT[query.quantity],
    side: column === 'voltageIn' ? 'module' : 'output',
    range: query.range,
    resolution,
    imported,
    from: from.getTime() / 1000,
    to: to.getTime() / 1000,
    timeZone: facts.timeZone,
    at,
    lines,
    moves: (await movesOf(tx, facts.id, { from, to })).filter((m) => chosen.includes(m.position)),
    nights: nightsOf(facts, from, to),
  };
}

/**
 * One quantity of every unit over a day in steps of five minutes, or of fifteen where reports are no longer kept or the
 * day was imported.
 * @throws AppError not_found
 */
export async function readHeat(
  tx: Tx,
  ref: string,
  query: { on?: string | undefined; quantity: UnitQuantity },
  now: Date,
): Promise<StringHeat> {
  const facts = await stringFacts(tx, ref);
  if (!facts) throw noSuchString();
  const { from, to } = await dayBounds(tx, query.on ?? null, now, facts.timeZone, 1);
  const column = columnOf(facts, query.quantity);
  let stepS = Math.max(HEAT_STEP_S, facts.reportIntervalS);
  let steps: { at: number; values: (number | null)[] | null }[] = await unitSteps(
    tx,
    facts.id,
    { from, to },
    column,
    stepS,
  );
  if (steps.length === 0) {
    stepS = 900;
    steps = (await unitQuarters(tx, facts.id, { from, to }, column)).map((q) => ({ ...q, at: q.at - 450 }));
  }
  const imported = steps.length === 0;
  if (imported) steps = await importedUnits(tx, facts.id, { from, to }, query.quantity, stepS, facts.slots);
  const stays = await staysOf(tx, facts.id, { from, to });
  return {
    quantity: query.quantity,
    unit: UNIT[query.quantity],
    side: column === 'voltageIn' ? 'module' : 'output',
    day: localDay(from, facts.timeZone),
    timeZone: facts.timeZone,
    from: from.getTime() / 1000,
    to: to.getTime() / 1000,
    stepS,
    imported: imported && steps.length > 0,
    at: steps.map((s) => s.at),
    rows: Array.from({ length: facts.slots }, (_, i) => ({
      position: i + 1,
      serial: stays.findLast((s) => s.position === i + 1)?.serial ?? null,
      values: steps.map((s) => s.values?.[i] ?? null),
    })),
  };
}
