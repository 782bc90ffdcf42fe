import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { SelectField } from '../../components/ui/SelectField';
import { ApiError, api } from '../../lib/api';
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
      await api(paths.api.connectorPairs(), { method: 'POST', body: read.data });
      onDone();
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      setFaults(Object.fromEntries(error.fields.map((f) => [f.field.replace(/^body\./, ''), f.message])));
      setFailed(error.message);
      setBusy(false);
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
      <SelectField
        label="One half"
        options={options}
        value={typed.first}
        error={faults.first ?? null}
        onChange={(event) => set('first')(event.target.value)}
      />
      <SelectField
        label="The other half"
        options={options}
        value={typed.second}
        error={faults.second ?? null}
        onChange={(event) => set('second')(event.target.value)}
      />
      {text(
        'document',
        'Document',
        'Its title and number, and who issued it. Both makers should stand by it.',
      )}
      {text('edition', 'Edition or date')}
      {text('page', 'Page or table')}
      {text('note', 'Note', 'Conditions that it names: cable, tool, temperature.')}
      {failed && (
        <Notice kind="failed" title="Not recorded">
          {failed}
        </Notice>
      )}
      <Button weight="primary" type="submit" disabled={busy}>
        {busy ? 'Recording…' : 'Record the pair'}
      </Button>
    </form>
  );
}
