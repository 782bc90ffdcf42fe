import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { number } from '../../drawings/numbers';
import type { CheckedHistory } from './desk';
import { badCellsSheet } from '../../words/history-import';

/** Cells that can't be read: where, what stands there, why, and what would do. */
export function BadCellsSheet({ checked, headers }: { checked: CheckedHistory; headers: readonly string[] }) {
  const { faults, leftOut } = checked;
  return (
    <Sheet
      id="bad-cells"
      flush
      title={badCellsSheet.title}
      aside={
        leftOut > faults.length
          ? badCellsSheet.firstOf(faults.length, leftOut)
          : badCellsSheet.cellsLeftOut(leftOut)
      }
    >
      <p className="mb-3 text-[15px] text-ink-2">{badCellsSheet.mendOrImportRest}</p>
      <Table
        caption={badCellsSheet.title}
        rows={faults}
        rowKey={(f) => `${f.row} ${f.column} ${f.message}`}
        columns={[
          {
            key: 'row',
            label: badCellsSheet.row,
            numeric: true,
            cell: (f) => number(f.row),
          },
          {
            key: 'column',
            label: badCellsSheet.column,
            from: 'sm',
            cell: (f) => headers[f.column] ?? badCellsSheet.columnWords(f.column),
          },
          {
            key: 'cell',
            label: badCellsSheet.cell,
            from: 'md',
            cell: (f) => <code className="text-sm">{f.cell || badCellsSheet.empty}</code>,
          },
          {
            key: 'why',
            label: badCellsSheet.whyAndWhatWould,
            cell: (f) => (
              <>
                <span className="block text-sm text-ink-2 sm:hidden">
                  {headers[f.column] ?? badCellsSheet.columnWords(f.column)}
                </span>
                <span className="font-medium text-rust-ink">{f.message}.</span>{' '}
                <span className="text-ink-2">
                  {f.remedy} {f.leaves === 'row' ? badCellsSheet.theRowIsLeft : badCellsSheet.theCellAloneIs}
                </span>
              </>
            ),
          },
        ]}
      />
    </Sheet>
  );
}
