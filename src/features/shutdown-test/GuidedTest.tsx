import { Suspense, useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { nextRound, openRound, type TestRecord } from '../../domain/commissioning/shutdown-test-record';
import { late, useSoon } from '../../lib/late';
import { later } from '../../lib/later';
import { paths } from '../../schemas/paths';
import type { ShutdownTestPage } from '../../schemas/api/shutdown-test';
import { EndTest } from './EndTest';
import { roundName } from './round';
import { useTest, type TestInHand } from './use-test';
import { stepWords } from './words';
import { guidedTest } from '../../words/shutdown-test';

const plan = async () => (await import('./PlanStep')).PlanStep;
const caution = async () => (await import('./CautionStep')).CautionStep;
const round = async () => (await import('./RoundStep')).RoundStep;
const sign = async () => (await import('./SignStep')).SignStep;
const PlanStep = late(plan);
const CautionStep = late(caution);
const RoundStep = late(round);
const SignStep = late(sign);
const ending = async () => (await import('./EndTest')).EndTest;
const Ending = later(ending, import.meta.env.SSR ? EndTest : null);
const SOON = [plan, caution, round, sign, ending];

type Step = 'plan' | 'caution' | 'sign' | number;

/** Where the test stands: the step that comes next. */
function dueStep(record: TestRecord): Step {
  if (record.plan === null) return 'plan';
  if (record.caution === null) return 'caution';
  return openRound(record) ?? nextRound(record) ?? 'sign';
}

interface Props {
  initial: ShutdownTestPage;
  person: { id: string; name: string };
  mayRun: boolean;
}

/** A shutdown test, step by step, on the phone and at the desk. */
export function GuidedTest({ initial, person, mayRun }: Props) {
  const test = useTest(initial, person.id);
  useSoon(SOON);
  const { page, record } = test;
  const [chosen, setChosen] = useState<Step | null>(null);
  const due = dueStep(record);
  const step = chosen ?? due;
  const mayWrite = mayRun && page.state === 'draft';
  const go = (next: Step | null) => {
    setChosen(next);
    window.scrollTo({ top: 0 });
  };
  const words = stepWords(page, record, step);
  const steps: { step: Step; label: string; done: boolean; open: boolean }[] = [
    { step: 'plan', label: guidedTest.whoAndWhat, done: record.plan !== null, open: true },
    { step: 'caution', label: guidedTest.caution, done: record.caution !== null, open: record.plan !== null },
    ...record.rounds.map((r, i) => ({
      step: i,
      label: roundName(page.facts, r.transmitter),
      done: r.ended !== null,
      open: record.caution !== null,
    })),
    { step: 'sign', label: guidedTest.verdictAndSignature, done: false, open: record.caution !== null },
  ];
  return (
    <>
      <Heading
        crumbs={[
          { label: guidedTest.commissioning, href: paths.commissioning() },
          { label: page.site.name, href: paths.commissioningSite(page.site.id) },
          { label: guidedTest.shutdownTests, href: paths.shutdownTests(page.site.id) },
        ]}
        finding={words.heading}
        sentence={words.sentence}
      />
      <Told test={test} />
      {page.state === 'draft' && page.unheard.unheard > 0 && (
        <div className="mb-5">
          <Caution strong={guidedTest.haveNotAnswered(page.unheard.unheard, page.unheard.units)}>
            {guidedTest.theyWillNotFollow}
          </Caution>
        </div>
      )}
      <div className="grid gap-5 lg:grid-cols-[220px_minmax(0,1fr)]">
        <nav aria-label={guidedTest.stepsOfTheTest} className="no-print">
          <ol className="flex flex-wrap gap-x-2 lg:block">
            {steps.map((s, i) => (
              <li key={String(s.step)}>
                <button
                  type="button"
                  disabled={!s.open}
                  aria-current={s.step === step ? 'step' : undefined}
                  onClick={() => go(s.step)}
                  className={`target inline-flex min-h-[44px] min-w-[44px] items-center gap-2 text-left disabled:text-ink-3 ${s.step === step ? 'font-semibold underline underline-offset-4' : ''}`}
                >
                  <span aria-hidden="true">{s.done ? '✓' : `${i + 1}.`}</span>
                  <span className={s.step === step ? '' : 'sr-only lg:not-sr-only'}>
                    {s.label}
                    {s.done && <span className="sr-only">{guidedTest.done}</span>}
                  </span>
                </button>
              </li>
            ))}
          </ol>
          {mayWrite && (
            <div className="hidden lg:block">
              <Ending test={test} />
            </div>
          )}
        </nav>
        <div className="min-w-0">
          <Suspense>
            {step === 'plan' &&
              (mayWrite ? (
                <PlanStep
                  key={record.planned?.at ?? 'new'}
                  page={page}
                  plan={record.plan}
                  person={person.name}
                  now={test.now}
                  onPlanned={(plan) => {
                    test.act({ kind: 'planned', plan });
                    go(null);
                  }}
                />
              ) : (
                <Notice
                  kind="empty"
                  title={
                    record.plan
                      ? guidedTest.isOnSiteOperates(record.plan.onSite, record.plan.operator)
                      : guidedTest.nothingIsPlannedYet
                  }
                />
              ))}
            {step === 'caution' &&
              (mayWrite ? (
                <CautionStep
                  facts={page.facts}
                  record={record}
                  person={person.name}
                  onAccepted={(name) => {
                    test.act({ kind: 'caution_accepted', name });
                    go(null);
                  }}
                />
              ) : (
                <Notice
                  kind="empty"
                  title={
                    record.caution ? guidedTest.acceptedBy(record.caution.name) : guidedTest.notAcceptedYet
                  }
                />
              ))}
            {typeof step === 'number' && record.rounds[step] && (
              <>
                <div className="mb-5">
                  <Caution strong={guidedTest.treatEveryConductorAs}>
                    {guidedTest.shutdownIsNotIsolation}
                  </Caution>
                </div>
                <RoundStep key={step} test={test} index={step} mayWrite={mayWrite} onEnded={() => go(step)} />
                {record.rounds[step].ended && (
                  <AfterRound test={test} index={step} mayWrite={mayWrite} go={go} />
                )}
              </>
            )}
            {step === 'sign' && (
              <SignStep
                test={test}
                person={person.name}
                mayWrite={mayWrite}
                onAnotherRound={() => {
                  test.act({ kind: 'round_added', transmitter: null });
                  go(record.rounds.length);
                }}
              />
            )}
          </Suspense>
          {mayWrite && (
            <div className="mt-4 lg:hidden">
              <Ending test={test} />
            </div>
          )}
        </div>
      </div>
    </>
  );
}

function AfterRound({
  test,
  index,
  mayWrite,
  go,
}: {
  test: TestInHand;
  index: number;
  mayWrite: boolean;
  go: (s: Step | null) => void;
}) {
  const { record, page, act } = test;
  const next = nextRound(record);
  const { transmitter } = record.rounds[index]!;
  return (
    <div className="mt-5 flex flex-wrap gap-2">
      <Button weight="primary" onClick={() => go(next ?? 'sign')}>
        {next === undefined ? guidedTest.goToTheVerdict : guidedTest.goToRound(next)}
      </Button>
      {mayWrite && (
        <Button
          onClick={() => {
            act({ kind: 'round_added', transmitter });
            go(record.rounds.length);
          }}
        >
          {guidedTest.anotherRound(roundName(page.facts, transmitter))}
        </Button>
      )}
    </div>
  );
}

/** What a person should know before anything else: others at it, what waits, what was refused. */
function Told({ test }: { test: TestInHand }) {
  const { page, waiting, refused, problem } = test;
  const zone = page.site.timeZone;
  return (
    <div className="mb-4 grid gap-3 empty:hidden" aria-live="polite">
      {page.ended && (
        <Notice kind="stale" title={guidedTest.endedWithoutSignatureBy(page.ended.by, page.ended.at, zone)}>
          {page.ended.reason}
        </Notice>
      )}
      {page.state === 'draft' && page.others.length > 0 && (
        <Notice
          kind="stale"
          title={guidedTest.atThisTestToo(page.others.map((o) => o.name).join(', '), page.others.length)}
        >
          {guidedTest.lastEntryYouSee(page.others.at(-1)!.at, zone)}
        </Notice>
      )}
      {waiting > 0 && (
        <Notice kind="stale" title={guidedTest.onThisPhone(waiting)}>
          {problem?.status === 401 ? guidedTest.youAreSignedOut : guidedTest.theyAreKeptHere}
        </Notice>
      )}
      {waiting === 0 && problem && (
        <Notice kind="stale" title={guidedTest.theNewestCouldNot}>
          {problem.message}
        </Notice>
      )}
      {refused.map((r) => (
        <Notice
          key={r.id}
          kind="failed"
          title={guidedTest.notTaken(r.act.kind.replaceAll('_', ' '), r.at, zone)}
          action={<Button onClick={() => test.forget(r.id)}>{guidedTest.removeIt}</Button>}
        >
          {r.why}
        </Notice>
      ))}
    </div>
  );
}
