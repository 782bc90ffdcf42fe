import type { CheckContext, CheckJudgement, StringCheck } from '../../domain/commissioning/checks/definition';
import { checkContext, standingOf } from '../../domain/commissioning/checks/context';
import { judgeCheck } from '../../domain/commissioning/checks/judge';
import { checksFor } from '../../domain/commissioning/checks/list';
import { signOffState, type SignOffState } from '../../domain/commissioning/checks/sign-off';
import type { AttachmentItem } from '../../schemas/api/attachments';
import type { CaptureString } from '../../schemas/api/capture';
import type { ChecksPage, ChecksView } from '../../schemas/api/checks-page';
import { checksRows } from '../../words/checks';

/** Strings with their checks as the desk shows them. */

export type Mark = 'pass' | 'fail' | 'contradicted' | 'told' | 'not_applicable' | 'missing';
export type CheckRecordHere = CaptureString['checks'][number];

export interface Cell {
  check: StringCheck;
  record: CheckRecordHere | null;
  judged: CheckJudgement | null;
  mark: Mark;
  photos: AttachmentItem[];
}
export type Status = 'signed' | 'ready' | 'blocked' | 'open' | 'none';

export interface StringRow {
  string: CaptureString;
  context: CheckContext;
  state: SignOffState;
  cells: Cell[];
  status: Status;
  /** Blocks other than what is not recorded yet. */
  amiss: SignOffState['blocks'];
}

function markOf(record: CheckRecordHere | null, judged: CheckJudgement | null): Mark {
  if (!record || !judged) return 'missing';
  if (record.result === 'fail') return 'fail';
  if (judged.weight === 'blocks') return 'contradicted';
  if (record.result === 'not_applicable') return 'not_applicable';
  return judged.weight === 'told' ? 'told' : 'pass';
}

export function rowsOf(page: ChecksPage): StringRow[] {
  const { sheet } = page;
  return sheet.strings.map((string) => {
    const context = checkContext(sheet, string.id);
    const state = signOffState(string.checks.map(standingOf), context);
    const cells = checksFor(context).map((check): Cell => {
      const record = string.checks.find((c) => c.check === check.key) ?? null;
      const judged = record ? judgeCheck(standingOf(record), context) : null;
      return {
        check,
        record,
        judged,
        mark: markOf(record, judged),
        photos: page.files.filter((f) => f.stringId === string.id && f.check === check.key),
      };
    });
    const amiss = state.blocks.filter((b) => b.kind !== 'missing');
    const status: Status =
      string.signOff && !string.signOff.stale
        ? 'signed'
        : state.maySign
          ? 'ready'
          : amiss.length > 0
            ? 'blocked'
            : state.recorded === 0
              ? 'none'
              : 'open';
    return { string, context, state, cells, status, amiss };
  });
}

export const CHECKS_DEFAULTS: ChecksView = { find: '', string: '', show: 'all', sort: 'name', order: 'up' };

const byName = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });
const SORT: Record<ChecksView['sort'], (a: StringRow, b: StringRow) => number> = {
  name: (a, b) => byName.compare(a.string.name, b.string.name),
  recorded: (a, b) => a.state.recorded - b.state.recorded,
  blocks: (a, b) => b.amiss.length - a.amiss.length,
};
const SHOWS: Record<ChecksView['show'], (row: StringRow) => boolean> = {
  all: () => true,
  open: (r) => r.status !== 'signed',
  blocked: (r) => r.status === 'blocked',
  ready: (r) => r.status === 'ready',
  signed: (r) => r.status === 'signed',
};
export const counted = (rows: readonly StringRow[], show: ChecksView['show']): number =>
  rows.filter(SHOWS[show]).length;

/** The strings of a view; names settle what is equal. The search looks at names, notes and reasons. */
export function listedRows(rows: readonly StringRow[], view: ChecksView): StringRow[] {
  const find = view.find.trim().toLocaleLowerCase('en');
  const sign = view.order === 'down' ? -1 : 1;
  return rows
    .filter(SHOWS[view.show])
    .filter(
      (r) =>
        find === '' ||
        [r.string.name, ...r.string.checks.flatMap((c) => [c.note, c.reason, c.person])].some((text) =>
          text.toLocaleLowerCase('en').includes(find),
        ),
    )
    .sort((a, b) => sign * SORT[view.sort](a, b) || byName.compare(a.string.name, b.string.name));
}

/** A record's figures as a person reads them: "Resistance 0.3 Ω, units were passing". */
export function figureText(
  cell: Pick<Cell, 'check' | 'record'>,
  connectors: CheckContext['connectors'],
): string {
  const { check, record } = cell;
  if (!record) return '';
  return check.figures
    .flatMap((f) => {
      const value = record.figures[f.key];
      if (value === undefined) return [];
      if (f.kind === 'number') return [`${f.name} ${String(value).replace('-', '−')}\u00a0${f.unit}`];
      if (f.kind === 'choice')
        return [`${f.name}: ${f.options.find((o) => o.value === value)?.words ?? String(value)}`];
      return [`${f.name}: ${connectors.find((c) => c.id === value)?.name ?? checksRows.aTypeThatIs}`];
    })
    .join(', ');
}
