import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { number } from '../../drawings/numbers';
import type { CheckedHistory } from './desk';
import { span } from './words';
import { QUANTITY_NAMES } from '../../words/domain-history-import';
import { previewSheet } from '../../words/history-import';

interface Props {
  checked: CheckedHistory;
  timeZone: string;
  busy: boolean;
  onImport: (note: string) => void;
}
const SHOWN = 30;

/** What would come in, string by string, and the button that keeps it. */
export function PreviewSheet({ checked, timeZone, busy, onImport }: Props) {
  const [note, setNote] = useState('');
  const [all, setAll] = useState(false);
  const { series } = checked;
  return (
    <Sheet
      id="preview"
      flush
      title={previewSheet.whatWouldComeIn}
      aside={previewSheet.rowsCount(checked.rows)}
    >
      <Table
        caption={previewSheet.readingsByStringUnit}
        rows={all ? series : series.slice(0, SHOWN)}
        rowKey={(s) => s.words}
        columns={[
          {
            key: 'of',
            label: previewSheet.of,
            cell: (s) => (
              <>
                <span className="font-medium">{s.words}</span>
                <span className="block text-sm text-ink-2 sm:hidden">
                  {s.quantities.map((q) => QUANTITY_NAMES[q]).join(', ')}
                </span>
              </>
            ),
          },
          {
            key: 'what',
            label: previewSheet.what,
            from: 'sm',
            cell: (s) => s.quantities.map((q) => QUANTITY_NAMES[q]).join(', '),
          },
          { key: 'readings', label: previewSheet.readings, numeric: true, cell: (s) => number(s.readings) },
          {
            key: 'when',
            label: previewSheet.fromAndToAt,
            cell: (s) => span(s.from * 1000, s.to * 1000, timeZone),
          },
        ]}
      />
      {series.length > SHOWN && !all && (
        <Button className="mt-3" onClick={() => setAll(true)}>
          {previewSheet.showAll(series.length)}
        </Button>
      )}
      {checked.doubles > 0 && <p className="mt-3 text-[15px]">{previewSheet.doubles(checked.doubles)}</p>}
      <form
        className="mt-5 grid gap-4 border-t border-rule pt-4 md:grid-cols-[minmax(0,420px)_auto] md:items-end"
        onSubmit={(event) => {
          event.preventDefault();
          onImport(note);
        }}
      >
        <Field
          label={previewSheet.whereTheyComeFrom}
          value={note}
          maxLength={500}
          onChange={(event) => setNote(event.target.value)}
          placeholder={previewSheet.theLoggerBeforeOurs}
        />
        <Button weight="primary" type="submit" disabled={busy} className="justify-self-start">
          {previewSheet.importReadings(checked.readings)}
          {checked.leftOut > 0 && previewSheet.leaveOut(checked.leftOut)}
        </Button>
      </form>
    </Sheet>
  );
}
