import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { ApiError, api, withQuery } from '../../lib/api';
import { newRef } from '../../lib/capture-records';
import { uploadFile } from '../../lib/upload';
import type { AttachmentItem } from '../../schemas/api/attachments';
import { PHOTO_TYPES } from '../../schemas/lists-and-limits';
import type { PairInput } from '../../schemas/api/equipment';
import { paths } from '../../schemas/paths';
import { evidence } from '../../words/checks';

interface Props {
  /** Of the site where the pair was found: the document is kept with it. */
  site: string;
  pair: { first: string; second: string; words: string };
  onRecorded: () => Promise<unknown>;
}

/** A manager names the document that says that two different connector types may be mated. */
export function Evidence({ site, pair, onRecorded }: Props) {
  const [open, setOpen] = useState(false);
  const [form, setForm] = useState({ document: '', edition: '', page: '', note: '' });
  const [refused, setRefused] = useState<ApiError | null>(null);
  const [busy, setBusy] = useState(false);
  const [file, setFile] = useState<File | null>(null);
  /** The pair is recorded; only its document is still to be sent. */
  const [recorded, setRecorded] = useState<string | null>(null);
  if (!open)
    return (
      <div className="mt-2">
        <Button onClick={() => setOpen(true)}>{evidence.recordTheDocumentThat}</Button>
      </div>
    );
  const field = (key: keyof typeof form, label: string, hint?: string) => (
    <Field
      label={label}
      hint={hint}
      value={form[key]}
      error={refused?.fault(key) ?? null}
      onChange={(event) => setForm({ ...form, [key]: event.target.value })}
    />
  );
  const save = async () => {
    setBusy(true);
    setRefused(null);
    try {
      const body: PairInput = { first: pair.first, second: pair.second, ...form };
      const id =
        recorded ?? (await api<{ id: string }>(paths.api.connectorPairs(), { method: 'POST', body })).id;
      setRecorded(id);
      if (file) {
        const query = {
          ref: newRef(),
          subject: 'connector_pair',
          subjectRef: id,
          name: file.name.slice(0, 200) || evidence.document,
          at: new Date().toISOString(),
        };
        await uploadFile<AttachmentItem>(
          withQuery(paths.api.attachments(site), query),
          file,
          () => undefined,
        );
      }
      await onRecorded();
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      setRefused(error);
    } finally {
      setBusy(false);
    }
  };
  return (
    <form
      noValidate
      className="mt-3 space-y-3 border border-rule p-3"
      onSubmit={(event) => {
        event.preventDefault();
        void save();
      }}
    >
      <p className="text-ink-2">{evidence.bothMakersMustStand(pair.words)}</p>
      <div className="grid gap-3 sm:grid-cols-3">
        {field('document', evidence.document)}
        {field('edition', evidence.editionOrDate)}
        {field('page', evidence.pageOrTable)}
      </div>
      {field('note', evidence.note)}
      <label className="block">
        <span className="mb-1 block font-medium">{evidence.theDocumentItselfAs}</span>
        <input
          type="file"
          accept={`application/pdf,${PHOTO_TYPES}`}
          className="min-h-[44px] w-full text-[15px]"
          onChange={(event) => setFile(event.target.files?.[0] ?? null)}
        />
      </label>
      {refused && (
        <Notice
          kind="failed"
          title={recorded ? evidence.thePairIsRecorded : evidence.notRecorded}
          action={
            recorded && <Button onClick={() => void onRecorded()}>{evidence.leaveTheDocumentOut}</Button>
          }
        >
          {refused.message}
        </Notice>
      )}
      <div className="flex flex-wrap gap-2">
        <Button type="submit" weight="primary" disabled={busy}>
          {evidence.recordTheEvidence}
        </Button>
        <Button onClick={() => setOpen(false)} disabled={busy}>
          {evidence.cancel}
        </Button>
      </div>
    </form>
  );
}
