import { useState, type SubmitEvent } from 'react';
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
  const title = error instanceof ApiError ? error.title : 'It did not work';
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
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    const faults = {
      name: personOnSite.trim().length < 2 ? 'Enter the name of the person who is on site.' : undefined,
      onSite: onSite ? undefined : 'Confirm that this person is on site now.',
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
          <Notice kind="failed" title="The roll call was not started">
            {typed.fault}
          </Notice>
        </div>
      )}
      <p className="mb-2">
        <strong className="font-semibold">A unit that is heard begins to follow the command in force.</strong>{' '}
        {commandInForceWords(page.commands)}
      </p>
      <p className="mb-4 text-ink-2">
        Wakeline asks the loggers to listen; it sends no release and no shutdown.
      </p>
      <Field
        label="Who is on site"
        name="personOnSite"
        autoComplete="name"
        maxLength={120}
        value={personOnSite}
        onChange={(e) => setPersonOnSite(e.target.value)}
        error={nameFault}
        hint="First and last name; it is kept with the roll call."
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
        <span>This person is on site now, and nobody is working on the strings.</span>
      </label>
      {missing.onSite && (
        <p id="on-site-fault" role="alert" className="mb-2 text-sm font-medium text-rust-ink">
          {missing.onSite}
        </p>
      )}
      <Button type="submit" weight="primary" className="mt-3 w-full" disabled={start.isPending}>
        {start.isPending ? 'Starting …' : 'Start the roll call'}
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
        Started <SiteTime at={run.startedAt} now={page.at} timeZone={page.site.timeZone} zone /> by{' '}
        {run.startedBy}. On site: {run.personOnSite}.
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
            {stop.isPending ? 'Stopping …' : 'Stop the roll call'}
          </Button>
        </form>
      ) : (
        <p className="mt-2 text-ink-2">A manager or a technician stops it.</p>
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
      title={open ? 'The roll call is running' : run ? 'Start the roll call again' : 'Start the roll call'}
    >
      {open ? (
        <Running page={page} run={open} mayRun={mayRun} onChanged={onChanged} />
      ) : mayRun ? (
        <Start page={page} onChanged={onChanged} typed={typed} />
      ) : (
        <p>A manager or a technician starts it, with somebody on site.</p>
      )}
      {away.length > 0 && (
        <p className="mt-4 border border-dashed border-rule p-3 text-ink-2">
          {away.map((l) => (
            <span key={l.serial} className="block">
              Logger {l.serial}{' '}
              {l.lastSpokeAt ? (
                <>
                  has not spoken since{' '}
                  <SiteTime at={l.lastSpokeAt} now={page.at} timeZone={page.site.timeZone} />
                </>
              ) : (
                'has not spoken yet'
              )}
              : it listens when it comes back.
            </span>
          ))}
        </p>
      )}
    </Sheet>
  );
}
