import { useMutation } from '@tanstack/react-query';
import { useId, useRef, useState, type KeyboardEvent } from 'react';
import { flushSync } from 'react-dom';
import { Button } from '../../components/ui/Button';
import { mentionAt, mentionChoices, mentionedIn, withMention } from '../../domain/cases/mentions';
import { api, type ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { CasePage } from '../../schemas/api/cases';
import { COMMENT_MAX } from '../../schemas/lists-and-limits';
import { paths } from '../../schemas/paths';
import type { CaseInHand } from './query';
import { commentBox } from '../../words/cases';

/** A comment. After @ the people of the organisation are offered: arrows choose, Enter or Tab takes, Escape leaves. */
export function CommentBox({ hand }: { hand: CaseInHand }) {
  const { page, take } = hand;
  const listId = useId();
  const area = useRef<HTMLTextAreaElement>(null);
  const [text, setText] = useState('');
  const [cursor, setCursor] = useState(0);
  const [chosen, setChosen] = useState(0);
  const [left, setLeft] = useState<number | null>(null); // the @ whose list was closed by Escape
  const ref = useRef<string | null>(null);
  const write = useMutation<CasePage, ApiError, void>(
    {
      mutationFn: () => {
        ref.current ??= crypto.randomUUID();
        return api<CasePage>(paths.api.caseComments(page.case.id), {
          method: 'POST',
          body: { ref: ref.current, body: text, mentions: mentionedIn(text, page.people).map((p) => p.id) },
        });
      },
      onSuccess: (next) => {
        ref.current = null;
        setText('');
        take(next);
      },
    },
    queryClient(),
  );
  const at = mentionAt(text, cursor);
  const offered = at && at.from !== left ? mentionChoices(page.people, at.typed) : [];
  const open = offered.length > 0;
  const current = Math.min(chosen, offered.length - 1);

  const pick = (name: string) => {
    const next = withMention(text, cursor, name);
    // at once: whoever types on must not find the cursor moved under the next letter
    flushSync(() => {
      setText(next.text);
      setCursor(next.cursor);
      setChosen(0);
    });
    area.current?.focus();
    area.current?.setSelectionRange(next.cursor, next.cursor);
  };
  const onKey = (event: KeyboardEvent) => {
    if (event.key === 'Enter' && (event.ctrlKey || event.metaKey) && text.trim()) {
      event.preventDefault();
      write.mutate();
      return;
    }
    if (!open) return;
    const person = offered[current];
    if (event.key === 'ArrowDown') setChosen((current + 1) % offered.length);
    else if (event.key === 'ArrowUp') setChosen((current + offered.length - 1) % offered.length);
    else if ((event.key === 'Enter' || event.key === 'Tab') && person) pick(person.name);
    else if (event.key === 'Escape') setLeft(at?.from ?? null);
    else return;
    event.preventDefault();
  };
  return (
    <form
      className="no-print mt-4"
      onSubmit={(event) => {
        event.preventDefault();
        write.mutate();
      }}
    >
      <label htmlFor="comment" className="mb-1 block font-medium">
        {commentBox.comment}
      </label>
      <div className="relative">
        <textarea
          ref={area}
          id="comment"
          rows={3}
          value={text}
          maxLength={COMMENT_MAX}
          aria-controls={listId}
          aria-autocomplete="list"
          aria-activedescendant={open ? `${listId}-${current}` : undefined}
          aria-describedby={`${listId}-hint`}
          onChange={(event) => {
            setText(event.target.value);
            setCursor(event.target.selectionStart);
            setChosen(0);
            setLeft(null);
            write.reset();
          }}
          onSelect={(event) => setCursor(event.currentTarget.selectionStart)}
          onKeyDown={onKey}
          className="w-full rounded border border-rule bg-sheet px-3 py-2 text-[16px] leading-6 text-ink"
        />
        <ul
          id={listId}
          role="listbox"
          aria-label={commentBox.peopleToMention}
          hidden={!open}
          className="absolute inset-x-0 z-10 -mt-1 border border-ink-3 bg-sheet"
        >
          {offered.map((person, i) => (
            <li
              key={person.id}
              id={`${listId}-${i}`}
              role="option"
              aria-selected={i === current}
              onPointerDown={(event) => {
                event.preventDefault();
                pick(person.name);
              }}
              className={`flex min-h-[44px] cursor-pointer items-center px-3 ${i === current ? 'bg-petrol-wash' : ''}`}
            >
              {person.name}
            </li>
          ))}
        </ul>
      </div>
      <p className="sr-only" role="status">
        {open ? commentBox.toChooseFrom(offered.length, offered[current]?.name) : ''}
      </p>
      <p id={`${listId}-hint`} className="mt-1 text-sm text-ink-2">
        {commentBox.andANameTells}
      </p>
      {write.error && (
        <p role="alert" className="mt-1 text-sm font-medium text-rust-ink">
          {write.error.message}
        </p>
      )}
      <Button type="submit" className="mt-2" disabled={write.isPending || text.trim() === ''}>
        {commentBox.addTheComment}
      </Button>
    </form>
  );
}
