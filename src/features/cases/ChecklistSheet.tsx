import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Field } from '../../components/ui/Field';
import { Sheet } from '../../components/ui/Sheet';
import { RelativeTime } from '../../components/ui/Time';
import type { ChecklistItem } from '../../domain/cases/checklists';
import { CHECKLIST_SOURCE } from '../../words/domain-checklists';
import { listed } from '../../drawings/numbers';
import type { CaseInHand } from './query';
import { checklistSheet } from '../../words/cases';

/** What to look at before anybody is called. A line is ticked by itself, so that two people may go through it at once. */
export function ChecklistSheet({ hand }: { hand: CaseInHand }) {
  const { case: c } = hand.page;
  const items = c.lines;
  const done = items.filter((item) => c.checklist.some((m) => m.key === item.key && m.done)).length;
  const cautions = [...new Set(items.flatMap((item) => (item.own ? (item.caution ?? []) : [])))];
  return (
    <Sheet
      id="checklist"
      title={checklistSheet.beforeCallingAnybody}
      aside={checklistSheet.ofLookedAt(done, items.length)}
    >
      {cautions.length > 0 && (
        <div className="mb-3">
          <Caution strong={checklistSheet.stringsStayDangerousIn}>{cautions.join(' ')}</Caution>
        </div>
      )}
      <ul className="divide-y divide-rule-faint border-y border-rule-faint">
        {items.map((item) => (
          <Line key={item.key} item={item} hand={hand} />
        ))}
      </ul>
      <p className="mt-3 text-sm text-ink-2">{CHECKLIST_SOURCE}</p>
      <Called hand={hand} />
    </Sheet>
  );
}

function Line({ item, hand }: { item: ChecklistItem; hand: CaseInHand }) {
  const { page, send, change } = hand;
  const mark = page.case.checklist.find((m) => m.key === item.key);
  const [note, setNote] = useState<string | null>(null);
  const sent =
    send.isPending && send.variables.body.act === 'check' && send.variables.body.key === item.key
      ? send.variables.body
      : null;
  const say = (done: boolean, words: string) =>
    change({ act: 'check', key: item.key, done, note: words, seen: mark?.at ?? null }, () => setNote(null));
  return (
    <li className="py-2.5">
      <label className="flex min-h-[44px] cursor-pointer items-start gap-3">
        <input
          type="checkbox"
          checked={sent?.done ?? mark?.done ?? false}
          disabled={sent !== null}
          onChange={(event) => say(event.target.checked, note ?? mark?.note ?? '')}
          className="mt-0.5 h-6 w-6 shrink-0 accent-[var(--petrol)]"
        />
        <span className="min-w-0">
          <span className="block text-[16px] font-medium leading-6">{item.check}</span>
          <span className="block text-ink-2">{item.why}</span>
          {item.caution && <span className="sr-only">{checklistSheet.caution(item.caution)}</span>}
        </span>
      </label>
      <div className="ml-9 flex flex-wrap items-center gap-x-4 text-sm text-ink-2">
        {mark && (
          <span>
            {checklistSheet.doneBy(mark.done, mark.by)}
            <RelativeTime at={mark.at} now={page.at} timeZone={page.case.timeZone} />
            {mark.note && <>: {mark.note}</>}
          </span>
        )}
        {note === null && (
          <button
            type="button"
            className="target text-petrol underline underline-offset-[3px]"
            onClick={() => setNote(mark?.note ?? '')}
          >
            {mark?.note ? checklistSheet.changeTheNote : checklistSheet.addANote}
            <span className="sr-only">{checklistSheet.toCheck(item.check)}</span>
          </button>
        )}
      </div>
      {note !== null && (
        <form
          className="ml-9 mt-2 flex flex-wrap items-end gap-2"
          onSubmit={(event) => {
            event.preventDefault();
            say(mark?.done ?? true, note);
          }}
        >
          <Field
            label={checklistSheet.whatWasSeen}
            value={note}
            maxLength={2000}
            className="min-w-[200px] flex-1"
            onChange={(event) => setNote(event.target.value)}
          />
          <Button type="submit" disabled={sent !== null}>
            {checklistSheet.keepTheNote}
          </Button>
        </form>
      )}
    </li>
  );
}

/** Whom to call, once the list is through. */
function Called({ hand }: { hand: CaseInHand }) {
  const { contact, case: c } = hand.page;
  const who = listed([contact.name, contact.phone].filter(Boolean));
  return who ? (
    <p className="mt-2 text-sm text-ink-2">
      {checklistSheet.atSiteNameContact(c.siteName, contact.name)}
      {contact.phone && (
        <>
          {contact.name && ', '}
          <a className="target inline-flex items-center text-petrol underline" href={`tel:${contact.phone}`}>
            {contact.phone}
          </a>
        </>
      )}
    </p>
  ) : null;
}
