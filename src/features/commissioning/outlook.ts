import type { RollCallRun } from '../../schemas/api/roll-call';
import type { RollTally } from './tally';
import type { Outlook } from './words';

export interface RollCallOutlook extends Outlook {
  /** From now on, epoch seconds; units heard in all. */
  curve: { atS: number; expected: number; low: number; high: number }[];
}

export function outlookOf(_tally: RollTally, _run: RollCallRun, _now: Date): RollCallOutlook | null {
  return null;
}
