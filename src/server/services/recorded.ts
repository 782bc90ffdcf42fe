import { AppError, type FieldFault } from '../errors';
import { recordRefusals } from '../../words/refusals-as-built';

/** What every record has in common that is made on a phone and sent later. */

/** A phone's clock may be this far ahead of the server's, ms. */
const AHEAD_MS = 5 * 60_000;
/** Nothing is kept on a phone for longer, ms: an older time is a clock that was never set. */
const OLDEST_MS = 366 * 86_400_000;

const minute = (at: Date): string => `${at.toISOString().slice(0, 16).replace('T', ' ')} UTC`;

/** The fault of a record's time, if it has one. It names the clock that is wrong and what to do. */
export function clockFault(at: string, now: Date): FieldFault | undefined {
  const ms = Date.parse(at) - now.getTime();
  if (ms > AHEAD_MS)
    return {
      field: 'body.at',
      message: recordRefusals.timeAhead(minute(new Date(at)), minute(now)),
    };
  if (ms < -OLDEST_MS)
    return {
      field: 'body.at',
      message: recordRefusals.timeLongAgo(minute(new Date(at)), minute(now)),
    };
  return undefined;
}

/** @throws AppError invalid naming each field, when there are faults */
export function refuseFaults(faults: readonly FieldFault[]): void {
  if (faults.length > 0)
    throw new AppError('invalid', {
      message: faults.map((f) => f.message).join(' '),
      fields: [...faults],
    });
}

/** The identifier was used for something else: for another record, or for what the sender can't see. */
export const refTaken = (): AppError =>
  new AppError('conflict', {
    message: recordRefusals.identifierTaken,
    fields: [{ field: 'body.ref', message: recordRefusals.makeNewIdentifier }],
  });

/** Somebody else recorded the same thing meanwhile; `current` is theirs. */
export function recordedMeanwhile(what: string, current: { person: string; at: string } | null): AppError {
  return new AppError('conflict', {
    message: current
      ? recordRefusals.notSeen(current.person, what, minute(new Date(current.at)))
      : recordRefusals.sendEarlierFirst(what),
    current,
  });
}
