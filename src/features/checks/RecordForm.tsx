import { useId, useRef, useState } from 'react';
import type { CheckResult } from '../../domain/commissioning/checks/definition';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { Segmented } from '../../components/ui/Segmented';
import { ApiError, api } from '../../lib/api';
import { newRef } from '../../lib/capture-records';
import type { CheckInput, CheckRecord } from '../../schemas/api/checks';
import type { CaptureSnapshot } from '../../schemas/api/capture';
import { paths } from '../../schemas/paths';
import { FigureFields, type Typed } from './FigureFields';
import { begun, filled } from './typed';
import { figureText, type Cell, type OpenString } from './open-string';
import { recordForm } from '../../words/checks';

interface Props {
  sheet: CaptureSnapshot;
  row: OpenString;
  cell: Cell;
  onSaved: (record: CheckRecord) => Promise<unknown>;
  onCancel: () => void;
}
const RESULTS: { value: CheckResult; label: string }[] = [
  { value: 'pass', label: recordForm.pass },
  { value: 'fail', label: recordForm.fail },
  { value: 'not_applicable', label: recordForm.notApplicable },
];

/** Records one check. Somebody else’s record made meanwhile is shown beside it, and nothing typed is lost. */
export function RecordForm({ sheet, row, cell, onSaved, onCancel }: Props) {
  const { check, record } = cell;
  const [result, setResult] = useState<CheckResult>(
    record?.result ?? (check.offersNotApplicable ? 'not_applicable' : 'pass'),
  );
  const [typed, setTyped] = useState<Typed>(() => begun(check, record, row.string, sheet));
  const [reason, setReason] = useState(record?.reason ?? check.offersNotApplicable ?? '');
  const [note, setNote] = useState(record?.note ?? '');
  const [tried, setTried] = useState(false);
  const [busy, setBusy] = useState(false);
  const [refused, setRefused] = useState<ApiError | null>(null);
  const [theirs, setTheirs] = useState<CheckRecord | null>(null);
  const ref = useRef(newRef());
  // the sheet is read anew while this stands open: only what was on the screen is superseded unasked
  const [seen] = useState(record?.ref ?? null);
  const noteId = useId();
  const [openedS] = useState(() => Date.now() / 1000);
  const { figures, faults, judged } = filled(check, result, typed, row.context, openedS);
  const wantsReason = result === 'not_applicable';
  const noReason = wantsReason && reason.trim() === '';

  const save = async (supersedes: string | null) => {
    setTried(true);
    if (Object.keys(faults).length > 0 || noReason) return;
    setBusy(true);
    const body: CheckInput = {
      ref: ref.current,
      stringId: row.string.id,
      check: check.key,
      result,
      reason: result === 'pass' ? '' : reason.trim(),
      note: note.trim(),
      figures: { ...figures },
      at: new Date().toISOString(),
      supersedes,
    };
    try {
      const saved = await api<CheckRecord>(paths.api.checks(sheet.site.id), { method: 'POST', body });
      await onSaved(saved);
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      setRefused(error);
      // schemas are heavy: they come when somebody was first
      const { checkRecord } = await import('../../schemas/api/checks');
      setTheirs(checkRecord.safeParse(error.current).data ?? null);
      // an answer that never came may still have been heard: only a refusal makes a new record of it
      if (error.status === 422 || error.status === 409) ref.current = newRef();
    } finally {
      setBusy(false);
    }
  };

  return (
    <form
      noValidate
      className="mt-3 space-y-3 border-t border-rule-faint pt-3"
      onSubmit={(event) => {
        event.preventDefault();
        void save(theirs?.ref ?? seen);
      }}
    >
      <Segmented
        look="bold"
        label={recordForm.howItStands(check.name)}
        options={RESULTS}
        value={result}
        onChange={setResult}
      />
      {result !== 'not_applicable' && (
        <FigureFields
          figures={check.figures}
          typed={typed}
          faults={tried ? faults : {}}
          connectors={sheet.connectors}
          onType={(key, text) => setTyped({ ...typed, [key]: text })}
        />
      )}
      {result !== 'pass' && (
        <Field
          label={wantsReason ? recordForm.whyItDoesNot : recordForm.whatIsWrong}
          maxLength={500}
          value={reason}
          error={tried && noReason ? recordForm.sayWhyNot : (refused?.fault('reason') ?? null)}
          onChange={(event) => setReason(event.target.value)}
        />
      )}
      <div>
        <label htmlFor={noteId} className="mb-1 block font-medium">
          {recordForm.note}
        </label>
        <textarea
          id={noteId}
          rows={2}
          maxLength={2000}
          value={note}
          onChange={(event) => setNote(event.target.value)}
          className="w-full rounded border border-rule bg-sheet px-3 py-2 text-[16px]"
        />
      </div>
      {result === 'pass' && judged && judged.words.length > 0 && (
        <p role="status" className="rounded bg-rust-wash px-3 py-2 text-rust-ink">
          {judged.contradicts ? recordForm.theseFiguresContradictA : ''}
          {judged.words.join(' ')} {judged.remedy}
        </p>
      )}
      {theirs && (
        <Notice
          kind="stale"
          title={recordForm.recordedThisMeanwhile(theirs.person, theirs.result.replace('_', ' '))}
        >
          {recordForm.whatYouTypedIs(
            [theirs.reason, theirs.note, figureText({ check, record: theirs }, row.context.connectors)]
              .filter(Boolean)
              .join('. '),
          )}
        </Notice>
      )}
      {refused && !theirs && (
        <Notice kind="failed" title={recordForm.notSaved}>
          {refused.message}
        </Notice>
      )}
      <div className="flex flex-wrap gap-2">
        <Button type="submit" weight="primary" disabled={busy}>
          {theirs ? recordForm.saveMineInPlace : recordForm.saveTheCheck}
        </Button>
        {theirs && (
          <Button onClick={() => void onSaved(theirs)} disabled={busy}>
            {recordForm.keepTheirs}
          </Button>
        )}
        <Button onClick={onCancel} disabled={busy}>
          {recordForm.cancel}
        </Button>
      </div>
    </form>
  );
}
