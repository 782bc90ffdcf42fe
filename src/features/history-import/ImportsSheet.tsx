import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { counted, listed, number } from '../../drawings/numbers';
import { ApiError } from '../../lib/api';
import type { HistoryImportView } from '../../schemas/api/history-import';
import { span } from './words';

interface Props {
  imports: readonly HistoryImportView[];
  now: string;
  timeZone: string;
  /** @throws ApiError */
  onUndo: (id: string, reason: string) => Promise<void>;
}
const ofWords = (of: readonly string[]): string =>
  of.length <= 3 ? listed(of) : `${of.slice(0, 2).join(', ')} and ${of.length - 2} more`;

/** What was imported before, each with its way back. */
export function ImportsSheet({ imports, now, timeZone, onUndo }: Props) {
  const [undoing, setUndoing] = useState<HistoryImportView | null>(null);
  return (
    <Sheet id="imports" flush title="Imported files" aside="newest first">
      <Table<HistoryImportView>
        caption="Imported files"
        rows={imports}
        rowKey={(i) => i.id}
        empty={<Notice kind="empty" title="No file has been imported at this site" />}
        columns={[
          {
            key: 'file',
            label: 'File',
            cell: (i) => (
              <>
                <span className="break-all font-medium">{i.fileName}</span>
                <span className="block text-sm text-ink-2">
                  {i.madeBy}, <SiteTime at={i.madeAt} now={now} timeZone={timeZone} />
                  {i.note && ` · ${i.note}`}
                </span>
              </>
            ),
          },
          {
            key: 'what',
            label: 'What',
            from: 'sm',
            cell: (i) => (
              <>
                {ofWords(i.of)}
                <span className="block text-sm text-ink-2">
                  {span(Date.parse(i.from), Date.parse(i.to), timeZone)}
                </span>
              </>
            ),
          },
          {
            key: 'readings',
            label: 'Readings',
            numeric: true,
            cell: (i) => (
              <>
                {number(i.readings)}
                {i.leftOut > 0 && (
                  <span className="block text-sm text-ink-2">{counted(i.leftOut, 'cell')} left out</span>
                )}
              </>
            ),
          },
          {
            key: 'state',
            label: 'State',
            numeric: true,
            cell: (i) =>
              i.undoneAt ? (
                <>
                  <Tag shape="×">taken back</Tag>
                  <span className="block text-sm text-ink-2">
                    {i.undoneBy}, <SiteTime at={i.undoneAt} now={now} timeZone={timeZone} />
                  </span>
                </>
              ) : (
                <button
                  type="button"
                  className="target px-1 text-petrol hover:underline"
                  aria-label={`Take ${i.fileName} back`}
                  onClick={() => setUndoing(i)}
                >
                  Take back
                </button>
              ),
          },
        ]}
      />
      {undoing && <UndoDialog made={undoing} onUndo={onUndo} onClose={() => setUndoing(null)} />}
    </Sheet>
  );
}

function UndoDialog({
  made,
  onUndo,
  onClose,
}: { made: HistoryImportView; onClose: () => void } & Pick<Props, 'onUndo'>) {
  const [reason, setReason] = useState('');
  const [failed, setFailed] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const undo = async () => {
    setBusy(true);
    setFailed(null);
    try {
      await onUndo(made.id, reason);
      onClose();
    } catch (error) {
      setFailed(error instanceof ApiError ? error.message : 'It could not be taken back. Try again.');
      setBusy(false);
    }
  };
  return (
    <Dialog open title={`Take ${made.fileName} back`} onClose={onClose}>
      <form
        className="grid gap-4"
        onSubmit={(event) => {
          event.preventDefault();
          void undo();
        }}
      >
        <p>
          Its {counted(made.readings, 'reading')} go from every page and figure. What Wakeline measured stays,
          and so do other imports. The file can be imported again.
        </p>
        <Field
          label="Why"
          value={reason}
          maxLength={500}
          onChange={(event) => setReason(event.target.value)}
          hint="A few words, if you like; they stay in the audit."
        />
        {failed && (
          <Notice kind="failed" title="It was not taken back">
            {failed}
          </Notice>
        )}
        <div className="flex flex-wrap gap-2">
          <Button weight="primary" type="submit" disabled={busy}>
            {busy ? 'Taking back …' : 'Take it back'}
          </Button>
          <Button onClick={onClose}>Keep it</Button>
        </div>
      </form>
    </Dialog>
  );
}
