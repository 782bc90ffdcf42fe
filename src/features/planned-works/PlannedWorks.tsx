import { useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { Tag } from '../../components/ui/Tag';
import { api, ApiError } from '../../lib/api';
import type { NewPlannedWork, PlannedWorkItem, PlannedWorksPage } from '../../schemas/api/planned-works';
import { paths } from '../../schemas/paths';
import { plannedWorksWords } from '../../words/planned-works';

const STATE = {
  going_on: { tone: 'rust', shape: '◐', words: plannedWorksWords.goingOn },
  to_come: { tone: 'plain', shape: '○', words: plannedWorksWords.toCome },
  over: { tone: 'slate', shape: '✓', words: plannedWorksWords.over },
} as const;

function Work({
  work,
  page,
  onEnd,
  busy,
}: {
  work: PlannedWorkItem;
  page: PlannedWorksPage;
  onEnd: () => void;
  busy: boolean;
}) {
  const state = STATE[work.state];
  const time = { now: page.at, timeZone: page.site.timeZone };
  return (
    <li className="flex flex-wrap items-center justify-between gap-x-6 gap-y-1 py-3">
      <div className="min-w-0">
        <p className="flex flex-wrap items-center gap-2">
          <Tag tone={state.tone} shape={state.shape}>
            {state.words}
          </Tag>
          <span className="min-w-0 break-words font-medium">{work.reason}</span>
        </p>
        <p className="mt-1 text-sm text-ink-2">
          <SiteTime at={work.startsAt} {...time} />
          {plannedWorksWords.to}
          <SiteTime at={work.endsAt} {...time} zone />
          {plannedWorksWords.enteredBy(
            work.strings === null
              ? plannedWorksWords.theWholeSite2
              : plannedWorksWords.strings(work.strings.join(', ')),
            work.by,
          )}
          {work.endedBy && plannedWorksWords.endedEarlyBy(work.endedBy)}
        </p>
      </div>
      {work.state !== 'over' && (
        <Button disabled={busy} onClick={onEnd}>
          {work.state === 'going_on' ? plannedWorksWords.endItNow : plannedWorksWords.takeItBack}
        </Button>
      )}
    </li>
  );
}

/** Planned works of a site: the list, and the form that adds to it. */
export function PlannedWorks({ initial, mayWrite }: { initial: PlannedWorksPage; mayWrite: boolean }) {
  const [page, setPage] = useState(initial);
  const [ref, setRef] = useState(() => crypto.randomUUID());
  const [from, setFrom] = useState(initial.localNow);
  const [to, setTo] = useState('');
  const [reason, setReason] = useState('');
  const [whole, setWhole] = useState(true);
  const [chosen, setChosen] = useState<ReadonlySet<string>>(new Set());
  const [fault, setFault] = useState<ApiError | null>(null);
  const [busy, setBusy] = useState(false);
  const { site } = page;

  const run = async (call: () => Promise<PlannedWorksPage>): Promise<boolean> => {
    setBusy(true);
    setFault(null);
    try {
      setPage(await call());
      return true;
    } catch (error) {
      setFault(
        error instanceof ApiError
          ? error
          : new ApiError(0, plannedWorksWords.notSent, plannedWorksWords.itDidNotWork),
      );
      return false;
    } finally {
      setBusy(false);
    }
  };
  const add = async (): Promise<void> => {
    const body: NewPlannedWork = { ref, from, to, reason, strings: whole ? null : [...chosen] };
    if (!(await run(() => api<PlannedWorksPage>(paths.api.plannedWorks(site.id), { method: 'POST', body }))))
      return;
    setRef(crypto.randomUUID());
    setTo('');
    setReason('');
    setChosen(new Set());
    setWhole(true);
  };
  const end = (work: PlannedWorkItem): void =>
    void run(async () => {
      await api(paths.api.plannedWorkEnd(work.id), { method: 'POST' });
      return api<PlannedWorksPage>(paths.api.plannedWorks(site.id));
    });
  const toggle = (id: string): void => {
    const next = new Set(chosen);
    if (!next.delete(id)) next.add(id);
    setChosen(next);
  };

  return (
    <div className="grid items-start gap-5 lg:grid-cols-[minmax(0,3fr)_minmax(0,2fr)]">
      <Sheet
        id="works"
        title={plannedWorksWords.onRecord}
        aside={
          <ButtonLink href={paths.api.plannedWorksCsv(site.id)} className="-my-2">
            CSV
          </ButtonLink>
        }
      >
        {page.works.length === 0 ? (
          <p className="text-ink-2">{plannedWorksWords.noWorksHaveBeen}</p>
        ) : (
          <ul className="divide-y divide-rule-faint">
            {page.works.map((work) => (
              <Work key={work.id} work={work} page={page} busy={busy || !mayWrite} onEnd={() => end(work)} />
            ))}
          </ul>
        )}
      </Sheet>
      {mayWrite && (
        <Sheet id="new-work" title={plannedWorksWords.planWorks}>
          <form
            className="grid gap-4"
            onSubmit={(event) => {
              event.preventDefault();
              void add();
            }}
          >
            <Field
              label={plannedWorksWords.whatIsDone}
              value={reason}
              placeholder={plannedWorksWords.newHomeRunOf}
              onChange={(event) => setReason(event.target.value)}
              error={fault?.fault('reason') ?? null}
            />
            <div className="grid gap-4 sm:grid-cols-2">
              <Field
                label={plannedWorksWords.from}
                type="datetime-local"
                value={from}
                onChange={(event) => setFrom(event.target.value)}
                hint={plannedWorksWords.clockOf(site.timeZone)}
                error={fault?.fault('from') ?? null}
              />
              <Field
                label={plannedWorksWords.to2}
                type="datetime-local"
                value={to}
                onChange={(event) => setTo(event.target.value)}
                error={fault?.fault('to') ?? null}
              />
            </div>
            <fieldset>
              <legend className="mb-1 font-medium">{plannedWorksWords.where}</legend>
              <label className="target flex items-center gap-2">
                <input type="radio" name="where" checked={whole} onChange={() => setWhole(true)} />
                {plannedWorksWords.theWholeSite}
              </label>
              <label className="target flex items-center gap-2">
                <input type="radio" name="where" checked={!whole} onChange={() => setWhole(false)} />
                {plannedWorksWords.someStrings}
              </label>
              {!whole && (
                <div className="mt-1 grid max-h-[240px] grid-cols-3 gap-x-3 overflow-y-auto border border-rule px-3 sm:grid-cols-4">
                  {page.strings.map((s) => (
                    <label key={s.id} className="target flex items-center gap-2">
                      <input type="checkbox" checked={chosen.has(s.id)} onChange={() => toggle(s.id)} />
                      {s.name}
                    </label>
                  ))}
                </div>
              )}
              {fault?.fault('strings') && (
                <p role="alert" className="mt-1 text-sm text-rust-ink">
                  {fault.fault('strings')}
                </p>
              )}
            </fieldset>
            <Button type="submit" weight="primary" disabled={busy} className="sm:w-fit">
              {plannedWorksWords.planTheseWorks}
            </Button>
            {fault && fault.fields.length === 0 && (
              <Notice kind="failed" title={fault.title}>
                {fault.message}
              </Notice>
            )}
          </form>
          <div className="mt-4">
            <Caution strong={plannedWorksWords.plannedWorksSwitchNothing}>
              {plannedWorksWords.isolateLockOutAnd}
            </Caution>
          </div>
        </Sheet>
      )}
    </div>
  );
}
