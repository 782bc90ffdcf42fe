import { conditionOf, rise, type Condition, type DrawnSlot } from './condition';

export interface Tooth {
  position: number;
  condition: Condition;
  assumed: boolean;
  x: number;
  width: number;
  /** px from the base line up */
  height: number;
}
export interface CombGeometry {
  width: number;
  height: number;
  teeth: Tooth[];
  /** Wide enough for a sign above a low bar. */
  roomy: boolean;
}

/** Pitch in px: 18 where there is room, and never less than 3, so that a bar of 2 px and its gap remain. */
export const pitchFor = (units: number, width: number): number =>
  Math.max(3, Math.min(18, Math.floor(width / Math.max(1, units))));

const LOW = 3;

/** One bar a slot, its height its voltage over what is expected. Pure. */
export function combGeometry(slots: readonly DrawnSlot[], width: number, height: number): CombGeometry {
  const pitch = pitchFor(slots.length, width);
  const gap = pitch >= 10 ? 4 : pitch >= 4 ? 2 : 1;
  const full = height - 2;
  const known = slots.map((s) => s.expected ?? 0).filter((v) => v > 0);
  const typical = known.length > 0 ? known.reduce((a, b) => a + b, 0) / known.length : null;
  const highest = Math.max(1, ...slots.map((s) => rise(s) ?? 0));
  const teeth = slots.map((slot, i): Tooth => {
    const condition = conditionOf(slot);
    const up = rise(slot);
    const ratio = up === null ? 1 : up / (slot.expected || typical || highest);
    const tall = Math.max(0.12, Math.min(1.05, ratio)) * full * 0.95;
    const low = condition === 'stuck' || condition === 'shutdown' || condition === 'dark';
    return {
      position: slot.position,
      condition,
      assumed: slot.assumed,
      x: i * pitch,
      width: pitch - gap,
      height: condition === 'empty' ? 0 : low ? LOW : tall,
    };
  });
  return { width: slots.length * pitch, height, teeth, roomy: pitch - gap >= 8 };
}
