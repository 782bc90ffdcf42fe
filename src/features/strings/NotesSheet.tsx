import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { fromWall, toWall } from '../../components/charts/local-time';
import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { NotRead } from '../../components/ui/NotRead';
import { Sheet } from '../../components/ui/Sheet';
import { clockOrDate, fullTime } from '../../drawings/times';
import { api, ApiError } from '../../lib/api';
import type { Annotation, NewAnnotation } from '../../schemas/api/annotations';
import type { StringPage } from '../../schemas/api/string';
import { paths } from '../../schemas/paths';
import { notesQuery } from './queries';
import { notesSheet } from '../../words/string-history';

/** Epoch seconds as the field of a form has them, on the site's wall clock. */
const typed = (atS: number, timeZone: string): string =>
  new Date(toWall(atS, timeZone)).toISOString().slice(0, 16);
const instant = (text: string, timeZone: string): string | null => {
  const wall = Date.parse(`${text}Z`);
  return Number.isNaN(wall) ? null : new Date(fromWall(wall, timeZone) * 1000).toISOString();
};

function NoteForm({ page, atS, onDone }: { page: StringPage; atS: number; onDone: () => void }) {
  const { site, string } = page;
  const client = useQueryClient();
  const [ref] = useState(() => crypto.randomUUID());
  const [of, setOf] = useState<'string' | 'site'>('string');
  const [from, setFrom] = useState(() => typed(atS, site.timeZone));
  const [to, setTo] = useState('');
  const [text, setText] = useState('');
  const pin = useMutation({
    mutationFn: (note: NewAnnotation) =>
      api<Annotation>(paths.api.annotations(site.id), { method: 'POST', body: note }),
    onSuccess: async () => {
      await client.invalidateQueries({ queryKey: notesQuery(site.id, string.id).queryKey });
      onDone();
    },
  });
  const [local, setLocal] = useState<string | null>(null);
  const error = pin.error instanceof ApiError ? pin.error : null;
  const submit = (event: { preventDefault(): void }) => {
    event.preventDefault();
    const begin = instant(from, site.timeZone);
    if (begin === null) return setLocal(notesSheet.giveTheTimeOf);
    setLocal(null);
    pin.mutate({
      ref,
      string: of === 'string' ? string.id : null,
      from: begin,
      to: to === '' ? null : instant(to, site.timeZone),
      text,
    });
  };
  return (
    <form onSubmit={submit} className="mb-4 grid gap-3 border border-rule p-3" noValidate>
      <div>
        <label htmlFor="note-text" className="mb-1 block font-medium">
          {notesSheet.note}
        </label>
        <textarea
          id="note-text"
          value={text}
          onChange={(event) => setText(event.target.value)}
          maxLength={2000}
          rows={3}
          aria-invalid={error?.fault('text') ? true : undefined}
          aria-describedby={error?.fault('text') ? 'note-text-error' : undefined}
          className="w-full rounded border border-rule bg-sheet px-3 py-2 text-[16px] text-ink"
        />
        {error?.fault('text') && (
          <p id="note-text-error" role="alert" className="mt-1 text-sm font-medium text-rust-ink">
            {error.fault('text')}
          </p>
        )}
      </div>
      <div className="grid gap-3 sm:grid-cols-3">
        <Field
          label={notesSheet.at}
          type="datetime-local"
          value={from}
          onChange={(event) => setFrom(event.target.value)}
          error={local ?? error?.fault('from')}
        />
        <Field
          label={notesSheet.toForASpan}
          type="datetime-local"
          value={to}
          onChange={(event) => setTo(event.target.value)}
          error={error?.fault('to')}
        />
        <Choice
          label={notesSheet.about}
          value={of}
          options={[
            { value: 'string', label: notesSheet.stringWhich(string.name) },
            { value: 'site', label: notesSheet.theWholeSite },
          ]}
          onChange={(value) => setOf(value === 'site' ? 'site' : 'string')}
        />
      </div>
      {error && error.fields.length === 0 && (
        <Notice kind="failed" title={notesSheet.theNoteWasNot}>
          {error.message}
        </Notice>
      )}
      <div className="flex gap-2">
        <Button type="submit" weight="primary" disabled={pin.isPending}>
          {pin.isPending ? notesSheet.pinning : notesSheet.pinTheNote}
        </Button>
        <Button onClick={onDone}>{notesSheet.leaveIt}</Button>
      </div>
    </form>
  );
}

interface Props {
  page: StringPage;
  /** Where a new note begins, epoch s. */
  atS: number;
  /** Shows the staircase of a note's moment. */
  onMoment: (at: number) => void;
}

/** Notes pinned on the time axis, of the string and of its whole site. */
export default function NotesSheet({ page, atS, onMoment }: Props) {
  const { site, string } = page;
  const client = useQueryClient();
  const options = notesQuery(site.id, string.id);
  const notes = useQuery(options);
  const [writing, setWriting] = useState(false);
  const [gone, setGone] = useState<Annotation | null>(null);
  const change = useMutation({
    mutationFn: ({ note, back }: { note: Annotation; back: boolean }) =>
      api<Annotation>(paths.api.annotation(site.id, note.id), { method: back ? 'PUT' : 'DELETE' }),
    onSuccess: async (_, { note, back }) => {
      setGone(back ? null : note);
      await client.invalidateQueries({ queryKey: options.queryKey });
    },
  });
  const list = notes.data ?? [];
  return (
    <Sheet
      id="notes"
      title={notesSheet.notesOnTheTime}
      aside={
        !writing && (
          <Button className="!px-3" onClick={() => setWriting(true)}>
            {notesSheet.pinANote}
          </Button>
        )
      }
    >
      {writing && <NoteForm key={atS} page={page} atS={atS} onDone={() => setWriting(false)} />}
      <NotRead
        error={notes.error}
        title={notesSheet.theNotesCouldNot}
        kind="failed"
        onRetry={() => notes.refetch()}
      />
      <NotRead error={change.error} title={notesSheet.theNoteStandsAs} kind="failed" />
      {gone && (
        <p role="status" className="mb-2 flex flex-wrap items-center gap-3">
          {notesSheet.theNoteIsTaken}
          <Button
            className="!px-3"
            disabled={change.isPending}
            onClick={() => change.mutate({ note: gone, back: true })}
          >
            {notesSheet.putItBack}
          </Button>
        </p>
      )}
      {notes.data && list.length === 0 && <p className="text-ink-2">{notesSheet.noneYetChooseA}</p>}
      <ul className="divide-y divide-rule-faint">
        {list.map((note) => (
          <li key={note.id} className="py-2.5">
            <p className="whitespace-pre-line [overflow-wrap:anywhere]">{note.text}</p>
            <div className="mt-1 flex flex-wrap items-center gap-x-3 text-sm text-ink-2">
              <button
                type="button"
                className="target text-petrol hover:underline"
                title={fullTime(note.from, site.timeZone)}
                onClick={() => onMoment(Math.floor(Date.parse(note.from) / 1000))}
              >
                {clockOrDate(note.from, page.at, site.timeZone)}
                {note.to && notesSheet.to(note.to, page.at, site.timeZone)}
              </button>
              <span>{note.string ? notesSheet.stringWhich(note.string.name) : notesSheet.wholeSite}</span>
              <span title={fullTime(note.at, site.timeZone)}>
                {note.by}, {clockOrDate(note.at, page.at, site.timeZone)}
              </span>
              <button
                type="button"
                className="target ml-auto px-2 hover:text-ink hover:underline"
                aria-label={notesSheet.takeAwayTheNote(note.text.slice(0, 40))}
                disabled={change.isPending}
                onClick={() => change.mutate({ note, back: false })}
              >
                {notesSheet.takeAway}
              </button>
            </div>
          </li>
        ))}
      </ul>
    </Sheet>
  );
}
