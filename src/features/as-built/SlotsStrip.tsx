import type { SlotBuilt } from '../../schemas/api/as-built';

const WIDTH = 5;
const GAP = 2;

/** A string's slots in one table row: a bar where a serial is, a dashed outline where none is yet. */
export function SlotsStrip({ slots }: { slots: readonly SlotBuilt[] }) {
  const width = slots.length * (WIDTH + GAP);
  return (
    <svg
      viewBox={`0 0 ${width} 16`}
      width={width}
      height="16"
      aria-hidden="true"
      className="block max-w-full"
      preserveAspectRatio="xMinYMid meet"
    >
      {slots.map((slot, i) =>
        slot.serial === null ? (
          <rect
            key={slot.position}
            x={i * (WIDTH + GAP) + 0.5}
            y="1.5"
            width={WIDTH - 1}
            height="13"
            fill="none"
            stroke="var(--ink-3)"
            strokeDasharray="2 1.5"
          />
        ) : (
          <rect key={slot.position} x={i * (WIDTH + GAP)} y="1" width={WIDTH} height="14" fill="var(--ink)" />
        ),
      )}
    </svg>
  );
}
