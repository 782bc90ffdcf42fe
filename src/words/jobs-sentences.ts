import { counted, countAtStart } from '../drawings/numbers';
import type { JobFailure, JobKindLine, JobsPage } from '../schemas/api/jobs';

/** "0.4 s", "2 min". */
export function took(ms: number | null): string {
  if (ms === null) return '–';
  if (ms < 1000) return `${Math.round(ms)} ms`;
  return ms < 90_000 ? `${(ms / 1000).toFixed(1)} s` : `${Math.round(ms / 60_000)} min`;
}

export function jobsFinding(page: JobsPage): { finding: string; sentence: string } {
  if (page.noQueue)
    return {
      finding: 'No worker has ever run here',
      sentence:
        'Start a process with the role "worker": without it nothing is summed up, judged at night or sent.',
    };
  const { failing } = page;
  const late = page.kinds.filter((k) => isLate(k, page.at));
  const givenUp = failing.filter((f) => f.nextAt === null).length;
  if (givenUp > 0)
    return {
      finding: `${countAtStart(givenUp)} ${givenUp === 1 ? 'job was' : 'jobs were'} given up`,
      sentence:
        'It failed as often as it may be tried. See below why, put that right, then let it be tried again: what it had done halfway is not done twice.',
    };
  if (failing.length > 0)
    return {
      finding: `${countAtStart(failing.length)} ${failing.length === 1 ? 'job has' : 'jobs have'} failed and ${failing.length === 1 ? 'is' : 'are'} tried again`,
      sentence: 'Each is tried again by itself, later each time. What it had done halfway is not done twice.',
    };
  if (late.length > 0)
    return {
      finding: `${countAtStart(late.length)} ${late.length === 1 ? 'kind of job is' : 'kinds of job are'} late`,
      sentence:
        'No worker may be running, or it has more to do than it can. Look at the process with the role "worker".',
    };
  return {
    finding: 'All jobs run as they should',
    sentence: `${counted(page.kinds.length, 'kind')} of job; what fails is tried again by itself.`,
  };
}

const LATE_FROM_MS = 600_000;

/** A job that comes by the clock and has not begun ten minutes after it was to. */
export const isLate = ({ due }: JobKindLine, at: string): boolean =>
  due !== null && Date.parse(at) - Date.parse(due) > LATE_FROM_MS;

/** Why a job failed, as a manager reads it; `said`: the program's own words where it was made for no such failure. */
export function failedWords(why: JobFailure, said: string): string {
  switch (why) {
    case 'said':
      return said;
    case 'locked':
      return 'Something else held the rows that it needed for longer than it waits. Nothing is to be done; if it goes on for an hour, have the database looked at for a transaction that does not end.';
    case 'too_long':
      return 'The database did not finish one of its steps in the time that a step may take. If it goes on, the database has too much to do: see the status page.';
    case 'full':
      return 'The database has run out of disk or memory. It goes on by itself once there is room.';
    case 'away':
      return 'The database could not be reached, or had no connection free for as long as one waits. If it goes on, see the status page.';
    case 'unforeseen':
      return `It met something that it was not made for. For whoever looks after the installation: "${said}"`;
  }
}

/** "12 quarters, 3 redone": what a run did; nothing: an empty text. */
export const doneWords = (done: Record<string, number>): string =>
  Object.entries(done)
    .filter(([, n]) => n > 0)
    .map(([what, n]) => `${n} ${what.replace(/([A-Z])/g, ' $1').toLowerCase()}`)
    .join(', ');
