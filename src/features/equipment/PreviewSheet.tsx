import type { ReactNode } from 'react';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { Tag, type Tone } from '../../components/ui/Tag';
import type { ImportFault, ImportPreview, ImportRow } from '../../schemas/api/equipment';
import { previewSheet } from '../../words/equipment-import';

const OUTCOME: Record<ImportRow['outcome'], { tone: Tone; shape: string; word: string }> = {
  new: { tone: 'petrol', shape: '+', word: previewSheet.new },
  changed: { tone: 'plum', shape: '≠', word: previewSheet.changes },
  unchanged: { tone: 'plain', shape: '=', word: previewSheet.unchanged },
  faulty: { tone: 'rust', shape: '×', word: previewSheet.faulty },
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
        <Sheet
          flush
          title={previewSheet.cellsToCorrect}
          id="faults"
          aside={previewSheet.countedFaultsCell(faults.length)}
        >
          <Table
            caption={previewSheet.cellsThatCantBe}
            rows={faults}
            rowKey={(f) => `${f.row} ${f.column} ${f.why}`}
            columns={[
              { key: 'row', label: previewSheet.row, cell: (f) => f.row },
              {
                key: 'column',
                label: previewSheet.column,
                cell: (f) => (
                  <>
                    {f.column}
                    <span className="block text-sm text-ink-2">
                      {f.typed === '' ? previewSheet.empty : `"${f.typed}"`}
                    </span>
                  </>
                ),
              },
              {
                key: 'why',
                label: previewSheet.whyAndWhatTo,
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
        <Sheet
          flush
          title={preview.imported ? previewSheet.whatWasImported : previewSheet.whatWouldHappen}
          id="preview"
        >
          <Table
            caption={previewSheet.rowsOfTheFile}
            rows={rows}
            rowKey={(r) => String(r.row)}
            columns={[
              { key: 'row', label: previewSheet.row, cell: (r) => r.row },
              {
                key: 'outcome',
                label: previewSheet.outcome,
                cell: (r) => (
                  <Tag tone={OUTCOME[r.outcome].tone} shape={OUTCOME[r.outcome].shape}>
                    {OUTCOME[r.outcome].word}
                  </Tag>
                ),
              },
              {
                key: 'name',
                label: previewSheet.type,
                cell: (r) => (
                  <>
                    <span className="font-medium">{r.name || previewSheet.noName}</span>
                    {r.changes.map((c) => (
                      <span key={c.label} className="block text-sm text-ink-2">
                        {c.label}: {c.before || previewSheet.empty} →{' '}
                        <span className="text-ink">{c.after || previewSheet.empty}</span>
                      </span>
                    ))}
                    {r.outcome === 'changed' && r.strings > 0 && (
                      <span className="block text-sm">{previewSheet.restOnIt(r.strings)}</span>
                    )}
                    {r.doubts.map((d) => (
                      <span key={d} className="block text-sm text-rust-ink">
                        {previewSheet.unusualD(d)}
                      </span>
                    ))}
                  </>
                ),
              },
            ]}
          />
          {preview.ignoredColumns.length > 0 && (
            <p className="mt-3 text-sm text-ink-2">
              {previewSheet.columnsThatAreNone(preview.ignoredColumns.join(', '))}
            </p>
          )}
          {actions && <div className="mt-4">{actions}</div>}
        </Sheet>
      )}
    </>
  );
}
