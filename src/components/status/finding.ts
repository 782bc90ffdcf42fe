import { counted, countAtStart, listed, number } from '../../drawings/numbers';
import type { InstallationStatus } from '../../schemas/api/status';

/** Roll-ups close a quarter some minutes after its end; this much behind, something stands still. Seconds. */
const ROLL_UP_LATE_S = 40 * 60;
/** Frames are judged within seconds; this much behind, judgement stands still. Seconds. */
const JUDGEMENT_LATE_S = 120;

const behindS = (since: string | null, at: string): number =>
  since === null ? 0 : (Date.parse(at) - Date.parse(since)) / 1000;

export const judgementLate = ({ work, at }: InstallationStatus): boolean =>
  work.unjudgedStrings > 0 && behindS(work.unjudgedSince, at) > JUDGEMENT_LATE_S;
export const rollUpLate = ({ work, at }: InstallationStatus): boolean =>
  work.newestFrameAt !== null && (work.rolledUpTo === null || behindS(work.rolledUpTo, at) > ROLL_UP_LATE_S);
/** Frames of tomorrow need a place before midnight UTC. */
export const placesMissing = ({ work, at }: InstallationStatus): boolean =>
  work.preparedTo === null || work.preparedTo <= at.slice(0, 10);

/** How the installation runs, as a heading and what follows. */
export function statusFinding(status: InstallationStatus): { heading: string; sentence: string } {
  const { loggers, database } = status;
  const away = loggers.filter((l) => !l.connected);
  const refused = loggers.reduce((sum, l) => sum + l.refused, 0);
  const faults = [
    judgementLate(status) ? 'judgement is behind what has come in' : '',
    rollUpLate(status) ? 'roll-ups stand still' : '',
    placesMissing(status) ? 'no place is prepared for the frames of tomorrow' : '',
    database.rowSecurity ? '' : 'all runs with one database account',
  ].filter(Boolean);
  const counts = `${number(loggers.length - away.length)} of ${counted(loggers.length, 'logger')} connected; ${
    refused === 0 ? 'no message was refused' : `${counted(refused, 'message')} refused since they were set up`
  }.`;
  if (faults.length > 0) {
    const text = listed(faults);
    return { heading: `${text.charAt(0).toUpperCase()}${text.slice(1)}`, sentence: counts };
  }
  if (away.length > 0)
    return {
      heading: `${countAtStart(away.length)} of ${counted(loggers.length, 'logger')} ${away.length === 1 ? 'is' : 'are'} not connected`,
      sentence: `Nothing newer is known of ${away.length === 1 ? 'its site' : 'their sites'} until ${away.length === 1 ? 'it comes' : 'they come'} back. ${counts}`,
    };
  return { heading: 'The installation runs as it should', sentence: counts };
}
