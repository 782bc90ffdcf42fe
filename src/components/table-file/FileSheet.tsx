import { useId, useState, type DragEvent, type ReactNode } from 'react';
import { Button } from '../ui/Button';
import { Choice } from '../ui/Choice';
import { Notice } from '../ui/Notice';
import { Sheet } from '../ui/Sheet';
import { ENCODING_NAMES, type Encoding } from './decode';
import { SEPARATOR_NAMES, SEPARATORS, type Separator } from './separators';
import { fileSheet } from '../../words/table-file';

/** What is said of a file before its cells are looked at. */
export interface TableFacts {
  /** null: it was pasted. */
  encoding: Encoding | null;
  separator: Separator;
  /** Without the header. */
  rows: number;
  emptyLines: number;
  headers: string[];
  hasHeader: boolean;
  faults: { line: number; message: string }[];
}

interface Props {
  /** What a row is, and what else helps whoever makes the file. */
  hint: ReactNode;
  name: string | null;
  facts: TableFacts | null;
  /** What was wrong with the file as a whole. */
  fault: string | null;
  onFile: (file: File) => void;
  onPaste: (text: string) => void;
  onSplit: (separator: Separator, hasHeader: boolean) => void;
}

/** Where the file comes in, and how it was read. */
export function FileSheet({ hint, name, facts, fault, onFile, onPaste, onSplit }: Props) {
  const [over, setOver] = useState(false);
  const [pasted, setPasted] = useState('');
  const fileId = useId();
  const pasteId = useId();
  const drop = (event: DragEvent) => {
    event.preventDefault();
    setOver(false);
    const file = event.dataTransfer.files[0];
    const text = event.dataTransfer.getData('text/plain');
    if (file) onFile(file);
    else if (text) onPaste(text);
  };
  return (
    <Sheet id="file" title={fileSheet.theFile} aside={name ?? undefined}>
      <div
        onDragOver={(event) => {
          event.preventDefault();
          setOver(true);
        }}
        onDragLeave={() => setOver(false)}
        onDrop={drop}
        className={`grid gap-4 border border-dashed p-4 lg:grid-cols-2 ${over ? 'border-petrol bg-petrol-wash' : 'border-rule'}`}
      >
        <div>
          <label htmlFor={fileId} className="mb-1 block font-medium">
            {fileSheet.aFile}
          </label>
          <input
            id={fileId}
            type="file"
            accept=".csv,.tsv,.txt,.tab,text/csv,text/tab-separated-values,text/plain"
            className="block min-h-[44px] w-full text-[15px] file:mr-3 file:min-h-[44px] file:cursor-pointer file:rounded file:border file:border-solid file:border-ink file:bg-ink file:px-4 file:text-[15px] file:font-medium file:text-sheet"
            onChange={(event) => {
              const file = event.target.files?.[0];
              if (file) onFile(file);
              event.target.value = ''; // the same file again, mended meanwhile, is a choice too
            }}
          />
          <p className="mt-2 text-sm text-ink-2">{hint}</p>
        </div>
        <div>
          <label htmlFor={pasteId} className="mb-1 block font-medium">
            {fileSheet.orPasteCellsFrom}
          </label>
          <textarea
            id={pasteId}
            rows={3}
            value={pasted}
            spellCheck={false}
            onChange={(event) => setPasted(event.target.value)}
            onPaste={(event) => {
              const text = event.clipboardData.getData('text/plain');
              if (pasted.trim() !== '' || text.trim() === '') return;
              event.preventDefault();
              setPasted(text);
              onPaste(text);
            }}
            className="block w-full rounded border border-rule bg-sheet px-3 py-2 text-[16px]"
          />
          <Button className="mt-2" disabled={pasted.trim() === ''} onClick={() => onPaste(pasted)}>
            {fileSheet.readWhatIsPasted}
          </Button>
        </div>
      </div>
      {fault && (
        <div className="mt-4">
          <Notice kind="failed" title={fileSheet.thisCantBeRead}>
            {fault}
          </Notice>
        </div>
      )}
      {facts && (
        <div className="mt-4 grid items-end gap-4 sm:grid-cols-2 lg:grid-cols-4">
          <p className="text-[15px]">
            <strong className="font-semibold">{fileSheet.rows(facts.rows)}</strong>
            {fileSheet.headersColumns(facts.headers.length)}
            {facts.encoding && <>, {ENCODING_NAMES[facts.encoding]}</>}
            {facts.emptyLines > 0 && (
              <>
                <br />
                {fileSheet.emptyLeftOut(facts.emptyLines)}
              </>
            )}
          </p>
          <Choice
            label={fileSheet.cellsAreSeparatedBy}
            value={facts.separator}
            options={SEPARATORS.map((s) => ({ value: s, label: SEPARATOR_NAMES[s] }))}
            onChange={(value) => onSplit(value as Separator, facts.hasHeader)}
          />
          <label className="flex min-h-[44px] items-center gap-3 text-[15px]">
            <input
              type="checkbox"
              className="h-5 w-5"
              checked={facts.hasHeader}
              onChange={(event) => onSplit(facts.separator, event.target.checked)}
            />
            {fileSheet.theFirstRowNames}
          </label>
        </div>
      )}
      {facts && facts.faults.length > 0 && (
        <div className="mt-4">
          <Notice kind="failed" title={fileSheet.partsOfTheFile}>
            <ul>
              {facts.faults.slice(0, 5).map((f) => (
                <li key={f.line}>{fileSheet.rowLineMessage(f.line, f.message)}</li>
              ))}
            </ul>
          </Notice>
        </div>
      )}
    </Sheet>
  );
}
