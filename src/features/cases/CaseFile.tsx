import { Suspense, useState } from 'react';
import { ButtonLink } from '../../components/ui/Button';
import { Heading } from '../../components/ui/Heading';
import { LiveMark } from '../../components/ui/Live';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { isClosed } from '../../domain/cases/cases';
import { CASE_STATE_WORDS, CHECK_OUTCOME_WORDS } from '../../words/domain-cases';
import type { CasePage } from '../../schemas/api/cases';
import { late } from '../../lib/late';
import { later } from '../../lib/later';
import { paths } from '../../schemas/paths';
import { ChecklistSheet } from './ChecklistSheet';
import { FactsSheet } from './FactsSheet';
import { FiguresSheet } from './FiguresSheet';
import { HistorySheet } from './HistorySheet';
import { PhotosSheet } from './PhotosSheet';
import { useCase } from './query';
import { useKeys } from './use-keys';
import { WhatSheet } from './WhatSheet';
import { dueWords } from './words';
import { caseFile } from '../../words/cases';

const Figures = later(
  async () => (await import('./FiguresSheet')).FiguresSheet,
  import.meta.env.SSR ? FiguresSheet : null,
);
const Photos = later(
  async () => (await import('./PhotosSheet')).PhotosSheet,
  import.meta.env.SSR ? PhotosSheet : null,
);
const MeanwhileNotice = late(async () => (await import('./MeanwhileNotice')).MeanwhileNotice);

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
      {meanwhile && (
        <Suspense>
          <MeanwhileNotice hand={hand} />
        </Suspense>
      )}
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
          <Figures page={page} className="order-5 min-w-0 empty:hidden" />
          <div className="order-6 min-w-0">
            <HistorySheet hand={hand} />
          </div>
        </div>
        <div className="contents lg:grid lg:min-w-0 lg:gap-6">
          <div className="order-2 min-w-0">
            <FactsSheet hand={hand} />
          </div>
          <Photos hand={hand} className="order-4 min-w-0" />
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
