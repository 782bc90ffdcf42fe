import { useMemo, useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Sheet } from '../../components/ui/Sheet';
import type { ImportColumn } from '../../domain/commissioning/import/columns';
import { COLUMN_LABELS } from '../../words/domain-import';
import { FAULT_CODES, type CellFault, type FaultCode } from '../../domain/commissioning/import/table';
import { number } from '../../drawings/numbers';
import { harmlessCell } from '../../schemas/csv-cell';
import { cellKey } from './desk';
import { FAULT_NAMES } from '../../words/import-sentences';
import { faultsSheet } from '../../words/import';
import { capital } from '../../words/domain-counts';

interface Props {
  faults: readonly CellFault[];
  /** How many there are; more than are listed where the server found them. */
  count: number;
  /** Cells as they stand in the file or were written anew. */
  texts: Readonly<Record<string, string>>;
  edits: Readonly<Record<string, string>>;
  onEdit: (edits: Record<string, string>) => void;
  /** Who says so. */
  by: 'file' | 'as-built';
}
const PAGE = 50;

/** Each bad cell: where, what stands there, why it is wrong and what would do; a cell can be mended on the spot. */
export function FaultsSheet({ faults, count, texts, edits, onEdit, by }: Props) {
  const [code, setCode] = useState<FaultCode | ''>('');
  const [search, setSearch] = useState('');
  const [shown, setShown] = useState(PAGE);
  const counts = useMemo(() => {
    const found = new Map<FaultCode, number>();
    for (const f of faults) found.set(f.code, (found.get(f.code) ?? 0) + 1);
    return found;
  }, [faults]);
  const wanted = search.trim().toLowerCase();
  const list = faults.filter(
    (f) =>
      (code === '' || f.code === code) &&
      (wanted === '' ||
        `${f.row} ${COLUMN_LABELS[f.column]} ${f.message} ${texts[cellKey(f.row, f.column)] ?? ''}`
          .toLowerCase()
          .includes(wanted)),
  );
  const proposed = list.filter((f) => f.suggestion !== null && f.code !== 'string_differs');
  const takeAll = () =>
    onEdit(Object.fromEntries(proposed.map((f) => [cellKey(f.row, f.column), f.suggestion ?? ''])));
  return (
    <Sheet
      id="faults"
      title={
        by === 'as-built'
          ? faultsSheet.cellsThatClashWith
          : faults.some((f) => f.weight === 'fault')
            ? faultsSheet.cellsThatNeedA
            : faultsSheet.worthALookAnd
      }
      aside={
        <button
          type="button"
          className="target px-1 text-petrol hover:underline"
          onClick={() => saveCsv(faults, texts)}
        >
          {faultsSheet.asCsv}
        </button>
      }
    >
      <div className="mb-3 grid items-end gap-3 sm:grid-cols-[1fr_1fr_auto]">
        <Choice
          label={faultsSheet.kind}
          value={code}
          options={[
            { value: '', label: faultsSheet.allCount(count) },
            ...FAULT_CODES.flatMap((c) => {
              const n = counts.get(c);
              return n ? [{ value: c, label: `${FAULT_NAMES[c]} (${number(n)})` }] : [];
            }),
          ]}
          onChange={(v) => setCode(FAULT_CODES.find((c) => c === v) ?? '')}
        />
        <Field
          label={faultsSheet.find}
          type="search"
          value={search}
          onChange={(event) => setSearch(event.target.value)}
          placeholder={faultsSheet.rowStringSerial}
        />
        {proposed.length > 0 && (
          <Button onClick={takeAll}>{faultsSheet.takeProposed1The(proposed.length)}</Button>
        )}
      </div>
      <ol className="divide-y divide-rule-faint border-t border-rule">
        {list.slice(0, shown).map((f) => (
          <FaultRow
            key={`${f.row} ${f.column} ${f.code} ${f.message}`}
            fault={f}
            text={texts[cellKey(f.row, f.column)] ?? ''}
            edited={cellKey(f.row, f.column) in edits}
            onEdit={(text) => onEdit({ [cellKey(f.row, f.column)]: text })}
          />
        ))}
      </ol>
      {list.length === 0 && <p className="py-4 text-ink-2">{faultsSheet.noFaultOfThis}</p>}
      {list.length > shown && (
        <Button className="mt-3" onClick={() => setShown(shown + PAGE * 4)}>
          {faultsSheet.showMoreOf(list.length)}
        </Button>
      )}
      {count > faults.length && (
        <p className="mt-3 text-ink-2">{faultsSheet.theFirstOfAre(faults.length, count)}</p>
      )}
    </Sheet>
  );
}

interface RowProps {
  fault: CellFault;
  text: string;
  edited: boolean;
  onEdit: (text: string) => void;
}

function FaultRow({ fault, text, edited, onEdit }: RowProps) {
  const [typed, setTyped] = useState<string | null>(null);
  const value = typed ?? text;
  const where = faultsSheet.rowColumn(fault.row, COLUMN_LABELS[fault.column]);
  return (
    <li className="grid gap-x-4 gap-y-1 py-3 md:grid-cols-[150px_minmax(180px,260px)_1fr] md:items-start">
      <p className="text-[15px]">
        <span className="font-semibold">{faultsSheet.row(fault.row)}</span>
        <br className="hidden md:inline" />
        <span className="text-ink-2 md:hidden">, </span>
        <span className="text-ink-2">{COLUMN_LABELS[fault.column]}</span>
      </p>
      <div className="flex gap-2">
        <input
          aria-label={faultsSheet.cellIn(where)}
          value={value}
          spellCheck={false}
          onChange={(event) => setTyped(event.target.value)}
          onBlur={() => {
            if (typed !== null && typed !== text) onEdit(typed);
          }}
          onKeyDown={(event) => {
            if (event.key === 'Enter' && typed !== null && typed !== text) onEdit(typed);
          }}
          className={`min-h-[44px] w-full rounded border bg-sheet px-3 text-[15px] ${fault.weight === 'fault' ? 'border-rust' : 'border-rule'}`}
        />
      </div>
      <div className="text-[15px] leading-5">
        <p className={fault.weight === 'fault' ? 'font-medium text-rust-ink' : 'font-medium'}>
          {`${capital(fault.message)}.`}
          {edited && <span className="font-normal text-ink-2">{faultsSheet.asYouWroteIt}</span>}
        </p>
        <p className="text-ink-2">{fault.remedy}</p>
        {fault.suggestion !== null && fault.suggestion !== text && (
          <button
            type="button"
            className="target px-0 text-petrol hover:underline"
            onClick={() => {
              setTyped(null);
              onEdit(fault.suggestion ?? '');
            }}
          >
            {faultsSheet.writeSuggestion(fault.suggestion)}
          </button>
        )}
      </div>
    </li>
  );
}

/** The faults for whoever mends the file elsewhere; made here, for the server does not have the file. */
function saveCsv(faults: readonly CellFault[], texts: Readonly<Record<string, string>>): void {
  const quoted = (text: string) => `"${harmlessCell(text).replaceAll('"', '""')}"`;
  const column = (c: ImportColumn) => COLUMN_LABELS[c];
  const records = [
    ['row', 'column', 'cell', faultsSheet.whatIsWrong, faultsSheet.whatWouldDo, 'proposal'],
    ...faults.map((f) => [
      String(f.row),
      column(f.column),
      texts[cellKey(f.row, f.column)] ?? '',
      f.message,
      f.remedy,
      f.suggestion ?? '',
    ]),
  ];
  const text = `\ufeff${records.map((r) => `${r.map(quoted).join(',')}\r\n`).join('')}`;
  const link = document.createElement('a');
  link.href = URL.createObjectURL(new Blob([text], { type: 'text/csv' }));
  link.download = 'cells-to-look-at.csv';
  link.click();
  setTimeout(() => URL.revokeObjectURL(link.href), 10_000);
}
