import { listed } from '../../drawings/numbers';
import type { InstallationStatus } from '../../schemas/api/status';
import { statusFindingWords } from '../../words/status';
import { capital } from '../../words/domain-counts';

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
  const { loggers, database, replica } = status;
  const away = loggers.filter((l) => !l.connected);
  const refused = loggers.reduce((sum, l) => sum + l.refused, 0);
  const faults = [
    judgementLate(status) ? statusFindingWords.judgementIsBehindWhat : '',
    rollUpLate(status) ? statusFindingWords.rollUpsStandStill : '',
    placesMissing(status) ? statusFindingWords.noPlaceIsPrepared : '',
    database.rowSecurity ? '' : statusFindingWords.allRunsWithOne,
    replica && replica.state !== 'serves' ? statusFindingWords.theReplicaDoesNot : '',
  ].filter(Boolean);
  const counts = statusFindingWords.loggersOfLoggersConnected(loggers.length, away.length, refused);
  if (faults.length > 0) {
    return { heading: capital(listed(faults)), sentence: counts };
  }
  if (away.length > 0)
    return {
      heading: statusFindingWords.ofNotConnected(away.length, loggers.length),
      sentence: statusFindingWords.nothingNewerIsKnown(away.length, counts),
    };
  return { heading: statusFindingWords.theInstallationRunsAs, sentence: counts };
}
