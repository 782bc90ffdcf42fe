import type { CheckContext } from '../../domain/commissioning/checks/definition';
import {
  stringStanding,
  type CheckNow,
  type StringStanding,
} from '../../domain/commissioning/checks/string-standing';
import type { AttachmentItem } from '../../schemas/api/attachments';
import type { CaptureString } from '../../schemas/api/capture';
import type { DeskPage } from '../../schemas/api/checks-page';
import { checksRows } from '../../words/checks';

/** One string as it lies open: each check with its record, what that says, and its photos. */

export type CheckRecordHere = CaptureString['checks'][number];
export interface Cell extends CheckNow<CheckRecordHere> {
  photos: AttachmentItem[];
}
export interface OpenString extends StringStanding<CheckRecordHere> {
  string: CaptureString;
  cells: Cell[];
}

export function openString(page: Pick<DeskPage, 'sheet' | 'files'>, string: CaptureString): OpenString {
  const standing = stringStanding(page.sheet, string);
  return {
    ...standing,
    string,
    cells: standing.cells.map((cell) => ({
      ...cell,
      photos: page.files.filter((f) => f.stringId === string.id && f.check === cell.check.key),
    })),
  };
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
