import { useState, type FormEvent } from 'react';
import { useMutation } from '@tanstack/react-query';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { ApiError, api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { paths } from '../../schemas/paths';
import type { RollCallPage, RollCallRun, RollCallStart } from '../../schemas/api/roll-call';
import { commandInForceWords } from './words';
import { runPanel } from '../../words/commissioning';

interface Props {
  page: RollCallPage;
  /** Whether the person's role includes running a roll call. */
  mayRun: boolean;
  roster: number;
  onChanged: () => void;
  /** What was typed and what was wrong, where the form came back without a script. */
  typed: StartTyped | null;
}

export interface StartTyped {
  personOnSite: string;
  fault: string;
}

function Faults({ error }: { error: Error | null }) {
  if (!error) return null;
  const title = error instanceof ApiError ? error.title : runPanel.itDidNotWork;
  return (
    <div className="mb-4">
      <Notice kind="failed" title={title}>
        {error.message}
      </Notice>
    </div>
  );
}

function Start({ page, onChanged, typed }: Pick<Props, 'page' | 'onChanged' | 'typed'>) {
  const [personOnSite, setPersonOnSite] = useState(typed?.personOnSite ?? '');
  const [onSite, setOnSite] = useState(false);
  const [missing, setMissing] = useState<{ name?: string; onSite?: string }>({});
  const start = useMutation(
    {
      mutationFn: (body: RollCallStart) =>
        api<RollCallRun>(paths.api.rollCall(page.site.id), { method: 'POST', body }),
      onSuccess: onChanged,
      onError: (error) => {
        if (error instanceof ApiError && error.status === 409) onChanged();
      },
    },
    queryClient(),
  );
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const faults = {
      name: personOnSite.trim().length < 2 ? runPanel.enterTheNameOf : undefined,
      onSite: onSite ? undefined : runPanel.confirmThatThisPerson,
    };
    setMissing(faults);
    if (!faults.name && !faults.onSite) start.mutate({ personOnSite: personOnSite.trim(), onSite: true });
  };
  const nameFault =
    missing.name ?? (start.error instanceof ApiError ? start.error.fault('personOnSite') : undefined);
  return (
    <form method="post" onSubmit={submit} noValidate>
      <input type="hidden" name="action" value="start" />
      <Faults error={start.error} />
      {typed && !start.error && start.isIdle && (
        <div className="mb-4">
          <Notice kind="failed" title={runPanel.theRollCallWas}>
            {typed.fault}
          </Notice>
        </div>
      )}
      <p className="mb-2">
        <strong className="font-semibold">{runPanel.aUnitThatIs}</strong> {commandInForceWords(page.commands)}
      </p>
      <p className="mb-4 text-ink-2">{runPanel.wakelineAsksTheLoggers}</p>
      <Field
        label={runPanel.whoIsOnSite}
        name="personOnSite"
        autoComplete="name"
        maxLength={120}
        value={personOnSite}
        onChange={(e) => setPersonOnSite(e.target.value)}
        error={nameFault}
        hint={runPanel.firstAndLastName}
      />
      <label className="mt-3 flex min-h-[44px] items-center gap-3">
        <input
          type="checkbox"
          name="onSite"
          value="true"
          checked={onSite}
          onChange={(e) => setOnSite(e.target.checked)}
          aria-describedby={missing.onSite ? 'on-site-fault' : undefined}
          aria-invalid={missing.onSite ? true : undefined}
          className="h-5 w-5 flex-none accent-petrol"
        />
        <span>{runPanel.thisPersonIsOn}</span>
      </label>
      {missing.onSite && (
        <p id="on-site-fault" role="alert" className="mb-2 text-sm font-medium text-rust-ink">
          {missing.onSite}
        </p>
      )}
      <Button type="submit" weight="primary" className="mt-3 w-full" disabled={start.isPending}>
        {start.isPending ? runPanel.starting : runPanel.startTheRollCall}
      </Button>
    </form>
  );
}

function Running({ page, run, mayRun, onChanged }: Omit<Props, 'roster' | 'typed'> & { run: RollCallRun }) {
  const stop = useMutation(
    {
      mutationFn: () => api<RollCallRun>(paths.api.rollCallStop(page.site.id), { method: 'POST', body: {} }),
      onSettled: onChanged,
    },
    queryClient(),
  );
  return (
    <>
      <Faults error={stop.error} />
      <p>
        {runPanel.started}
        <SiteTime at={run.startedAt} now={page.at} timeZone={page.site.timeZone} zone />
        {runPanel.byOnSite(run.startedBy, run.personOnSite)}
      </p>
      <p className="mt-2 text-ink-2">{commandInForceWords(page.commands)}</p>
      {mayRun ? (
        <form
          method="post"
          onSubmit={(event) => {
            event.preventDefault();
            stop.mutate();
          }}
        >
          <input type="hidden" name="action" value="stop" />
          <Button type="submit" className="mt-4 w-full" disabled={stop.isPending}>
            {stop.isPending ? runPanel.stopping : runPanel.stopTheRollCall}
          </Button>
        </form>
      ) : (
        <p className="mt-2 text-ink-2">{runPanel.aManagerOrA}</p>
      )}
    </>
  );
}

/** Who runs the roll call; the form that starts one, by a named person on site. */
export function RunPanel({ page, mayRun, roster, onChanged, typed }: Props) {
  const { run } = page;
  const open = run && !run.stoppedAt ? run : null;
  if (!open && roster === 0) return null;
  const away = page.loggers.filter((l) => !l.connected);
  return (
    <Sheet
      id="run"
      title={open ? runPanel.theRollCallIs : run ? runPanel.startTheRollCallAgain : runPanel.startTheRollCall}
    >
      {open ? (
        <Running page={page} run={open} mayRun={mayRun} onChanged={onChanged} />
      ) : mayRun ? (
        <Start page={page} onChanged={onChanged} typed={typed} />
      ) : (
        <p>{runPanel.aManagerOrATechnician}</p>
      )}
      {away.length > 0 && (
        <p className="mt-4 border border-dashed border-rule p-3 text-ink-2">
          {away.map((l) => (
            <span key={l.serial} className="block">
              {runPanel.loggerSerial(l.serial)}
              {l.lastSpokeAt ? (
                <>
                  {runPanel.hasNotSpokenSince}
                  <SiteTime at={l.lastSpokeAt} now={page.at} timeZone={page.site.timeZone} />
                </>
              ) : (
                runPanel.hasNotSpokenYet
              )}
              {runPanel.itListensWhenIt}
            </span>
          ))}
        </p>
      )}
    </Sheet>
  );
}
