import { useMutation } from '@tanstack/react-query';
import { useRef, useState, type KeyboardEvent, type FormEvent } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { AsBuilt, StringBuilt } from '../../schemas/api/as-built';
import { nameOf, namedOptions } from '../../schemas/as-built-values';
import { paths } from '../../schemas/paths';
import { gapsOf } from './finding';
import { asBuiltKey, readAsBuilt, saveSlots } from './queries';
import {
  draftBody,
  EMPTY_DRAFT,
  isEmpty,
  leaving,
  rebased,
  withFact,
  withSerial,
  type SlotsDraft,
} from './slots-draft';
import { slotsDialog } from '../../words/as-built';

interface Props {
  built: AsBuilt;
  string: StringBuilt;
  draft: SlotsDraft;
  mayWrite: boolean;
  onDraft: (draft: SlotsDraft) => void;
  onEditString: () => void;
  onClose: () => void;
}

interface Told {
  index: number;
  field: string;
  kind: string;
  message: string;
}
const toldBy = (error: Error | null): Told[] =>
  error instanceof ApiError && Array.isArray(error.current) ? (error.current as Told[]) : [];

/** The slots of a string with their serials, to be typed or scanned one after the other. */
export function SlotsDialog({ built, string, draft, mayWrite, onDraft, onEditString, onClose }: Props) {
  const client = queryClient();
  const [more, setMore] = useState(false);
  const [reason, setReason] = useState('');
  const [sent, setSent] = useState<readonly number[]>([]);
  const list = useRef<HTMLOListElement>(null);
  const site = built.site.id;
  const save = useMutation(
    {
      mutationFn: async (how: { move?: boolean; retype?: boolean }) => {
        const { body, positions } = draftBody(string, draft, { move: false, retype: false, ...how, reason });
        try {
          return await saveSlots(site, body);
        } catch (error) {
          // which slot each fault is about, also when more is typed meanwhile
          if (error instanceof ApiError) setSent(positions);
          throw error;
        }
      },
      onSuccess: async () => {
        client.setQueryData(asBuiltKey(site), await readAsBuilt(site));
        onDraft(EMPTY_DRAFT);
        setReason('');
      },
    },
    client,
  );
  const rebase = useMutation(
    {
      mutationFn: () => readAsBuilt(site),
      onSuccess: (fresh) => {
        client.setQueryData(asBuiltKey(site), fresh);
        const now = fresh.strings.find((s) => s.id === string.id);
        if (now) onDraft(rebased(draft, now));
        save.reset();
      },
    },
    client,
  );

  const told = toldBy(save.error);
  const faultOf = (position: number): string | null => {
    const index = sent.indexOf(position);
    return told.find((t) => t.index === index)?.message ?? null;
  };
  const all = (kind: string) => told.length > 0 && told.every((t) => t.kind === kind);
  const reasonFault = save.error instanceof ApiError ? save.error.fault('reason') : undefined;
  const askReason =
    leaving(draft).length > 0 ||
    built.site.stage === 'operating' ||
    reasonFault !== undefined ||
    all('elsewhere');
  const gaps = gapsOf(string);

  const submit = (event: FormEvent) => {
    event.preventDefault();
    save.mutate({});
  };
  /** A scanner ends each code with Enter: the next slot is next. */
  const onEnter = (event: KeyboardEvent<HTMLInputElement>) => {
    if (event.key !== 'Enter') return;
    event.preventDefault();
    const fields = [...(list.current?.querySelectorAll<HTMLInputElement>('input[data-serial]') ?? [])];
    fields[fields.indexOf(event.currentTarget) + 1]?.focus();
  };

  return (
    <Dialog open title={slotsDialog.stringWhich(string.name)} onClose={onClose}>
      <p className="mb-3 text-ink-2">
        {slotsDialog.slotsFromTheNegative(string.slots.length, gaps)}
        {nameOf(built, 'unit_type', string.unitType)}; {nameOf(built, 'plane', string.plane)};{' '}
        {nameOf(built, 'input', string.input)}
        {slotsDialog.zone}
        {nameOf(built, 'zone', string.zone)}.
      </p>
      <div className="mb-4 flex flex-wrap gap-2">
        {mayWrite && <Button onClick={onEditString}>{slotsDialog.editTheString}</Button>}
        {mayWrite && (
          <ButtonLink href={paths.serials(site, string.id)}>{slotsDialog.readSerialsOnSite}</ButtonLink>
        )}
        <ButtonLink href={`${paths.asBuiltHistory(site)}?string=${string.id}`}>
          {slotsDialog.history}
        </ButtonLink>
      </div>
      <form onSubmit={submit} noValidate>
        <label className="mb-2 flex min-h-[44px] items-center gap-3">
          <input
            type="checkbox"
            checked={more}
            onChange={(e) => setMore(e.target.checked)}
            className="h-5 w-5 flex-none accent-petrol"
          />
          {slotsDialog.moduleTypesAndPlaces}
        </label>
        <ol ref={list} className="border-t border-rule">
          {string.slots.map((slot) => {
            const fault = faultOf(slot.position);
            const id = `slot-${slot.position}`;
            return (
              <li key={slot.position} className="border-b border-rule-faint py-1.5">
                <div className="flex items-center gap-3">
                  <label htmlFor={id} className="w-8 flex-none text-right font-medium">
                    <span className="sr-only">{slotsDialog.serialAtPosition}</span>
                    {slot.position}
                  </label>
                  <input
                    id={id}
                    data-serial
                    name={id}
                    value={draft.serials[slot.position] ?? slot.serial ?? ''}
                    placeholder={slotsDialog.noSerialYet}
                    readOnly={!mayWrite}
                    autoComplete="off"
                    autoCapitalize="characters"
                    spellCheck={false}
                    aria-invalid={fault ? true : undefined}
                    aria-describedby={fault ? `${id}-error` : undefined}
                    onKeyDown={onEnter}
                    onChange={(e) => onDraft(withSerial(draft, string, slot.position, e.target.value))}
                    className={`min-h-[44px] w-full min-w-0 rounded border bg-sheet px-3 text-[16px] placeholder:text-ink-3 ${fault ? 'border-rust' : draft.serials[slot.position] === undefined ? 'border-rule' : 'border-ink'}`}
                  />
                </div>
                {more && (
                  <div className="mt-1.5 grid gap-1.5 pl-11 sm:grid-cols-2">
                    <select
                      aria-label={slotsDialog.moduleTypeAtPosition(slot.position)}
                      value={draft.types[slot.position] ?? slot.moduleType}
                      disabled={!mayWrite}
                      onChange={(e) =>
                        onDraft(withFact(draft, string, 'types', slot.position, e.target.value))
                      }
                      className="min-h-[44px] w-full min-w-0 rounded border border-rule bg-sheet px-2 text-[15px]"
                    >
                      {namedOptions(built, 'module_type', [slot.moduleType]).map((o) => (
                        <option key={o.id} value={o.id}>
                          {o.name}
                        </option>
                      ))}
                    </select>
                    <input
                      aria-label={slotsDialog.placeOnTheRoof(slot.position)}
                      placeholder={slotsDialog.upperRowFifthFrom}
                      value={draft.places[slot.position] ?? slot.roofPlace}
                      readOnly={!mayWrite}
                      maxLength={200}
                      onChange={(e) =>
                        onDraft(withFact(draft, string, 'places', slot.position, e.target.value))
                      }
                      className="min-h-[44px] w-full min-w-0 rounded border border-rule bg-sheet px-3 text-[15px] placeholder:text-ink-3"
                    />
                  </div>
                )}
                {fault && (
                  <p id={`${id}-error`} role="alert" className="mt-1 pl-11 text-sm font-medium text-rust-ink">
                    {fault}
                  </p>
                )}
              </li>
            );
          })}
        </ol>
        {mayWrite && askReason && (
          <Field
            className="mt-4"
            label={slotsDialog.why}
            name="reason"
            value={reason}
            maxLength={500}
            onChange={(e) => setReason(e.target.value)}
            error={reasonFault ?? null}
            hint={slotsDialog.aFewWordsThey}
          />
        )}
        {save.error && (
          <div className="mt-4">
            <Notice
              kind="failed"
              title={save.error instanceof ApiError ? save.error.title : slotsDialog.itDidNotWork}
            >
              {save.error.message}
              <div className="mt-3 flex flex-wrap gap-2">
                {all('elsewhere') && (
                  <Button onClick={() => save.mutate({ move: true })}>{slotsDialog.theyWereMovedHere}</Button>
                )}
                {all('foreign_type') && (
                  <Button onClick={() => save.mutate({ retype: true })}>
                    {slotsDialog.theRecordIsWrong}
                  </Button>
                )}
                {told.some((t) => t.kind === 'stale') && (
                  <Button onClick={() => rebase.mutate()}>{slotsDialog.keepWhatITyped}</Button>
                )}
              </div>
            </Notice>
          </div>
        )}
        {save.isSuccess && isEmpty(draft) && (
          <div className="mt-4">
            <Notice kind="done" title={slotsDialog.saved} />
          </div>
        )}
        {mayWrite && (
          <div className="sticky -bottom-5 -mx-5 -mb-5 mt-4 flex flex-wrap gap-2 border-t border-rule bg-sheet px-5 py-3">
            <Button type="submit" weight="primary" disabled={save.isPending || isEmpty(draft)}>
              {save.isPending ? slotsDialog.saving : slotsDialog.saveTheSlots}
            </Button>
            {!isEmpty(draft) && (
              <Button
                onClick={() => {
                  onDraft(EMPTY_DRAFT);
                  save.reset();
                }}
              >
                {slotsDialog.undoWhatITyped}
              </Button>
            )}
            <Button onClick={onClose}>{slotsDialog.close}</Button>
          </div>
        )}
      </form>
    </Dialog>
  );
}
