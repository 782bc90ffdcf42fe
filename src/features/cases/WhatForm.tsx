import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { TITLE_MAX, WHAT_MAX } from '../../schemas/lists-and-limits';
import { whatSheet } from '../../words/cases';
import { PartsPicker } from './PartsPicker';
import type { CaseInHand } from './query';
import { TextArea } from './TextArea';

/** What is wrong and which parts it is about, being changed. */
export function WhatForm({ hand, onDone }: { hand: CaseInHand; onDone: () => void }) {
  const { page, send, change } = hand;
  // what was there when it was opened: only what this person changed is sent, so that nobody else's words are undone
  const [began] = useState({
    title: page.case.title,
    what: page.case.what,
    about: {
      chosen: page.case.strings.map((s) => s.id),
      parts: page.case.parts.map((p) => ({ string: p.stringId, position: p.position })),
    },
  });
  const [title, setTitle] = useState(began.title);
  const [what, setWhat] = useState(began.what);
  const [about, setAbout] = useState(began.about);
  return (
    <form
      className="grid gap-4"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        change(
          {
            act: 'facts',
            version: page.case.version,
            ...(title === began.title ? {} : { title }),
            ...(what === began.what ? {} : { what }),
            ...(about === began.about ? {} : { strings: about.chosen, parts: about.parts }),
          },
          onDone,
        );
      }}
    >
      <Field
        label={whatSheet.title}
        value={title}
        maxLength={TITLE_MAX}
        error={send.error?.fault('title') ?? null}
        onChange={(event) => setTitle(event.target.value)}
      />
      <TextArea
        label={whatSheet.whatIsWrong}
        value={what}
        rows={6}
        maxLength={WHAT_MAX}
        error={send.error?.fault('what') ?? null}
        onChange={setWhat}
      />
      <PartsPicker
        strings={page.strings}
        chosen={about.chosen}
        parts={about.parts}
        error={send.error?.fault('strings') ?? send.error?.fault('parts') ?? null}
        onChange={setAbout}
      />
      <div className="flex flex-wrap gap-2">
        <Button type="submit" weight="primary" disabled={send.isPending}>
          {whatSheet.save}
        </Button>
        <Button onClick={onDone}>{whatSheet.leaveItAsIt}</Button>
      </div>
    </form>
  );
}
