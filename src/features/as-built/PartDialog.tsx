import { useMutation } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { countUp } from '../../domain/commissioning/as-built/count-up';
import { PART_DEFAULTS, type PartKind } from '../../domain/commissioning/as-built/parts';
import { PART_WORDS } from '../../words/domain-as-built-parts';
import { ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { AsBuilt, PartAdded, PartValues } from '../../schemas/api/as-built';
import { labelOf, partOf } from '../../schemas/as-built-values';
import { changedKeys, formOf, readForm, serverFaults, type Faults, type Form } from './form';
import { PartFields } from './PartFields';
import { addPart, asBuiltKey, changePart, readAsBuilt, removePart } from './queries';
import { partDialog } from '../../words/as-built';
import { capital } from '../../words/domain-counts';

/** Which form is open: a new part, or one to edit. */
export interface Editing {
  kind: PartKind;
  /** null: a new one. */
  id: string | null;
  /** What a new one begins with besides its defaults. */
  from?: PartValues;
}

interface Props {
  built: AsBuilt;
  editing: Editing;
  timeZones: readonly string[];
  onClose: () => void;
  /** After saving; a new logger comes with its token. */
  onSaved: (editing: Editing, added: PartAdded | null) => void;
}

const newOne = (built: AsBuilt, { kind, from }: Editing): PartValues => ({
  ...PART_DEFAULTS[kind],
  ...onlyChoices(built, kind),
  ...from,
});

/** Where there is only one to choose, it is chosen; a string begins as the one before it. */
function onlyChoices(built: AsBuilt, kind: PartKind): PartValues {
  const one = <T extends { id: string; archived?: boolean }>(list: readonly T[]): string | null => {
    const offered = list.filter((p) => !p.archived);
    return offered.length === 1 ? (offered[0]?.id ?? null) : null;
  };
  if (kind === 'zone') return { initiator: one(built.initiators) };
  if (kind === 'transmitter') return { zone: one(built.zones) };
  if (kind === 'sensor') return { logger: one(built.loggers), plane: one(built.planes) };
  const last = built.strings.at(-1);
  if (kind === 'string' && last) {
    const [, next = ''] = countUp(last.name, 2);
    return {
      ...partOf(built, 'string', last.id),
      name: built.strings.some((s) => s.name === next) ? '' : next,
    };
  }
  if (kind === 'string')
    return {
      plane: one(built.planes),
      zone: one(built.zones),
      logger: one(built.loggers),
      unitType: one(built.catalogue.unitTypes),
      moduleType: one(built.catalogue.moduleTypes),
    };
  return {};
}

/** Adds or edits one part. What others changed meanwhile is shown beside what was typed, and nothing typed is lost. */
export function PartDialog({ built, editing, timeZones, onClose, onSaved }: Props) {
  const { kind, id } = editing;
  const words = PART_WORDS[kind];
  const client = queryClient();
  const site = built.site.id;
  const [before, setBefore] = useState<PartValues>(() =>
    id === null ? newOne(built, editing) : (partOf(built, kind, id) ?? {}),
  );
  const [form, setForm] = useState<Form>(() => formOf(kind, before));
  const [alike, setAlike] = useState('1');
  const [inTurn, setInTurn] = useState(true);
  const [reason, setReason] = useState('');
  const [faults, setFaults] = useState<Faults>({});
  const [asking, setAsking] = useState(false);
  const operating = built.site.stage === 'operating';
  const label = id === null ? '' : labelOf(built, kind, before);

  const several = Math.max(1, Math.round(Number(alike)) || 1);
  const done = (added: PartAdded | null) => {
    void client.invalidateQueries({ queryKey: asBuiltKey(site) });
    onSaved(editing, added);
  };
  const failed = (error: Error) => {
    if (error instanceof ApiError) setFaults(serverFaults(error.fields));
  };
  const save = useMutation(
    {
      mutationFn: async (values: PartValues): Promise<PartAdded | null> => {
        if (id === null)
          return addPart(site, {
            kind: kind as Exclude<PartKind, 'site'>,
            values,
            reason,
            ...(kind === 'string' ? { alike: several, inTurn: several > 1 && inTurn } : {}),
          });
        const keys = changedKeys(kind, before, values);
        const some = (of: PartValues) => Object.fromEntries(keys.map((k) => [k, of[k] ?? null]));
        if (keys.length > 0)
          await changePart(site, id, { kind, before: some(before), after: some(values), reason });
        return null;
      },
      onSuccess: done,
      onError: failed,
    },
    client,
  );
  /** After a clash: what stands now becomes what the edit begins from; what was typed stays in the form. */
  const rebase = useMutation(
    {
      mutationFn: async () => {
        const fresh = await readAsBuilt(site);
        client.setQueryData(asBuiltKey(site), fresh);
        return id === null ? undefined : partOf(fresh, kind, id);
      },
      onSuccess: (now) => {
        if (now) {
          const clashed = save.error instanceof ApiError ? Object.keys(serverFaults(save.error.fields)) : [];
          const theirs = formOf(kind, now);
          const mine = formOf(kind, before);
          // what nobody here touched follows the others; what was typed here stays
          setForm((old) =>
            Object.fromEntries(
              Object.entries(old).map(([key, value]) => [
                key,
                clashed.includes(key) || !sameForm(value, mine[key]) ? value : (theirs[key] ?? value),
              ]),
            ),
          );
          setBefore(now);
        }
        setFaults({});
        save.reset();
      },
    },
    client,
  );
  const remove = useMutation(
    {
      mutationFn: () => removePart(site, id ?? '', { kind: kind as Exclude<PartKind, 'site'>, reason }),
      onSuccess: () => done(null),
      onError: failed,
    },
    client,
  );
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const read = readForm(kind, form);
    setFaults(read.faults ?? {});
    if (read.values) save.mutate(read.values);
  };
  const change = (key: string, value: Form[string]) =>
    setForm((old) => ({ ...old, [key]: value, ...followers(built, kind, key, value) }));
  const clash =
    save.error instanceof ApiError && save.error.status === 409 && id !== null && save.error.current !== null;
  const error = save.error ?? remove.error ?? rebase.error;
  const title = id === null ? partDialog.addA(words.a) : `${capital(words.one)} ${label}`;
  const askReason = operating || faults.reason !== undefined || asking;

  return (
    <Dialog open title={title} onClose={onClose}>
      <form onSubmit={submit} noValidate>
        {error && (
          <div className="mb-4">
            <Notice kind="failed" title={error instanceof ApiError ? error.title : partDialog.itDidNotWork}>
              {error.message}
              {clash && (
                <div className="mt-3 flex flex-wrap gap-2">
                  <Button onClick={() => rebase.mutate()} disabled={rebase.isPending}>
                    {partDialog.keepWhatITyped}
                  </Button>
                  <Button
                    onClick={() => {
                      void client.invalidateQueries({ queryKey: asBuiltKey(site) });
                      onClose();
                    }}
                  >
                    {partDialog.leaveTheirs}
                  </Button>
                </div>
              )}
            </Notice>
          </div>
        )}
        <div className="grid gap-x-4 gap-y-4 sm:grid-cols-2">
          <PartFields
            kind={kind}
            parts={built}
            form={form}
            faults={faults}
            timeZones={timeZones}
            adding={id === null}
            onChange={change}
          />
          {kind === 'string' && id === null && (
            <Field
              label={partDialog.howManyAlike}
              name="alike"
              inputMode="numeric"
              value={alike}
              onChange={(e) => setAlike(e.target.value)}
              error={faults.alike ?? null}
              hint={partDialog.namesAreCountedUp}
            />
          )}
          {kind === 'string' && id === null && several > 1 && (
            <label className="flex min-h-[44px] items-center gap-3 self-center">
              <input
                type="checkbox"
                name="inTurn"
                checked={inTurn}
                onChange={(e) => setInTurn(e.target.checked)}
                className="h-5 w-5 flex-none accent-petrol"
              />
              {partDialog.eachOnTheNext}
            </label>
          )}
        </div>
        {askReason && (
          <Field
            className="mt-4"
            label={partDialog.why}
            name="reason"
            value={reason}
            maxLength={500}
            onChange={(e) => setReason(e.target.value)}
            error={faults.reason ?? null}
            hint={partDialog.aFewWordsThey}
          />
        )}
        <div className="sticky -bottom-5 -mx-5 -mb-5 mt-5 flex flex-wrap gap-2 border-t border-rule bg-sheet px-5 py-3">
          <Button type="submit" weight="primary" disabled={save.isPending || clash}>
            {save.isPending
              ? partDialog.saving
              : id !== null
                ? partDialog.save
                : partDialog.addThe(several, words.many, words.one)}
          </Button>
          {id !== null && kind !== 'site' && !asking && (
            <Button onClick={() => setAsking(true)}>{partDialog.delete}</Button>
          )}
          {asking && (
            <Button onClick={() => remove.mutate()} disabled={remove.isPending}>
              {remove.isPending ? partDialog.deleting : partDialog.deleteForGood(label)}
            </Button>
          )}
          <Button onClick={onClose}>{partDialog.close}</Button>
        </div>
      </form>
    </Dialog>
  );
}

const sameForm = (a: Form[string] | undefined, b: Form[string] | undefined): boolean =>
  JSON.stringify(a) === JSON.stringify(b);

/** What a choice brings with it: an inverter's type its power and its inputs. */
function followers(built: AsBuilt, kind: PartKind, key: string, value: Form[string]): Form {
  if (kind !== 'inverter' || key !== 'inverterType') return {};
  const type = built.catalogue.inverterTypes.find((t) => t.id === value);
  return type ? { acPowerMax: String(type.acPowerMax), inputs: String(type.inputs) } : {};
}
