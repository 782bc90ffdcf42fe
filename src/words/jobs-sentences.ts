import { counted, countAtStart } from '../drawings/numbers';
import type { JobKindLine, JobsPage } from '../schemas/api/jobs';

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

/** A job that comes by the clock and has not begun for ten minutes longer than it should. */
export function isLate(kind: JobKindLine, at: string): boolean {
  if (kind.next === null || kind.last === null) return false;
  const every = 3_600_000;
  return Date.parse(at) - Date.parse(kind.last.startedAt) > every + 600_000;
}

/** "12 quarters, 3 redone": what a run did; nothing: an empty text. */
export const doneWords = (done: Record<string, number>): string =>
  Object.entries(done)
    .filter(([, n]) => n > 0)
    .map(([what, n]) => `${n} ${what.replace(/([A-Z])/g, ' $1').toLowerCase()}`)
    .join(', ');
