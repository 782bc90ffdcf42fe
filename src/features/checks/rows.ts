import type { CaptureString } from '../../schemas/api/capture';
import type { ChecksPage, ChecksView } from '../../schemas/api/checks-page';

/** Strings as the matrix of checks lists them. */

type Standing = ChecksPage['standings'][number];
export type Mark = Standing['marks'][number];
export type Status = Standing['status'];

export interface StringRow extends Standing {
  string: CaptureString;
}

export function rowsOf({ sheet, standings }: Pick<ChecksPage, 'sheet' | 'standings'>): StringRow[] {
  const of = new Map(standings.map((s) => [s.stringId, s]));
  return sheet.strings.flatMap((string) => {
    const standing = of.get(string.id);
    return standing ? [{ ...standing, string }] : [];
  });
}

export const CHECKS_DEFAULTS: ChecksView = { find: '', string: '', show: 'all', sort: 'name', order: 'up' };

const byName = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });
const SORT: Record<ChecksView['sort'], (a: StringRow, b: StringRow) => number> = {
  name: (a, b) => byName.compare(a.string.name, b.string.name),
  recorded: (a, b) => a.recorded - b.recorded,
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
