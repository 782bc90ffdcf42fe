import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { ApiError, api, withQuery } from '../../lib/api';
import { uploadFile } from '../../lib/upload';
import { pairInput, type ConnectorItem } from '../../schemas/api/equipment';
import { paths } from '../../schemas/paths';
import { pairForm } from '../../words/equipment';

interface Props {
  connectors: readonly ConnectorItem[];
  onDone: () => void;
}

const EMPTY = { first: '', second: '', document: '', edition: '', page: '', note: '' };
type Typed = typeof EMPTY;

/** Two types and the document that both makers stand by. */
export function PairForm({ connectors, onDone }: Props) {
  const [typed, setTyped] = useState<Typed>(EMPTY);
  const [faults, setFaults] = useState<Partial<Record<keyof Typed, string>>>({});
  const [failed, setFailed] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const [file, setFile] = useState<File | null>(null);
  /** Share of the file that is sent. */
  const [sent, setSent] = useState<number | null>(null);
  /** The pair that was recorded while its file is not there yet, and the file's identifier. */
  const [recorded, setRecorded] = useState<{ id: string; ref: string } | null>(null);
  const set = (key: keyof Typed) => (value: string) => setTyped((old) => ({ ...old, [key]: value }));
  const options = [
    { value: '', label: pairForm.choose },
    ...connectors
      .filter((c) => !c.archived)
      .map((c) => ({ value: c.id, label: `${c.name} (${c.maker} ${c.family})` })),
  ];
  const send = async () => {
    const read = pairInput.safeParse(typed);
    if (!read.success) {
      setFaults(
        Object.fromEntries(
          read.error.issues.map((i) => [
            String(i.path[0]),
            i.path[0] === 'first' || i.path[0] === 'second' ? pairForm.chooseAType : i.message,
          ]),
        ),
      );
      return;
    }
    setBusy(true);
    setFailed(null);
    try {
      const pair = recorded ?? {
        id: (await api<{ id: string }>(paths.api.connectorPairs(), { method: 'POST', body: read.data })).id,
        ref: crypto.randomUUID(),
      };
      setRecorded(pair);
      if (file) {
        const path = withQuery(paths.api.connectorPairFiles(pair.id), { ref: pair.ref, name: file.name });
        await uploadFile(path, file, setSent);
      }
      onDone();
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      setFaults(Object.fromEntries(error.fields.map((f) => [f.field.replace(/^body\./, ''), f.message])));
      setFailed(error.message);
      setBusy(false);
      setSent(null);
    }
  };
  const text = (key: 'document' | 'edition' | 'page' | 'note', label: string, hint?: string) => (
    <Field
      label={label}
      hint={hint}
      value={typed[key]}
      error={faults[key] ?? null}
      autoComplete="off"
      onChange={(event) => set(key)(event.target.value)}
    />
  );
  return (
    <form
      noValidate
      className="grid gap-4"
      onSubmit={(event) => {
        event.preventDefault();
        void send();
      }}
    >
      <Choice
        label={pairForm.oneHalf}
        options={options}
        value={typed.first}
        error={faults.first ?? null}
        onChange={set('first')}
      />
      <Choice
        label={pairForm.theOtherHalf}
        options={options}
        value={typed.second}
        error={faults.second ?? null}
        onChange={set('second')}
      />
      {text('document', pairForm.document, pairForm.itsTitleAndNumber)}
      {text('edition', pairForm.editionOrDate)}
      {text('page', pairForm.pageOrTable)}
      {text('note', pairForm.note, pairForm.conditionsThatItNames)}
      <div>
        <label htmlFor="evidence" className="mb-1 block font-medium">
          {pairForm.theDocumentItself}
        </label>
        <input
          id="evidence"
          type="file"
          accept="application/pdf,image/jpeg,image/png,image/webp"
          aria-describedby="evidence-hint"
          className="w-full text-[15px] file:mr-3 file:min-h-[44px] file:rounded file:border file:border-solid file:border-rule file:bg-sheet file:px-4 file:text-[15px] file:text-ink"
          onChange={(event) => {
            setFile(event.target.files?.[0] ?? null);
            setRecorded((old) => old && { ...old, ref: crypto.randomUUID() });
          }}
        />
        <p id="evidence-hint" className="mt-1 text-sm text-ink-2">
          {pairForm.aPdfOr}
        </p>
      </div>
      {failed && (
        <Notice kind="failed" title={recorded ? pairForm.thePairIsRecorded : pairForm.notRecorded}>
          {failed}
        </Notice>
      )}
      {sent !== null && (
        <p role="status">
          {sent < 1 ? pairForm.sendingTheDocument(Math.round(100 * sent)) : pairForm.theDocumentIsBeing}
        </p>
      )}
      <div className="flex flex-wrap gap-2">
        <Button weight="primary" type="submit" disabled={busy || (recorded !== null && !file)}>
          {busy ? pairForm.recording : recorded ? pairForm.sendTheDocumentAgain : pairForm.recordThePair}
        </Button>
        {recorded && !busy && <Button onClick={onDone}>{pairForm.leaveItWithout}</Button>}
      </div>
    </form>
  );
}
