import { useMutation } from '@tanstack/react-query';
import { useState, useSyncExternalStore, type FormEvent } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { zoneAheadOfSun } from '../../domain/commissioning/as-built/check-part';
import { PART_DEFAULTS } from '../../domain/commissioning/as-built/parts';
import { api, ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { PartValues, SiteCreated } from '../../schemas/api/as-built';
import { paths } from '../../schemas/paths';
import { typedNumber } from '../../schemas/typed-number';
import { formOf, readForm, serverFaults, type Faults, type Form } from './form';
import { PartFields } from './PartFields';
import { newSite } from '../../words/new-site';

interface Props {
  timeZones: readonly string[];
  /** The organisation's own; where it is none in particular, the browser's is guessed. */
  timeZone: string;
  /** ISO 8601. */
  at: string;
}

const GROUPS = [
  { title: newSite.whichSite, keys: ['name', 'place', 'contactName', 'contactPhone'] },
  { title: newSite.where, keys: ['latitude', 'longitude', 'altitude', 'timeZone'] },
  { title: newSite.rulesAndDesign, keys: ['ruleSet', 'structure', 'temperatureMin', 'temperatureMax'] },
  { title: newSite.shutdownAndReports, keys: ['shutdownSwitchPlace', 'reportIntervalS'] },
] as const;

const never = () => () => undefined;

/** A form for a new site. It begins in commissioning, with one initiator and one zone. */
export function NewSite({ timeZones, timeZone, at }: Props) {
  const browserZone = useSyncExternalStore<string | null>(
    never,
    () => Intl.DateTimeFormat().resolvedOptions().timeZone,
    () => null,
  );
  const guessed = timeZone !== 'UTC' ? timeZone : (browserZone ?? timeZone);
  const [typed, setTyped] = useState<Form>({});
  const [faults, setFaults] = useState<Faults>({});
  const form: Form = { ...formOf('site', PART_DEFAULTS.site), timeZone: guessed, ...typed };
  const create = useMutation(
    {
      mutationFn: (values: PartValues) =>
        api<SiteCreated>(paths.api.sites(), { method: 'POST', body: { values } }),
      onSuccess: ({ id }) => window.location.assign(paths.asBuilt(id)),
      onError: (error) => {
        if (error instanceof ApiError) setFaults(serverFaults(error.fields));
      },
    },
    queryClient(),
  );
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const read = readForm('site', form);
    setFaults(read.faults ?? {});
    if (read.values) create.mutate(read.values);
    else
      requestAnimationFrame(() => document.querySelector<HTMLElement>('form [aria-invalid="true"]')?.focus());
  };
  const count = Object.keys(faults).length;
  return (
    <form onSubmit={submit} noValidate className="grid gap-5 lg:grid-cols-2">
      {GROUPS.map((group) => (
        <Sheet key={group.title} id={`new-${group.keys[0]}`} title={group.title}>
          <div className="grid gap-4 sm:grid-cols-2">
            <PartFields
              kind="site"
              parts={null}
              form={form}
              faults={faults}
              timeZones={timeZones}
              only={group.keys}
              onChange={(key, value) => setTyped((old) => ({ ...old, [key]: value }))}
            />
          </div>
          {group.title === newSite.where && <SunAndClock form={form} at={at} />}
          {group.title === newSite.shutdownAndReports && (
            <p className="mt-4 text-ink-2">{newSite.anInitiatorAtThis}</p>
          )}
        </Sheet>
      ))}
      <div className="lg:col-span-2">
        {(create.error ?? count > 0) && (
          <div className="mb-4">
            <Notice
              kind="failed"
              title={create.error instanceof ApiError ? create.error.title : newSite.somethingIsMissingOr}
            >
              {create.error?.message ?? Object.values(faults).join(' ')}
            </Notice>
          </div>
        )}
        <div className="flex flex-wrap gap-2">
          {/* before the script runs a press would send what was typed away as an address */}
          <Button
            type="submit"
            weight="primary"
            disabled={browserZone === null || create.isPending || create.isSuccess}
          >
            {create.isPending || create.isSuccess ? newSite.creating : newSite.createTheSite}
          </Button>
          <ButtonLink href={paths.commissioning()}>{newSite.backToCommissioning}</ButtonLink>
        </div>
      </div>
    </form>
  );
}

/** Between them lie at most a daylight saving hour and the width of the widest zones. */
const PLAUSIBLE_H = 3.5;

/** A place and a clock that do not fit are mostly a sign that was forgotten. */
function SunAndClock({ form, at }: { form: Form; at: string }) {
  const longitude = typedNumber(String(form.longitude ?? ''), '', { min: -180, max: 180, unit: '°' });
  const zone = String(form.timeZone ?? '');
  if (longitude.value === null || zone === '') return null;
  const ahead = zoneAheadOfSun(longitude.value, zone, new Date(at).getTime());
  if (Math.abs(ahead) <= PLAUSIBLE_H) return null;
  return (
    <p role="status" className="mt-4 font-medium text-rust-ink">
      {newSite.atThisLongitudeThe(zone.replaceAll('_', ' '), Math.round(Math.abs(ahead)))}
    </p>
  );
}
