import { judgedNow } from '../../domain/commissioning/readings/judged-now';
import { stagesFor, type ReadingStage } from '../../domain/commissioning/readings/stages';
import type { ReadingFinding } from '../../schemas/api/readings';
import type { CaptureSnapshot, CaptureString } from '../../schemas/api/capture';
import type { ReadingsView } from '../../schemas/api/checks-page';

/** Strings by stage with what was read there, as the desk lists them. */

export type ReadingHere = CaptureString['readings'][number];
export type Outcome = ReadingFinding['outcome'] | 'unread';

export interface ReadingRow {
  key: string;
  string: CaptureString;
  stage: ReadingStage;
  between: ReadingHere | null;
  positive: ReadingHere | null;
  negative: ReadingHere | null;
  outcome: Outcome;
  headline: string;
  /** What the two readings to earth say together; null: not both taken. */
  earth: ReadingFinding['earth'];
  /** Judged with what has been recorded since, where that says more than was known then; null: it does not. */
  now: ReadingFinding | null;
}

function rowOf(sheet: CaptureSnapshot, string: CaptureString, stage: ReadingStage): ReadingRow {
  const at = (kind: ReadingHere['kind']): ReadingHere | null =>
    string.readings.find((r) => r.stage === stage && r.kind === kind) ?? null;
  const [between, positive, negative] = [
    at('positive_to_negative'),
    at('positive_to_earth'),
    at('negative_to_earth'),
  ];
  const later = between && judgedNow(sheet, string.id, between);
  const known = between?.finding ?? later;
  const lastEarth = negative && positive ? judgedNow(sheet, string.id, negative) : null;
  const fault = lastEarth?.earth?.outcome === 'fault';
  return {
    key: `${string.id} ${stage}`,
    string,
    stage,
    between,
    positive,
    negative,
    outcome: fault ? 'finding' : (known?.outcome ?? 'unread'),
    headline: fault ? (lastEarth?.headline ?? '') : (known?.headline ?? ''),
    earth: lastEarth?.earth ?? null,
    now:
      between?.finding &&
      later &&
      later.siblings.length > between.finding.siblings.length &&
      (later.outcome !== between.finding.outcome || later.headline !== between.finding.headline)
        ? later
        : null,
  };
}

/** Every string at every stage that its type asks for, and at others where something was read all the same. */
export function readingRows(sheet: CaptureSnapshot): ReadingRow[] {
  return sheet.strings.flatMap((string) => {
    const type = sheet.unitTypes.find((t) => t.id === string.unitTypeId);
    const asked = type ? stagesFor(type) : [];
    const more = string.readings.map((r) => r.stage).filter((s) => !asked.includes(s));
    return [...new Set([...asked, ...more])].map((stage) => rowOf(sheet, string, stage));
  });
}

export const READINGS_DEFAULTS: ReadingsView = {
  find: '',
  string: '',
  show: 'all',
  stage: 'now',
  sort: 'name',
  order: 'up',
};

/** The newest stage at which anything was read, else the first. */
export function stageUnderWay(rows: readonly ReadingRow[]): ReadingStage {
  const order = ['after_roll_call', 'after_keep_alive', 'before_energising'] as const;
  return order.find((stage) => rows.some((r) => r.stage === stage && r.between)) ?? 'before_energising';
}
/** Which stage a view shows. */
export const stageShown = (rows: readonly ReadingRow[], view: ReadingsView): ReadingStage | 'all' =>
  view.stage === 'now' ? stageUnderWay(rows) : view.stage;

const byName = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });
/** Worst first. */
const WORST: readonly Outcome[] = ['finding', 'cant_tell', 'proves_nothing', 'unread', 'as_expected'];
const SORT: Record<ReadingsView['sort'], (a: ReadingRow, b: ReadingRow) => number> = {
  name: (a, b) => byName.compare(a.string.name, b.string.name),
  outcome: (a, b) => WORST.indexOf(a.outcome) - WORST.indexOf(b.outcome),
  // newest first, what was never read last
  at: (a, b) => (b.between?.at ?? '').localeCompare(a.between?.at ?? ''),
};
const SHOWS: Record<ReadingsView['show'], (row: ReadingRow) => boolean> = {
  all: () => true,
  odd: (r) => r.outcome !== 'as_expected' && r.outcome !== 'unread',
  unread: (r) => r.outcome === 'unread',
};
export const countOf = (rows: readonly ReadingRow[], show: ReadingsView['show']): number =>
  rows.filter(SHOWS[show]).length;

export function listedReadings(rows: readonly ReadingRow[], view: ReadingsView): ReadingRow[] {
  const find = view.find.trim().toLocaleLowerCase('en');
  const sign = view.order === 'down' ? -1 : 1;
  const stage = stageShown(rows, view);
  return rows
    .filter(SHOWS[view.show])
    .filter((r) => stage === 'all' || r.stage === stage)
    .filter(
      (r) =>
        find === '' ||
        [r.string.name, r.headline, r.between?.note ?? '', r.between?.person ?? ''].some((text) =>
          text.toLocaleLowerCase('en').includes(find),
        ),
    )
    .sort((a, b) => sign * SORT[view.sort](a, b) || byName.compare(a.string.name, b.string.name));
}
