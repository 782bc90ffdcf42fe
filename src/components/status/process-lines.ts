import type { TimeLine } from '../../drawings/HistoryLines';
import { number, quantity } from '../../drawings/numbers';
import type { ProcessFigures, ProcessHistory, ProcessSample } from '../../schemas/api/processes';
import { processLines } from '../../words/status';

type Figure = keyof ProcessFigures;
interface Line {
  figure: Figure;
  /** What the line is called where two share a drawing. */
  name?: string;
  /** How minutes are gathered where a point of the drawing holds several: what is a duration or a peak shows its worst. */
  gather: 'mean' | 'worst';
  /** From what was kept to what is drawn. */
  drawn?: (value: number, sample: ProcessSample) => number;
}
export interface Picture {
  title: string;
  unit: string;
  /** Which role's processes have it; undefined: all. */
  role?: 'web' | 'ingest' | 'worker';
  lines: readonly Line[];
  digits?: number;
  /** Minutes in which this was not zero are marked. */
  marked?: Figure;
}

const perMinute = (value: number, { spanS }: ProcessSample): number => (value / spanS) * 60;

/** What the status page draws of each process, in its order. */
export const PICTURES: readonly Picture[] = [
  {
    title: processLines.readingsMadeDurable,
    unit: '1/s',
    role: 'ingest',
    lines: [{ figure: 'readingsPerS', gather: 'mean' }],
  },
  {
    title: processLines.readingsThatWaitedAt,
    unit: 'readings',
    role: 'ingest',
    lines: [{ figure: 'waitingReadings', gather: 'worst' }],
    marked: 'pauses',
  },
  {
    title: processLines.commitAndAcknowledgement95,
    unit: 'ms',
    role: 'ingest',
    lines: [
      { figure: 'commitP95Ms', name: 'commit', gather: 'worst' },
      { figure: 'ackP95Ms', name: 'acknowledged', gather: 'worst' },
    ],
  },
  {
    title: processLines.judgedAfterCommit95,
    unit: 'ms',
    role: 'ingest',
    lines: [{ figure: 'judgedP95Ms', gather: 'worst' }],
  },
  {
    title: processLines.delayOfTheEvent,
    unit: 'ms',
    lines: [
      { figure: 'loopP99Ms', name: processLines.n99Of100, gather: 'worst' },
      { figure: 'loopP50Ms', name: 'half', gather: 'mean' },
    ],
    digits: 1,
  },
  {
    title: processLines.pagesAndAnswers95,
    unit: 'ms',
    role: 'web',
    lines: [{ figure: 'requestP95Ms', gather: 'worst' }],
    marked: 'requestsFailed',
  },
  {
    title: processLines.pagesAndAnswers,
    unit: '1/s',
    role: 'web',
    lines: [{ figure: 'requestsPerS', gather: 'mean' }],
    digits: 2,
  },
  {
    title: processLines.browsersThatListen,
    unit: 'browsers',
    role: 'web',
    lines: [{ figure: 'liveClients', gather: 'worst' }],
    marked: 'liveSlow',
  },
  {
    title: processLines.jobsRun,
    unit: processLines.aMinute,
    role: 'worker',
    lines: [{ figure: 'jobsRun', gather: 'mean', drawn: perMinute }],
    marked: 'jobsFailed',
  },
  {
    title: processLines.longestThatADue,
    unit: 's',
    role: 'worker',
    lines: [{ figure: 'oldestDueS', gather: 'worst' }],
  },
  {
    title: processLines.databaseConnections,
    unit: 'connections',
    lines: [
      { figure: 'poolUsed', name: processLines.inUse, gather: 'worst' },
      { figure: 'poolWaiting', name: processLines.waitedFor, gather: 'worst' },
    ],
  },
  {
    title: processLines.memory,
    unit: 'MB',
    lines: [{ figure: 'rssBytes', gather: 'worst', drawn: (bytes) => bytes / 1e6 }],
  },
];

/** What a mark below each picture's line stands for. */
export const MARK_WORDS: Partial<Record<Figure, string>> = {
  pauses: processLines.socketsWerePaused,
  requestsFailed: processLines.anAnswerFailed,
  liveSlow: processLines.aBrowserReadToo,
  jobsFailed: processLines.aJobFailed,
};

/** A process that was quiet for longer than this has ended, or can't reach the database. Seconds. */
export const QUIET_AFTER_S = 150;
const POINTS = 360;
/** Samples further apart than this many spans have a gap between them. */
const GAP_SPANS = 2.5;

/** A line of at most 360 points, broken where samples are missing. */
export function lineOf(samples: readonly ProcessSample[], line: Line, from: number, to: number): TimeLine {
  const widthS = Math.max(60, (to - from) / POINTS);
  const groups = new Map<number, number[]>();
  const at: number[] = [];
  const values: (number | null)[] = [];
  for (const sample of samples) {
    const value = sample.figures[line.figure];
    const slot = Math.floor((sample.at - from) / widthS);
    const group = groups.get(slot) ?? [];
    groups.set(slot, group);
    if (value !== null) group.push(line.drawn ? line.drawn(value, sample) : value);
  }
  let before: number | null = null;
  for (const [slot, group] of groups) {
    if (before !== null && slot - before > GAP_SPANS) {
      at.push(from + (before + 1) * widthS);
      values.push(null);
    }
    before = slot;
    at.push(from + (slot + 0.5) * widthS);
    values.push(
      group.length === 0
        ? null
        : line.gather === 'worst'
          ? Math.max(...group)
          : group.reduce((a, b) => a + b, 0) / group.length,
    );
  }
  return { at, values };
}

/** When this happened, once for each point of the drawing. */
export function marksOf(
  samples: readonly ProcessSample[],
  figure: Figure | undefined,
  from: number,
  to: number,
): number[] {
  if (!figure) return [];
  const widthS = Math.max(60, (to - from) / POINTS);
  const slots = new Set<number>();
  for (const { at, figures } of samples)
    if ((figures[figure] ?? 0) > 0) slots.add(Math.floor((at - from) / widthS));
  return [...slots].map((slot) => from + (slot + 0.5) * widthS);
}

/** The newest value of a line with its unit, or that there was none. */
export function newest(
  samples: readonly ProcessSample[],
  line: Line,
  { unit, digits }: Pick<Picture, 'unit' | 'digits'>,
): string {
  const sample = samples.findLast((s) => s.figures[line.figure] !== null);
  const value = sample?.figures[line.figure] ?? null;
  if (!sample || value === null) return processLines.noneYet;
  const drawn = line.drawn ? line.drawn(value, sample) : value;
  return unit === 'readings' || unit === 'browsers' ? number(drawn) : quantity(drawn, unit, digits ?? 0);
}

export const isQuiet = ({ samples }: ProcessHistory, nowS: number): boolean =>
  nowS - (samples.at(-1)?.at ?? 0) > QUIET_AFTER_S;
