import type { ReactNode } from 'react';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { Tag, type Tone } from '../../components/ui/Tag';
import { counted } from '../../drawings/numbers';
import type { ImportFault, ImportPreview, ImportRow } from '../../schemas/api/equipment';

const OUTCOME: Record<ImportRow['outcome'], { tone: Tone; shape: string; word: string }> = {
  new: { tone: 'petrol', shape: '+', word: 'New' },
  changed: { tone: 'plum', shape: '≠', word: 'Changes' },
  unchanged: { tone: 'plain', shape: '=', word: 'Unchanged' },
  faulty: { tone: 'rust', shape: '×', word: 'Faulty' },
};
const RANK = { faulty: 0, changed: 1, new: 2, unchanged: 3 } as const;

interface FaultLine extends ImportFault {
  row: number;
}

/** What a file would do: each bad cell with its remedy, each row with what would become of it. */
export function PreviewSheet({ preview, actions }: { preview: ImportPreview; actions: ReactNode }) {
  const faults: FaultLine[] = [
    ...preview.headerFaults.map((f) => ({ ...f, row: 1 })),
    ...preview.rows.flatMap((r) => r.faults.map((f) => ({ ...f, row: r.row }))),
  ];
  const rows = [...preview.rows].sort((a, b) => RANK[a.outcome] - RANK[b.outcome] || a.row - b.row);
  return (
    <>
      {faults.length > 0 && (
        <Sheet flush title="Cells to correct" id="faults" aside={counted(faults.length, 'cell')}>
          <Table
            caption="Cells that can’t be imported, with why and what to do"
            rows={faults}
            rowKey={(f) => `${f.row} ${f.column} ${f.why}`}
            columns={[
              { key: 'row', label: 'Row', cell: (f) => f.row },
              {
                key: 'column',
                label: 'Column',
                cell: (f) => (
                  <>
                    {f.column}
                    <span className="block text-sm text-ink-2">
                      {f.typed === '' ? 'empty' : `"${f.typed}"`}
                    </span>
                  </>
                ),
              },
              {
                key: 'why',
                label: 'Why, and what to do',
                cell: (f) => (
                  <>
                    {f.why} <span className="text-ink-2">{f.remedy}</span>
                  </>
                ),
              },
            ]}
          />
        </Sheet>
      )}
      {rows.length > 0 && (
        <Sheet flush title={preview.imported ? 'What was imported' : 'What would happen'} id="preview">
          <Table
            caption="Rows of the file and what becomes of each"
            rows={rows}
            rowKey={(r) => String(r.row)}
            columns={[
              { key: 'row', label: 'Row', cell: (r) => r.row },
              {
                key: 'outcome',
                label: 'Outcome',
                cell: (r) => (
                  <Tag tone={OUTCOME[r.outcome].tone} shape={OUTCOME[r.outcome].shape}>
                    {OUTCOME[r.outcome].word}
                  </Tag>
                ),
              },
              {
                key: 'name',
                label: 'Type',
                cell: (r) => (
                  <>
                    <span className="font-medium">{r.name || 'no name'}</span>
                    {r.changes.map((c) => (
                      <span key={c.label} className="block text-sm text-ink-2">
                        {c.label}: {c.before || 'empty'} →{' '}
                        <span className="text-ink">{c.after || 'empty'}</span>
                      </span>
                    ))}
                    {r.outcome === 'changed' && r.strings > 0 && (
                      <span className="block text-sm">{counted(r.strings, 'string')} rest on it.</span>
                    )}
                    {r.doubts.map((d) => (
                      <span key={d} className="block text-sm text-rust-ink">
                        Unusual: {d}
                      </span>
                    ))}
                  </>
                ),
              },
            ]}
          />
          {preview.ignoredColumns.length > 0 && (
            <p className="mt-3 text-sm text-ink-2">
              Columns that are none of ours were left aside: {preview.ignoredColumns.join(', ')}.
            </p>
          )}
          {actions && <div className="mt-4">{actions}</div>}
        </Sheet>
      )}
    </>
  );
}
