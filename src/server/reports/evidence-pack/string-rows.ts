import type { CaseFigures, FiguresString } from '../../../domain/cases/figures';
import { unitsInWords } from '../../../drawings/case-figures';
import { volts } from '../../../drawings/numbers';
import type { PaperColumn } from '../pdf/paper';
import type { Evidence } from './data';
import { papersEvidenceStringRows } from '../../../words/papers-evidence';

const stateInWords = (s: FiguresString): string =>
  s.at === null ? papersEvidenceStringRows.nothingReportedYet : `${volts(s.voltage)}; ${unitsInWords(s)}`;

const stateOf = (figures: CaseFigures, id: string, missing: string): string => {
  const string = figures.strings.find((s) => s.id === id);
  return string ? stateInWords(string) : missing;
};

/** Every string of a case in a row; `words` say which have no sheet of their own, and where the rest of them is. */
export function stringRows(
  data: Pick<Evidence, 'strings'> & { case: Pick<Evidence['case'], 'before' | 'after'> },
): {
  words: string | null;
  columns: PaperColumn[];
  rows: string[][];
} {
  const { before, after } = data.case;
  const rest = data.strings.filter((s) => s.drawn === null).length;
  return {
    words: rest === 0 ? null : papersEvidenceStringRows.haveSheetWithDrawings(data.strings.length, rest),
    columns: [
      { header: papersEvidenceStringRows.string, share: 1.4 },
      { header: papersEvidenceStringRows.units, share: 3 },
      { header: papersEvidenceStringRows.input, share: 2 },
      { header: papersEvidenceStringRows.zone, share: 1.6 },
      { header: papersEvidenceStringRows.whenOpened, share: 3 },
      ...(after ? [{ header: papersEvidenceStringRows.lookedAtAgain, share: 3 }] : []),
      { header: papersEvidenceStringRows.sheet, share: 1 },
    ],
    rows: data.strings.map(({ id, name, built, drawn }) => [
      name,
      `${built.slots.length} × ${built.unitType}`,
      papersEvidenceStringRows.inverterInput(built.inverter, built.input),
      built.zone,
      before ? stateOf(before, id, papersEvidenceStringRows.notKept) : papersEvidenceStringRows.notKept,
      ...(after ? [stateOf(after, id, papersEvidenceStringRows.noLongerOnThe)] : []),
      drawn ? 'below' : papersEvidenceStringRows.inTheZip,
    ]),
  };
}
