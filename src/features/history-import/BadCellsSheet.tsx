import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { counted, number } from '../../drawings/numbers';
import type { CheckedHistory } from './desk';

/** Cells that can't be read: where, what stands there, why, and what would do. */
export function BadCellsSheet({ checked, headers }: { checked: CheckedHistory; headers: readonly string[] }) {
  const { faults, leftOut } = checked;
  return (
    <Sheet
      id="bad-cells"
      flush
      title="Cells that would be left out"
      aside={
        leftOut > faults.length
          ? `the first ${number(faults.length)} of ${number(leftOut)}`
          : counted(leftOut, 'cell')
      }
    >
      <p className="mb-3 text-[15px] text-ink-2">
        Mend them in the file and choose it again, or import the rest without them.
      </p>
      <Table
        caption="Cells that would be left out"
        rows={faults}
        rowKey={(f) => `${f.row} ${f.column} ${f.message}`}
        columns={[
          {
            key: 'row',
            label: 'Row',
            numeric: true,
            cell: (f) => number(f.row),
          },
          {
            key: 'column',
            label: 'Column',
            from: 'sm',
            cell: (f) => headers[f.column] ?? `column ${f.column + 1}`,
          },
          {
            key: 'cell',
            label: 'Cell',
            from: 'md',
            cell: (f) => <code className="text-sm">{f.cell || 'empty'}</code>,
          },
          {
            key: 'why',
            label: 'Why, and what would do',
            cell: (f) => (
              <>
                <span className="block text-sm text-ink-2 sm:hidden">
                  {headers[f.column] ?? `column ${f.column + 1}`}
                </span>
                <span className="font-medium text-rust-ink">{f.message}.</span>{' '}
                <span className="text-ink-2">
                  {f.remedy} {f.leaves === 'row' ? 'The row is left out.' : 'The cell alone is left out.'}
                </span>
              </>
            ),
          },
        ]}
      />
    </Sheet>
  );
}
