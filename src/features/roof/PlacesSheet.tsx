import { Sheet } from '../../components/ui/Sheet';
import type { RoofSlot, RoofString } from '../../schemas/api/roof';
import { MetresInput } from './OutlinePanel';

interface Props {
  string: RoofString;
  slots: readonly RoofSlot[];
  mayWrite: boolean;
  onSlots: (slots: readonly RoofSlot[]) => void;
}

/** Each module's place in figures and words, editable one by one. */
export function PlacesSheet({ string, slots, mayWrite, onSlots }: Props) {
  const set = (position: number, some: Partial<RoofSlot>) =>
    onSlots(slots.map((s) => (s.position === position ? { ...s, ...some } : s)));
  const figure = (value: number | null) => (value === null ? '–' : value.toFixed(2));
  return (
    <Sheet id="places" title={`Places of ${string.name}`} aside="as a person finds them" flush>
      <div className="overflow-x-auto">
        <table className="w-full border-collapse text-left">
          <caption className="sr-only">Positions of {string.name} and where they are</caption>
          <thead>
            <tr className="border-b border-rule text-sm text-ink-2">
              <th scope="col" className="w-12 py-1 pr-2 font-medium">
                Position
              </th>
              <th scope="col" className="w-28 py-1 font-medium">
                East (m)
              </th>
              <th scope="col" className="w-28 py-1 font-medium">
                North (m)
              </th>
              <th scope="col" className="min-w-[220px] py-1 font-medium">
                In words
              </th>
            </tr>
          </thead>
          <tbody>
            {slots.map((slot) => (
              <tr key={slot.position} className="border-b border-rule-faint">
                <th scope="row" className="py-1 font-medium">
                  {slot.position}
                </th>
                {mayWrite ? (
                  <>
                    <td className="py-1 pr-2">
                      <MetresInput
                        label={`Position ${slot.position}, east`}
                        value={slot.roofX}
                        onValue={(roofX) => set(slot.position, { roofX })}
                      />
                    </td>
                    <td className="py-1 pr-2">
                      <MetresInput
                        label={`Position ${slot.position}, north`}
                        value={slot.roofY}
                        onValue={(roofY) => set(slot.position, { roofY })}
                      />
                    </td>
                    <td className="py-1">
                      <input
                        aria-label={`Position ${slot.position} in words`}
                        value={slot.roofPlace}
                        maxLength={200}
                        onChange={(event) => set(slot.position, { roofPlace: event.target.value })}
                        className="min-h-[44px] w-full rounded border border-rule bg-sheet px-2 text-[16px]"
                      />
                    </td>
                  </>
                ) : (
                  <>
                    <td className="py-1.5">{figure(slot.roofX)}</td>
                    <td className="py-1.5">{figure(slot.roofY)}</td>
                    <td className="py-1.5">{slot.roofPlace || '–'}</td>
                  </>
                )}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </Sheet>
  );
}
