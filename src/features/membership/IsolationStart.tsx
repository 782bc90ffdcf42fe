import { useState, type FormEvent } from 'react';
import { useMutation } from '@tanstack/react-query';
import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { ApiError, api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { StringNow } from '../../schemas/api/now';
import type { IsolationPage, IsolationStart } from '../../schemas/api/isolation';
import { paths } from '../../schemas/paths';
import { isolationStart } from '../../words/membership';

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
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const missing: Faults = {
      ...(string ? {} : { string: isolationStart.chooseTheStringThat }),
      ...(personOnSite.trim().length < 2 ? { personOnSite: isolationStart.enterTheNameOf } : {}),
      ...(caution ? {} : { caution: isolationStart.confirmThatItIs }),
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
        <Notice
          kind="failed"
          title={start.error instanceof ApiError ? start.error.title : isolationStart.itDidNotWork}
        >
          {start.error.message}
        </Notice>
      )}
      <Choice
        id="isolate-string"
        label={isolationStart.stringToIsolate}
        value={string}
        options={[
          { value: '', label: isolationStart.chooseAString },
          ...strings.map((s) => ({
            value: s.id,
            label: s.current === null ? s.name : isolationStart.nameCurrentANow(s.name, s.current.toFixed(1)),
          })),
        ]}
        onChange={onString}
        error={faults.string}
        hint={
          faults.string
            ? null
            : mute
              ? isolationStart.itsUnitsReportNothing
              : chosen && (chosen.current ?? 0) < 0.5
                ? isolationStart.itCarriesHardlyAny
                : isolationStart.itMustCarryCurrent
        }
      />
      <Field
        label={isolationStart.whoIsolatesIt}
        name="personOnSite"
        autoComplete="name"
        maxLength={120}
        value={personOnSite}
        onChange={(e) => setPerson(e.target.value)}
        error={faults.personOnSite}
        hint={isolationStart.firstAndLastName}
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
          <span>{isolationStart.aQualifiedPersonIs}</span>
        </label>
        {faults.caution && (
          <p role="alert" className="text-sm font-medium text-rust-ink">
            {faults.caution}
          </p>
        )}
      </div>
      <Button type="submit" weight="primary" disabled={start.isPending}>
        {start.isPending ? isolationStart.starting : isolationStart.startWatching}
      </Button>
    </form>
  );
}
