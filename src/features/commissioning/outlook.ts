import { forecastRollCall, type ForecastPoint } from '../../domain/commissioning/roll-call';
import type { RollCallRun } from '../../schemas/api/roll-call';
import type { RollTally } from './tally';
import type { Outlook } from './words';

export interface RollCallOutlook extends Outlook {
  /** From now on, epoch seconds; units heard in all, those that have not stirred left out. */
  curve: ForecastPoint[];
}

/** The forecast is made anew this often. */
export const STEP_S = 10;
const seconds = (iso: string): number => new Date(iso).getTime() / 1000;

/**
 * What may be expected of a running roll call; null while too few have answered to say anything. Units that had
 * answered before this start are left out of the pace: nobody timed them. So are the strings `left`, of which nobody can
 * tell. Told in steps, so that every screen says the same at the same time.
 */
export function outlookOf(
  tally: RollTally,
  run: RollCallRun,
  now: Date,
  left: ReadonlySet<string> = new Set(),
): RollCallOutlook | null {
  const startedAtS = Math.floor(seconds(run.startedAt));
  const told = tally.units.filter((u) => u.answer ?? !left.has(u.stringId));
  const timed = told.filter((u) => !u.answer || seconds(u.answer.at) >= startedAtS);
  const before = told.length - timed.length;
  const numbers = new Map(tally.gateways.map((g, i) => [g.name, i]));
  const forecast = forecastRollCall({
    startedAtS,
    nowS: Math.max(startedAtS, Math.floor(now.getTime() / 1000 / STEP_S) * STEP_S),
    units: timed.map((u) => ({
      group: u.stringName,
      // which gateway would hear a unit is learned, not drawn: of the others nothing is known
      gateway: u.answer ? (numbers.get(u.answer.gateway) ?? null) : null,
      heardAtS: u.answer ? seconds(u.answer.at) : null,
      serial: u.serial,
    })),
  });
  if (forecast.curve.length === 0) return null;
  return {
    expected: Math.round(forecast.expectedTotal - forecast.heard),
    by: forecast.expectedByS === null ? null : new Date(forecast.expectedByS * 1000).toISOString(),
    notStirred: forecast.notStirred.map(({ kind, group, units }) => ({ kind, group, units })),
    curve: forecast.curve.map((p) => ({
      atS: p.atS,
      expected: p.expected + before,
      low: p.low + before,
      high: p.high + before,
    })),
  };
}
