import type { ReadingStage } from '../../domain/commissioning/readings/stages';
import type { CaptureString } from '../../schemas/api/capture';
import type { ReadingsPage, ReadingsView } from '../../schemas/api/checks-page';

/** Strings by stage with what was read there, as the desk lists them. */

export type ReadingHere = CaptureString['readings'][number];
type StageRead = ReadingsPage['stages'][number];
export type Outcome = StageRead['outcome'];

export interface ReadingRow extends StageRead {
  key: string;
  string: CaptureString;
  between: ReadingHere | null;
  positive: ReadingHere | null;
  negative: ReadingHere | null;
}

/** Every string at every stage that its type asks for, and at others where something was read all the same. */
export function readingRows({ sheet, stages }: Pick<ReadingsPage, 'sheet' | 'stages'>): ReadingRow[] {
  const strings = new Map(sheet.strings.map((s) => [s.id, s]));
  return stages.flatMap((read) => {
    const string = strings.get(read.stringId);
    if (!string) return [];
    const at = (kind: ReadingHere['kind']): ReadingHere | null =>
      string.readings.find((r) => r.stage === read.stage && r.kind === kind) ?? null;
    return [
      {
        ...read,
        key: `${string.id} ${read.stage}`,
        string,
        between: at('positive_to_negative'),
        positive: at('positive_to_earth'),
        negative: at('negative_to_earth'),
      },
    ];
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
