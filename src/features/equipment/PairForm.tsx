import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { ApiError, api, withQuery } from '../../lib/api';
import { uploadFile } from '../../lib/upload';
import { pairInput, type ConnectorItem } from '../../schemas/api/equipment';
import { paths } from '../../schemas/paths';

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
    { value: '', label: 'Choose' },
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
            i.path[0] === 'first' || i.path[0] === 'second' ? 'Choose a type.' : i.message,
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
        label="One half"
        options={options}
        value={typed.first}
        error={faults.first ?? null}
        onChange={set('first')}
      />
      <Choice
        label="The other half"
        options={options}
        value={typed.second}
        error={faults.second ?? null}
        onChange={set('second')}
      />
      {text(
        'document',
        'Document',
        'Its title and number, and who issued it. Both makers should stand by it.',
      )}
      {text('edition', 'Edition or date')}
      {text('page', 'Page or table')}
      {text('note', 'Note', 'Conditions that it names: cable, tool, temperature.')}
      <div>
        <label htmlFor="evidence" className="mb-1 block font-medium">
          The document itself
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
          A PDF or a picture, at most 25 MB. Without it the record says only where to find it.
        </p>
      </div>
      {failed && (
        <Notice
          kind="failed"
          title={recorded ? 'The pair is recorded, its document is not here yet' : 'Not recorded'}
        >
          {failed}
        </Notice>
      )}
      {sent !== null && (
        <p role="status">
          {sent < 1 ? `Sending the document: ${Math.round(100 * sent)} %` : 'The document is being read…'}
        </p>
      )}
      <div className="flex flex-wrap gap-2">
        <Button weight="primary" type="submit" disabled={busy || (recorded !== null && !file)}>
          {busy ? 'Recording…' : recorded ? 'Send the document again' : 'Record the pair'}
        </Button>
        {recorded && !busy && <Button onClick={onDone}>Leave it without</Button>}
      </div>
    </form>
  );
}
