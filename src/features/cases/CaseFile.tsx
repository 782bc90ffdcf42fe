import { useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Heading } from '../../components/ui/Heading';
import { LiveMark } from '../../components/ui/Live';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { isClosed } from '../../domain/cases/cases';
import { CASE_STATE_WORDS, CHECK_OUTCOME_WORDS } from '../../words/domain-cases';
import type { CasePage } from '../../schemas/api/cases';
import { paths } from '../../schemas/paths';
import { ChecklistSheet } from './ChecklistSheet';
import { FactsSheet } from './FactsSheet';
import { FiguresSheet } from './FiguresSheet';
import { Entry, HistorySheet } from './HistorySheet';
import { PhotosSheet } from './PhotosSheet';
import { useCase, type CaseInHand } from './query';
import { useKeys } from './use-keys';
import { WhatSheet } from './WhatSheet';
import { dueWords } from './words';
import { caseFile } from '../../words/cases';

/** What follows from how a case stands, in a sentence. */
function sentenceOf({ case: c }: CasePage): string {
  const who = c.assignee ? caseFile.hasIt(c.assignee.name) : caseFile.nobodyHasItYet;
  if (!isClosed(c.state)) {
    const due = dueWords(c);
    const again = c.outcome === 'not_held' ? caseFile.itWasClosedAnd : '';
    return `${CASE_STATE_WORDS[c.state]}. ${who}${due ? `, ${due}` : ''}.${again}`;
  }
  return `${CASE_STATE_WORDS[c.state]}. ${
    c.outcome === null
      ? caseFile.wakelineLooksAgainOver
      : caseFile.wakelineLookedAgain(CHECK_OUTCOME_WORDS[c.outcome])
  }`;
}

export function CaseFile({ initial }: { initial: CasePage }) {
  const hand = useCase(initial);
  const { page, error, refetch, send, meanwhile, status } = hand;
  const [editing, setEditing] = useState(false);
  const c = page.case;
  useKeys({
    c: () => document.getElementById('comment')?.focus(),
    e: () => setEditing(true),
    a: () => document.getElementById('assignee')?.focus(),
  });
  return (
    <>
      <Heading
        crumbs={[
          { label: caseFile.cases, href: paths.cases() },
          { label: c.siteName, href: paths.site(c.siteId) },
          { label: caseFile.caseN(c.number) },
        ]}
        finding={c.title}
        sentence={sentenceOf(page)}
        actions={
          <LiveMark
            lostSince={!status.live && status.since ? status.since.toISOString() : null}
            timeZone={c.timeZone}
          />
        }
      />
      <NotRead error={error} title={caseFile.theCaseCouldNot} onRetry={() => refetch()} className="mb-4">
        {caseFile.whatIsShownMay}
      </NotRead>
      {meanwhile && <MeanwhileNotice hand={hand} />}
      {send.error && !meanwhile && (
        <div className="mb-4">
          <Notice kind="failed" title={send.error.title}>
            {send.error.message}
          </Notice>
        </div>
      )}
      {/* on a phone one column, in the order of what is needed on a roof */}
      <div className="grid items-start gap-6 lg:grid-cols-[minmax(0,1fr)_320px]">
        <div className="contents lg:grid lg:min-w-0 lg:gap-6">
          <div className="order-1 min-w-0">
            <WhatSheet hand={hand} editing={editing} onEdit={setEditing} />
          </div>
          <div className="order-3 min-w-0">
            <ChecklistSheet hand={hand} />
          </div>
          <div className="order-5 min-w-0 empty:hidden">
            <FiguresSheet page={page} />
          </div>
          <div className="order-6 min-w-0">
            <HistorySheet hand={hand} />
          </div>
        </div>
        <div className="contents lg:grid lg:min-w-0 lg:gap-6">
          <div className="order-2 min-w-0">
            <FactsSheet hand={hand} />
          </div>
          <div className="order-4 min-w-0">
            <PhotosSheet hand={hand} />
          </div>
          <div className="order-7 min-w-0">
            <Sheet id="pack" title={caseFile.forWhoeverIsCalled}>
              <p className="mb-3 text-ink-2">{caseFile.whatIsWrongThe}</p>
              <div className="flex flex-wrap gap-2">
                <ButtonLink href={paths.api.casePack(c.id, 'pdf')} download>
                  {caseFile.evidenceAsPdf}
                </ButtonLink>
                <ButtonLink href={paths.api.casePack(c.id, 'zip')} download>
                  {caseFile.allAsZip}
                </ButtonLink>
              </div>
            </Sheet>
          </div>
        </div>
      </div>
    </>
  );
}

/** Somebody else was first: what they did, and the choice to send the own change over it. */
function MeanwhileNotice({ hand }: { hand: CaseInHand }) {
  const { meanwhile, forget, page, send } = hand;
  if (!meanwhile) return null;
  return (
    <div
      role="alert"
      className="mb-5 border-l-0 border-t-2 border-t-rust bg-rust-wash px-[18px] py-4 text-rust-ink"
    >
      <p className="font-medium">{meanwhile.message}</p>
      {meanwhile.since.length > 0 && (
        <ul className="mt-2 bg-sheet px-3 text-ink">
          {meanwhile.since.map((entry) => (
            <Entry key={entry.id} entry={entry} now={page.at} timeZone={page.case.timeZone} />
          ))}
        </ul>
      )}
      <div className="mt-3 flex flex-wrap gap-2">
        <Button weight="primary" disabled={send.isPending} onClick={meanwhile.again}>
          {caseFile.sendMineOverIt}
        </Button>
        <Button onClick={forget}>{caseFile.leaveItAsIt}</Button>
      </div>
    </div>
  );
}
