import { useState, type FormEvent } from 'react';
import { Dialog } from '../ui/Dialog';
import { amperes } from '../../drawings/numbers';
import type { StringNow } from '../../schemas/api/now';
import type { PlaceBody } from '../../schemas/api/placing';
import { Confirm, UNCONFIRMED, confirmFaults, type ConfirmFaults } from './Confirm';
import { SlotPicker } from './SlotPicker';
import { apart, nameOf, seatAt, typicalCurrent, type Seat, type SlotRef } from './evidence';
import { usePlacing } from './use-placing';
import { swapDialog } from '../../words/placements';

interface Props {
  siteId: string;
  strings: readonly StringNow[];
  first: SlotRef | null;
  second: SlotRef | null;
  onClose: () => void;
  onDone: (body: PlaceBody) => void;
}

const apartWords = (share: number | null): string =>
  share === null ? swapDialog.noCurrentToCompare : swapDialog.fromItsString(share);

/** One slot of the two: who stands there, who would, and what their currents say of either. */
function Side({ seat, other }: { seat: Seat; other: Seat }) {
  const typical = typicalCurrent(seat.string, seat.slot.position);
  const line = (slot: Seat['slot'], head: string) => (
    <div>
      <dt className="text-xs text-ink-2">{head}</dt>
      <dd>
        <span className="block font-medium">{slot.serial ?? swapDialog.noUnit}</span>
        {slot.serial !== null && (
          <span className="block text-sm text-ink-2">
            {amperes(slot.current)}, {apartWords(apart(slot.current, typical))}
          </span>
        )}
      </dd>
    </div>
  );
  return (
    <div className="min-w-0 border border-rule p-3">
      <p className="font-semibold">{nameOf(seat)}</p>
      <p className="mb-2 text-sm text-ink-2">
        {swapDialog.roofPlaceWhichCarriesTypical(seat.slot.roofPlace, seat.string.name, typical)}
      </p>
      <dl className="grid gap-2">
        {line(seat.slot, swapDialog.nowOnTheAs)}
        {line(other.slot, swapDialog.afterTheChange)}
      </dl>
    </div>
  );
}

function swapBody(one: Seat, two: Seat): Pick<PlaceBody, 'kind' | 'slots'> {
  const side = (seat: Seat, serial: string | null) => ({
    string: seat.string.id,
    position: seat.slot.position,
    serial,
    expected: seat.slot.serial,
  });
  if (one.slot.serial !== null && two.slot.serial === null)
    return { kind: 'move', slots: [side(one, null), side(two, one.slot.serial)] };
  if (one.slot.serial === null && two.slot.serial !== null)
    return { kind: 'move', slots: [side(two, null), side(one, two.slot.serial)] };
  return { kind: 'swap', slots: [side(one, two.slot.serial), side(two, one.slot.serial)] };
}

function slotFault(one: Seat | null, two: Seat | null): string | null {
  if (!one || !two) return swapDialog.chooseAStringAnd;
  if (one.string.id === two.string.id && one.slot.position === two.slot.position)
    return swapDialog.chooseTwoDifferentSlots;
  if (one.slot.serial === null && two.slot.serial === null) return swapDialog.neitherSlotHasA;
  return null;
}

/** Two slots side by side with what their units' currents say now and after; written once both labels were read. */
export function SwapDialog({ siteId, strings, first, second, onClose, onDone }: Props) {
  const [a, setA] = useState(first);
  const [b, setB] = useState(second);
  const [confirmed, setConfirmed] = useState(UNCONFIRMED);
  const [faults, setFaults] = useState<ConfirmFaults & { slots?: string }>({});
  const placing = usePlacing(siteId, onDone);
  const one = seatAt(strings, a);
  const two = seatAt(strings, b);
  const both = one && two && slotFault(one, two) === null ? { one, two } : null;
  const moves = both && (both.one.slot.serial === null || both.two.slot.serial === null);
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const slots = slotFault(one, two);
    const missing = { ...confirmFaults(confirmed), ...(slots ? { slots } : {}) };
    setFaults(missing);
    if (Object.keys(missing).length > 0 || !one || !two) return;
    placing.mutate({
      ...swapBody(one, two),
      seen: confirmed.seen.trim(),
      reason: confirmed.reason.trim(),
      checked: true,
    });
  };
  return (
    <Dialog open title={swapDialog.exchangeTwoUnitsOn} onClose={onClose}>
      <form onSubmit={submit} noValidate className="grid gap-4">
        <p className="text-ink-2">{swapDialog.thisChangesTheDrawing}</p>
        <SlotPicker
          label={swapDialog.oneSlot}
          strings={strings}
          value={a}
          onChange={setA}
          error={faults.slots}
        />
        <SlotPicker label={swapDialog.theOtherSlot} strings={strings} value={b} onChange={setB} />
        {both && (
          <div className="grid gap-3 sm:grid-cols-2">
            <Side seat={both.one} other={both.two} />
            <Side seat={both.two} other={both.one} />
          </div>
        )}
        <Confirm
          value={confirmed}
          onChange={setConfirmed}
          faults={faults}
          check={swapDialog.iHaveReadBoth}
          submit={moves ? swapDialog.moveTheUnit : swapDialog.exchangeTheTwoUnits}
          pending={placing.isPending}
          error={placing.error}
          onCancel={onClose}
        />
      </form>
    </Dialog>
  );
}
