import { Suspense, useState } from 'react';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { RelativeTime } from '../../components/ui/Time';
import { CASE_KINDS, CASE_STATES, isClosed, type CaseState } from '../../domain/cases/cases';
import { CASE_KIND_WORDS, CASE_ORIGIN_WORDS, CASE_STATE_WORDS } from '../../words/domain-cases';
import { late } from '../../lib/late';
import { paths } from '../../schemas/paths';
import type { CaseInHand } from './query';
import { dueWords } from './words';
import { factsSheet } from '../../words/cases';

const MoveDialog = late(async () => (await import('./MoveDialog')).MoveDialog);

/** State, person, day: what changes most, in reach of a thumb. */
export function FactsSheet({ hand }: { hand: CaseInHand }) {
  const { page, send, change } = hand;
  const c = page.case;
  const [closing, setClosing] = useState<CaseState | null>(null);
  const [asked, setAsked] = useState(false);
  // what somebody else did is told on the page, which a dialog would cover; the note goes with the sending again
  if (hand.meanwhile && closing) setClosing(null);
  const facts = (some: {
    assignee?: string | null;
    dueOn?: string | null;
    kind?: (typeof CASE_KINDS)[number];
  }) => change({ act: 'facts', version: c.version, ...some });
  const move = (to: CaseState) => {
    send.reset();
    if (isClosed(to)) {
      setClosing(to);
      setAsked(true);
    } else change({ act: 'state', version: c.version, state: to, note: '' });
  };
  return (
    <Sheet id="facts" title={factsSheet.whereItStands}>
      <div className="grid gap-4">
        <Choice
          label={factsSheet.state}
          value={c.state}
          options={CASE_STATES.map((s) => ({ value: s, label: CASE_STATE_WORDS[s] }))}
          onChange={(state) => {
            const to = CASE_STATES.find((s) => s === state);
            if (to && to !== c.state) move(to);
          }}
        />
        <Choice
          id="assignee"
          label={factsSheet.assignedTo}
          value={c.assignee?.id ?? ''}
          error={send.error?.fault('assignee') ?? null}
          options={[
            { value: '', label: factsSheet.nobodyYet },
            ...page.people.map((p) => ({
              value: p.id,
              label: p.id === page.me.id ? factsSheet.nameYou(p.name) : p.name,
            })),
            ...(c.assignee && !page.people.some((p) => p.id === c.assignee?.id)
              ? [{ value: c.assignee.id, label: factsSheet.noLongerHere(c.assignee.name) }]
              : []),
          ]}
          onChange={(id) => facts({ assignee: id || null })}
        />
        <DueField key={c.dueOn ?? ''} dueOn={c.dueOn} onSave={(dueOn) => facts({ dueOn })} />
        {c.overdue && (
          <p>
            <Tag tone="rust">{dueWords(c)}</Tag>
          </p>
        )}
        <Choice
          label={factsSheet.kind}
          value={c.kind}
          options={CASE_KINDS.map((k) => ({ value: k, label: CASE_KIND_WORDS[k] }))}
          onChange={(kind) => facts({ kind: CASE_KINDS.find((k) => k === kind) ?? 'other' })}
        />
        <p className="text-sm text-ink-2">
          {factsSheet.openedOriginOpenedBy(CASE_ORIGIN_WORDS[c.origin], c.openedBy)}
          <RelativeTime at={c.openedAt} now={page.at} timeZone={c.timeZone} />
          {c.cause && (
            <>
              {factsSheet.cause}
              <a href={paths.cause(c.cause.id)} className="text-petrol underline underline-offset-[3px]">
                {c.cause.headline}
              </a>
              {c.cause.open ? factsSheet.stillOpen : factsSheet.over}
            </>
          )}
        </p>
      </div>
      {asked && (
        <Suspense>
          <MoveDialog
            move={closing && { number: c.number, to: closing }}
            fault={send.error?.fault('note') ?? (hand.meanwhile ? null : (send.error?.message ?? null))}
            busy={send.isPending}
            onMove={(note) =>
              closing &&
              change({ act: 'state', version: c.version, state: closing, note }, () => setClosing(null))
            }
            onClose={() => {
              setClosing(null);
              hand.forget();
            }}
          />
        </Suspense>
      )}
    </Sheet>
  );
}

/** Kept when it is left, not while it is being typed: half a date is none. */
function DueField({ dueOn, onSave }: { dueOn: string | null; onSave: (day: string | null) => void }) {
  const [typed, setTyped] = useState(dueOn ?? '');
  return (
    <Field
      label={factsSheet.due}
      type="date"
      value={typed}
      onChange={(event) => setTyped(event.target.value)}
      onBlur={() => {
        if (typed !== (dueOn ?? '')) onSave(typed || null);
      }}
    />
  );
}
