import { useState, type SubmitEvent } from 'react';
import { useMutation } from '@tanstack/react-query';
import { Button } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { ApiError, api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { StringNow } from '../../schemas/api/now';
import type { IsolationPage, IsolationStart } from '../../schemas/api/isolation';
import { paths } from '../../schemas/paths';

interface Props {
  siteId: string;
  strings: readonly StringNow[];
  string: string;
  onString: (id: string) => void;
  onStarted: (page: IsolationPage) => void;
}

type Faults = Partial<Record<keyof IsolationStart, string>>;

/** Who isolates which string, and that it is done by a load-break device: then the watch begins. */
export function IsolationForm({ siteId, strings, string, onString, onStarted }: Props) {
  const [personOnSite, setPerson] = useState('');
  const [caution, setCaution] = useState(false);
  const [faults, setFaults] = useState<Faults>({});
  const start = useMutation(
    {
      mutationFn: (body: IsolationStart) =>
        api<IsolationPage>(paths.api.isolation(siteId), { method: 'POST', body }),
      onSuccess: onStarted,
    },
    queryClient(),
  );
  const submit = (event: SubmitEvent) => {
    event.preventDefault();
    const missing: Faults = {
      ...(string ? {} : { string: 'Choose the string that will be isolated.' }),
      ...(personOnSite.trim().length < 2
        ? { personOnSite: 'Enter the name of the person who isolates the string.' }
        : {}),
      ...(caution ? {} : { caution: 'Confirm that it is isolated by a load-break device only.' }),
    };
    setFaults(missing);
    if (Object.keys(missing).length === 0)
      start.mutate({ string, personOnSite: personOnSite.trim(), caution: true });
  };
  const chosen = strings.find((s) => s.id === string);
  const mute = chosen?.kind === 'shutdown_only';
  return (
    <form onSubmit={submit} noValidate className="grid gap-3">
      {start.error && (
        <Notice kind="failed" title={start.error instanceof ApiError ? start.error.title : 'It did not work'}>
          {start.error.message}
        </Notice>
      )}
      <div>
        <label htmlFor="isolate-string" className="mb-1 block font-medium">
          String to isolate
        </label>
        <select
          id="isolate-string"
          className={`min-h-[44px] w-full rounded border bg-sheet px-2.5 text-[16px] text-ink ${faults.string ? 'border-rust' : 'border-rule'}`}
          value={string}
          onChange={(e) => onString(e.target.value)}
          aria-invalid={faults.string ? true : undefined}
          aria-describedby="isolate-string-more"
        >
          <option value="">Choose a string</option>
          {strings.map((s) => (
            <option key={s.id} value={s.id}>
              {s.name}
              {s.current === null ? '' : `, ${s.current.toFixed(1)} A now`}
            </option>
          ))}
        </select>
        <p
          id="isolate-string-more"
          role={faults.string ? 'alert' : undefined}
          className={`mt-1 text-sm ${faults.string ? 'font-medium text-rust-ink' : 'text-ink-2'}`}
        >
          {faults.string ??
            (mute
              ? 'Its units report nothing: only the input’s current will tell.'
              : chosen && (chosen.current ?? 0) < 0.5
                ? 'It carries hardly any current now: wait until the inverter runs.'
                : 'It must carry current now, or nothing can fall.')}
        </p>
      </div>
      <Field
        label="Who isolates it"
        name="personOnSite"
        autoComplete="name"
        maxLength={120}
        value={personOnSite}
        onChange={(e) => setPerson(e.target.value)}
        error={faults.personOnSite}
        hint="First and last name; it is kept with the result."
      />
      <div>
        <label className="flex min-h-[44px] items-center gap-3">
          <input
            type="checkbox"
            checked={caution}
            onChange={(e) => setCaution(e.target.checked)}
            aria-invalid={faults.caution ? true : undefined}
            className="h-5 w-5 flex-none accent-petrol"
          />
          <span>A qualified person is at the string’s load-break device and opens nothing else.</span>
        </label>
        {faults.caution && (
          <p role="alert" className="text-sm font-medium text-rust-ink">
            {faults.caution}
          </p>
        )}
      </div>
      <Button type="submit" weight="primary" disabled={start.isPending}>
        {start.isPending ? 'Starting …' : 'Start watching'}
      </Button>
    </form>
  );
}
