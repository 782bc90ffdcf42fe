import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { number } from '../../drawings/numbers';
import type { ChangeKind, ImportOutcome } from '../../schemas/api/import';
import { CHANGE_NAMES, changePlace, changeWords } from '../../words/import-sentences';
import { changesSheet } from '../../words/import';

interface Props {
  outcome: ImportOutcome;
  reason: string;
  onReason: (reason: string) => void;
  reasonFault: string | null;
  busy: boolean;
  onImport: () => void;
}

/** What the import would change, before a person says yes. */
export function ChangesSheet({ outcome, reason, onReason, reasonFault, busy, onImport }: Props) {
  const [kind, setKind] = useState<ChangeKind | 'all'>('all');
  const kinds = Object.entries(outcome.counts) as [ChangeKind, number][];
  const total = kinds.reduce((sum, [, n]) => sum + n, 0);
  const list = outcome.changes.filter((c) => kind === 'all' || c.kind === kind);
  const leaving = (outcome.counts.replaced ?? 0) + (outcome.counts.moved ?? 0);
  return (
    <Sheet
      id="changes"
      title={changesSheet.whatWouldChange}
      aside={changesSheet.rowsStayAsThey(outcome.unchanged)}
    >
      {kinds.length > 1 && (
        <div className="mb-2">
          <Segmented
            label={changesSheet.kindOfChange}
            value={kind}
            onChange={setKind}
            options={[
              { value: 'all', label: changesSheet.allTotal(total) },
              ...kinds.map(([k, n]) => ({ value: k, label: CHANGE_NAMES[k](n) })),
            ]}
          />
        </div>
      )}
      <div
        className="max-h-[420px] overflow-y-auto border-y border-rule"
        tabIndex={0}
        role="region"
        aria-label={changesSheet.changes}
      >
        <Table
          caption={changesSheet.changesGravestFirst}
          rows={list}
          rowKey={(c) => `${c.kind} ${changePlace(c)}`}
          columns={[
            { key: 'place', label: changesSheet.where, cell: (c) => changePlace(c) },
            { key: 'what', label: changesSheet.what, cell: (c) => changeWords(c) },
            {
              key: 'row',
              label: changesSheet.row,
              numeric: true,
              from: 'sm',
              cell: (c) => ('line' in c ? number(c.line) : ''),
            },
          ]}
          empty={<p className="py-3 text-ink-2">{changesSheet.noneOfThisKind}</p>}
        />
      </div>
      {total > outcome.changes.length && (
        <p className="mt-2 text-sm text-ink-2">
          {changesSheet.theGravestOfAre(outcome.changes.length, total)}
        </p>
      )}
      {leaving > 0 && (
        <div className="mt-4">
          <Notice kind="stale" title={changesSheet.leavingSlot(leaving)}>
            {changesSheet.compareWithTheRoof}
          </Notice>
        </div>
      )}
      <div className="mt-4 grid items-end gap-4 sm:grid-cols-[minmax(260px,480px)_auto] sm:justify-start">
        <Field
          label={changesSheet.why}
          value={reason}
          onChange={(event) => onReason(event.target.value)}
          maxLength={500}
          hint={changesSheet.itStaysInThe}
          placeholder={changesSheet.asInstalledListOf}
          error={reasonFault}
        />
        <Button weight="primary" disabled={busy} onClick={onImport} className="sm:mb-6">
          {changesSheet.importRows(outcome.rows)}
        </Button>
      </div>
    </Sheet>
  );
}
