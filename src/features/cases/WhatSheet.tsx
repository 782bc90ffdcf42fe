import { Suspense, useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Sheet } from '../../components/ui/Sheet';
import type { CasePage } from '../../schemas/api/cases';
import { TITLE_MAX, WHAT_MAX } from '../../schemas/lists-and-limits';
import { late } from '../../lib/late';
import { paths } from '../../schemas/paths';
import type { CaseInHand } from './query';
import { TextArea } from './TextArea';
import { whatSheet } from '../../words/cases';

const PartsPicker = late(async () => (await import('./PartsPicker')).PartsPicker);

/** What is wrong and which parts it is about. */
export function WhatSheet({
  hand,
  editing,
  onEdit,
}: {
  hand: CaseInHand;
  editing: boolean;
  onEdit: (on: boolean) => void;
}) {
  const c = hand.page.case;
  return (
    <Sheet
      id="what"
      title={whatSheet.whatIsWrong}
      aside={
        !editing && (
          <button
            type="button"
            className="target -my-3 text-petrol underline underline-offset-[3px]"
            onClick={() => onEdit(true)}
          >
            {whatSheet.change}
          </button>
        )
      }
    >
      {editing ? (
        <EditForm hand={hand} onDone={() => onEdit(false)} />
      ) : c.what ? (
        <p className="max-w-[70ch] whitespace-pre-wrap text-[16px] leading-6 [overflow-wrap:anywhere]">
          {c.what}
        </p>
      ) : (
        <p className="text-ink-2">{whatSheet.nothingIsWrittenDown}</p>
      )}
      {!editing && <Parts page={hand.page} />}
    </Sheet>
  );
}

function EditForm({ hand, onDone }: { hand: CaseInHand; onDone: () => void }) {
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
      <Suspense>
        <PartsPicker
          strings={page.strings}
          chosen={about.chosen}
          parts={about.parts}
          error={send.error?.fault('strings') ?? send.error?.fault('parts') ?? null}
          onChange={setAbout}
        />
      </Suspense>
      <div className="flex flex-wrap gap-2">
        <Button type="submit" weight="primary" disabled={send.isPending}>
          {whatSheet.save}
        </Button>
        <Button onClick={onDone}>{whatSheet.leaveItAsIt}</Button>
      </div>
    </form>
  );
}

function Parts({ page }: { page: CasePage }) {
  const { strings, siteId, parts } = page.case;
  if (strings.length === 0) return <p className="mt-4 text-sm text-ink-2">{whatSheet.noStringIsNamed}</p>;
  return (
    <ul className="mt-4 divide-y divide-rule-faint border-t border-rule-faint">
      {strings.map((s) => {
        const units = parts
          .filter((p) => p.stringId === s.id && p.position !== null)
          .sort((a, b) => (a.position ?? 0) - (b.position ?? 0));
        return (
          <li key={s.id} className="flex flex-wrap items-baseline gap-x-4 gap-y-1 py-1.5">
            <a
              href={paths.string(siteId, s.id)}
              className="target inline-flex items-center font-medium text-petrol underline underline-offset-[3px]"
            >
              {whatSheet.stringName(s.name)}
            </a>
            {units.length === 0 ? (
              <span className="text-ink-2">{whatSheet.theWholeString}</span>
            ) : (
              <ul className="flex flex-wrap gap-x-4 gap-y-1">
                {units.map((u) => (
                  <li key={u.position}>
                    <a
                      href={`${paths.string(siteId, s.id)}#units`}
                      className="target inline-flex items-center hover:underline"
                    >
                      {whatSheet.position}
                      {u.position}
                      {u.serial && <span className="ml-1.5 text-sm text-ink-2">{u.serial}</span>}
                    </a>
                  </li>
                ))}
              </ul>
            )}
          </li>
        );
      })}
    </ul>
  );
}
