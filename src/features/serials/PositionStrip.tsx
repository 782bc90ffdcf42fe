import { Sheet } from '../../components/ui/Sheet';
import type { WalkString } from './model';
import { positionStrip } from '../../words/serials';

interface Props {
  string: WalkString;
  position: number;
  onGo: (position: number) => void;
}

/** The string's positions from its negative end: filled where a serial is known, and where the reader is. */
export function PositionStrip({ string, position, onGo }: Props) {
  return (
    <Sheet id="positions" title={positionStrip.positionsOf(string.name)} aside={positionStrip.n1IsAtThe}>
      <ol className="flex flex-wrap gap-1">
        {string.slots.map((slot) => {
          const here = slot.position === position;
          const filled = slot.serial !== null;
          return (
            <li key={slot.position}>
              <button
                type="button"
                aria-current={here ? 'step' : undefined}
                aria-label={positionStrip.positionSerial(slot.position, slot.serial)}
                title={slot.serial ?? positionStrip.noSerialYet}
                onClick={() => onGo(slot.position)}
                className={`min-h-[44px] min-w-[44px] rounded border text-[15px] font-medium ${filled ? 'border-ink bg-ink text-sheet' : 'border-dashed border-ink-3 bg-sheet text-ink-2'} ${here ? 'outline outline-[3px] outline-offset-1 outline-petrol' : ''}`}
              >
                {slot.position}
              </button>
            </li>
          );
        })}
      </ol>
    </Sheet>
  );
}
