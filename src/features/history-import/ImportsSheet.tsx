import { useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { listed, number } from '../../drawings/numbers';
import { ApiError } from '../../lib/api';
import type { HistoryImportView } from '../../schemas/api/history-import';
import { paths } from '../../schemas/paths';
import { span } from './words';
import { importsSheet } from '../../words/history-import';

interface Props {
  site: string;
  imports: readonly HistoryImportView[];
  now: string;
  timeZone: string;
  /** @throws ApiError */
  onUndo: (id: string, reason: string) => Promise<void>;
}
const ofWords = (of: readonly string[]): string =>
  of.length <= 3 ? listed(of) : importsSheet.andMore(of.slice(0, 2).join(', '), of.length);

/** What was imported before, each with its way back. */
export function ImportsSheet({ site, imports, now, timeZone, onUndo }: Props) {
  const [undoing, setUndoing] = useState<HistoryImportView | null>(null);
  return (
    <Sheet
      id="imports"
      flush
      title={importsSheet.importedFiles}
      aside={
        <span className="flex flex-wrap items-center gap-3">
          {importsSheet.newestFirst}
          {imports.length > 0 && (
            <ButtonLink className="no-print" href={paths.api.historyImportsCsv(site)} download>
              CSV
            </ButtonLink>
          )}
        </span>
      }
    >
      <Table<HistoryImportView>
        caption={importsSheet.importedFiles}
        rows={imports}
        rowKey={(i) => i.id}
        empty={<Notice kind="empty" title={importsSheet.noFileHasBeen} />}
        columns={[
          {
            key: 'file',
            label: importsSheet.file,
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
            label: importsSheet.what,
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
            label: importsSheet.readings,
            numeric: true,
            cell: (i) => (
              <>
                {number(i.readings)}
                {i.leftOut > 0 && (
                  <span className="block text-sm text-ink-2">{importsSheet.leftOut(i.leftOut)}</span>
                )}
              </>
            ),
          },
          {
            key: 'state',
            label: importsSheet.state,
            numeric: true,
            cell: (i) =>
              i.undoneAt ? (
                <>
                  <Tag shape="×">{importsSheet.takenBack}</Tag>
                  <span className="block text-sm text-ink-2">
                    {i.undoneBy}, <SiteTime at={i.undoneAt} now={now} timeZone={timeZone} />
                  </span>
                </>
              ) : (
                <button
                  type="button"
                  className="target px-1 text-petrol hover:underline"
                  aria-label={importsSheet.takeBackFile(i.fileName)}
                  onClick={() => setUndoing(i)}
                >
                  {importsSheet.takeBack}
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
      setFailed(error instanceof ApiError ? error.message : importsSheet.notTakenBackTryAgain);
      setBusy(false);
    }
  };
  return (
    <Dialog open title={importsSheet.takeBackFile(made.fileName)} onClose={onClose}>
      <form
        className="grid gap-4"
        onSubmit={(event) => {
          event.preventDefault();
          void undo();
        }}
      >
        <p>{importsSheet.takingBackMeans(made.readings)}</p>
        <Field
          label={importsSheet.why}
          value={reason}
          maxLength={500}
          onChange={(event) => setReason(event.target.value)}
          hint={importsSheet.aFewWordsIf}
        />
        {failed && (
          <Notice kind="failed" title={importsSheet.itWasNotTaken}>
            {failed}
          </Notice>
        )}
        <div className="flex flex-wrap gap-2">
          <Button weight="primary" type="submit" disabled={busy}>
            {busy ? importsSheet.takingBack : importsSheet.takeItBack}
          </Button>
          <Button onClick={onClose}>{importsSheet.keepIt}</Button>
        </div>
      </form>
    </Dialog>
  );
}
