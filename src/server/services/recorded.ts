import { AppError, type FieldFault } from '../errors';

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
      message: `The time is ${minute(new Date(at))}, ahead of the server’s clock (${minute(now)}). Set the clock of the phone or computer that recorded it, then send it again.`,
    };
  if (ms < -OLDEST_MS)
    return {
      field: 'body.at',
      message: `The time is ${minute(new Date(at))}, more than a year ago; the server’s clock says ${minute(now)}. Set the clock of the phone or computer that recorded it, then send it again.`,
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
    message:
      'Another record carries this identifier already, with other content. Nothing was changed; record it again.',
    fields: [{ field: 'body.ref', message: 'Make a new identifier for a new record.' }],
  });

/** Somebody else recorded the same thing meanwhile; `current` is theirs. */
export function recordedMeanwhile(what: string, current: { person: string; at: string } | null): AppError {
  return new AppError('conflict', {
    message: current
      ? `${current.person} recorded ${what} at ${minute(new Date(current.at))}, which you have not seen. Nothing is lost: compare both, then keep theirs or send yours again in place of theirs.`
      : `The record of ${what} that this one takes the place of is not here. Send that one first.`,
    current,
  });
}
