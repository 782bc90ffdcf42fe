import { Sheet } from '../../components/ui/Sheet';
import type { RoofSlot, RoofString } from '../../schemas/api/roof';
import { MetresInput } from './OutlinePanel';
import { placesSheet } from '../../words/roof';

interface Props {
  string: RoofString;
  slots: readonly RoofSlot[];
  mayWrite: boolean;
  onSlots: (slots: readonly RoofSlot[]) => void;
}

const ROW = 'grid grid-cols-[64px_1fr_1fr] items-center gap-2 sm:grid-cols-[64px_110px_110px_minmax(0,1fr)]';

/** Each module's place in figures and words, editable one by one. */
export function PlacesSheet({ string, slots, mayWrite, onSlots }: Props) {
  const set = (position: number, some: Partial<RoofSlot>) =>
    onSlots(slots.map((s) => (s.position === position ? { ...s, ...some } : s)));
  const figure = (value: number | null) => (value === null ? '–' : value.toFixed(2));
  return (
    <Sheet id="places" title={placesSheet.placesOf(string.name)} aside={placesSheet.asAPersonFinds} flush>
      <div aria-hidden="true" className={`${ROW} border-b border-rule pb-1 text-sm font-medium text-ink-2`}>
        <span>{placesSheet.position}</span>
        <span>{placesSheet.eastM}</span>
        <span>{placesSheet.northM}</span>
        <span className="hidden sm:block">{placesSheet.inWords}</span>
      </div>
      <ol>
        {slots.map((slot) => (
          <li key={slot.position} className={`${ROW} border-b border-rule-faint py-1`}>
            <span className="font-medium">{slot.position}</span>
            {mayWrite ? (
              <>
                <div>
                  <MetresInput
                    label={placesSheet.positionEast(slot.position)}
                    value={slot.roofX}
                    onValue={(roofX) => set(slot.position, { roofX })}
                  />
                </div>
                <div>
                  <MetresInput
                    label={placesSheet.positionNorth(slot.position)}
                    value={slot.roofY}
                    onValue={(roofY) => set(slot.position, { roofY })}
                  />
                </div>
                <input
                  aria-label={placesSheet.positionInWords(slot.position)}
                  value={slot.roofPlace}
                  maxLength={200}
                  onChange={(event) => set(slot.position, { roofPlace: event.target.value })}
                  className="col-span-3 min-h-[44px] w-full rounded border border-rule bg-sheet px-2 text-[16px] sm:col-span-1"
                />
              </>
            ) : (
              <>
                <span>{figure(slot.roofX)}</span>
                <span>{figure(slot.roofY)}</span>
                <span className="col-span-3 sm:col-span-1">{slot.roofPlace || '–'}</span>
              </>
            )}
          </li>
        ))}
      </ol>
    </Sheet>
  );
}
