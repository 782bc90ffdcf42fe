import { useMemo, useState, type FormEvent } from 'react';
import { Dialog } from '../ui/Dialog';
import { Field } from '../ui/Field';
import type { PlaceSuggestion, Stranger } from '../../domain/commissioning/suggest';
import { decibelMilliwatts } from '../../drawings/numbers';
import type { StringNow } from '../../schemas/api/now';
import type { HeardItem } from '../../schemas/live';
import type { PlaceBody } from '../../schemas/api/placing';
import { Confirm, UNCONFIRMED, confirmFaults, type ConfirmFaults } from './Confirm';
import { SlotPicker } from './SlotPicker';
import { nameOf, seatAt, type SlotRef } from './evidence';
import { suggestedFor } from './suggestions';
import { usePlacing } from './use-placing';
import { placeDialog } from '../../words/placements';

interface Props {
  siteId: string;
  strings: readonly StringNow[];
  answers: readonly HeardItem[];
  /** The serial that was heard; null: one is typed in, for a unit that is replaced. */
  stranger: Stranger | null;
  slot: SlotRef | null;
  onClose: () => void;
  onDone: (body: PlaceBody) => void;
}

const SHOWN = 4;

function Suggestions({
  list,
  onTake,
  taken,
}: {
  list: readonly PlaceSuggestion[];
  taken: SlotRef | null;
  onTake: (ref: SlotRef) => void;
}) {
  if (list.length === 0)
    return (
      <p className="border border-dashed border-rule p-3 text-ink-2">{placeDialog.nothingSaysWhereIt}</p>
    );
  return (
    <div>
      <p className="mb-1 font-medium">{placeDialog.whatSpeaksForA}</p>
      <ul>
        {list.slice(0, SHOWN).map((s) => (
          <li
            key={s.stringId}
            className="flex items-start justify-between gap-3 border-b border-rule-faint py-2 last:border-b-0"
          >
            <div className="min-w-0">
              <p className="font-semibold">
                {s.stringName}
                {s.position !== null && placeDialog.positionPosition(s.position)}
                {s.position === null && (
                  <span className="font-normal text-ink-2">{placeDialog.positionNotKnown}</span>
                )}
              </p>
              <ul className="list-disc pl-4 text-sm text-ink-2">
                {s.reasons.map((r) => (
                  <li key={r.words}>{r.words}</li>
                ))}
              </ul>
            </div>
            <button
              type="button"
              className="target flex-none rounded border border-rule px-3 text-sm font-medium hover:border-ink-3 aria-pressed:border-ink aria-pressed:bg-film"
              aria-pressed={taken?.stringId === s.stringId}
              onClick={() => onTake({ stringId: s.stringId, position: s.position ?? 0 })}
            >
              {placeDialog.takeStringName(s.stringName)}
            </button>
          </li>
        ))}
      </ul>
    </div>
  );
}

/** Puts a serial into a slot: a stranger that was heard, or the unit that takes an old one's place. */
export function PlaceDialog({ siteId, strings, answers, stranger, slot, onClose, onDone }: Props) {
  const [ref, setRef] = useState(slot);
  const [typed, setTyped] = useState('');
  const [confirmed, setConfirmed] = useState(UNCONFIRMED);
  const [faults, setFaults] = useState<ConfirmFaults & { slot?: string; serial?: string }>({});
  const placing = usePlacing(siteId, onDone);
  const heard = useMemo(() => new Set(answers.map((a) => a.serial)), [answers]);
  const suggestions = useMemo(
    () => (stranger ? suggestedFor(stranger, strings, answers) : []),
    [stranger, strings, answers],
  );
  const seat = seatAt(strings, ref);
  const serial = stranger?.serial ?? typed.trim().toUpperCase();
  const old = seat?.slot.serial ?? null;
  const oldHeard = old !== null && heard.has(old);
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const missing = {
      ...confirmFaults(confirmed),
      ...(seat ? {} : { slot: placeDialog.chooseTheStringAnd }),
      ...(serial.length < 4 ? { serial: placeDialog.typeTheSerialOf } : {}),
    };
    setFaults(missing);
    if (Object.keys(missing).length > 0 || !seat) return;
    placing.mutate({
      kind: old === null ? 'place' : 'replace',
      slots: [{ string: seat.string.id, position: seat.slot.position, serial, expected: old }],
      seen: confirmed.seen.trim(),
      reason: confirmed.reason.trim(),
      checked: true,
    });
  };
  const title = stranger ? placeDialog.placeSerial(stranger.serial) : placeDialog.replaceAUnit;
  return (
    <Dialog open title={title} onClose={onClose}>
      <form onSubmit={submit} noValidate className="grid gap-4">
        {stranger ? (
          <>
            <p className="text-ink-2">
              {placeDialog.heardBy(stranger.gateway)}
              {stranger.signal !== null && `, ${decibelMilliwatts(stranger.signal)}`}
              {placeDialog.whereItLiesOnly}
            </p>
            <Suggestions list={suggestions} taken={ref} onTake={setRef} />
          </>
        ) : (
          <Field
            label={placeDialog.serialOfTheNew}
            name="serial"
            value={typed}
            onChange={(e) => setTyped(e.target.value)}
            autoCapitalize="characters"
            autoComplete="off"
            spellCheck={false}
            error={faults.serial}
            hint={placeDialog.asItsLabelHas}
          />
        )}
        <SlotPicker
          label={placeDialog.whereItLies}
          strings={strings}
          value={ref}
          onChange={setRef}
          heard={heard}
          isOpen={(s) => s.serial === null || !heard.has(s.serial)}
          error={faults.slot}
        />
        {seat && (
          <p
            className={`border p-3 ${oldHeard ? 'border-rust bg-rust-wash text-rust-ink' : 'border-rule-faint'}`}
          >
            {old === null ? (
              <>{placeDialog.hasNoUnitOn(nameOf(seat), seat.slot.roofPlace)}</>
            ) : oldHeard ? (
              <>{placeDialog.hasWhichAnswersFrom(nameOf(seat), old)}</>
            ) : (
              <>{placeDialog.hasWhichNobodyHas(nameOf(seat), old, seat.slot.roofPlace)}</>
            )}
          </p>
        )}
        <Confirm
          value={confirmed}
          onChange={setConfirmed}
          faults={faults}
          check={serial.length >= 4 ? placeDialog.haveReadOnThe(serial) : placeDialog.iHaveReadThis}
          submit={
            old === null
              ? placeDialog.placeIt(seat ? placeDialog.atSeat(nameOf(seat)) : '')
              : placeDialog.replaceOldSeat(old, seat ? placeDialog.atSeat(nameOf(seat)) : '')
          }
          pending={placing.isPending}
          error={placing.error}
          onCancel={onClose}
        />
      </form>
    </Dialog>
  );
}
