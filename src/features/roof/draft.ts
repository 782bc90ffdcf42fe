import { within, type Outline } from '../../domain/commissioning/roof/outline';
import type { RoofPlan, RoofSave, RoofSlot, RoofString } from '../../schemas/api/roof';
import { roofDraft } from '../../words/roof';

/** A roof as it is being drawn: what the server has, and what has changed since. */
export interface Draft {
  outline: Outline;
  /** Slots of strings that were laid or edited, by string. */
  slots: Readonly<Record<string, readonly RoofSlot[]>>;
}
export interface Drawing {
  past: readonly Draft[];
  now: Draft;
  future: readonly Draft[];
}
const STEPS_MAX = 100;

export const draftOf = (plan: RoofPlan): Draft => ({ outline: plan.outline, slots: {} });
export const begin = (draft: Draft): Drawing => ({ past: [], now: draft, future: [] });

/** `joined`: the change goes on from the one before (a point on its way), and is undone with it. */
export const change = (drawing: Drawing, some: Partial<Draft>, joined = false): Drawing => ({
  past: joined ? drawing.past : [...drawing.past.slice(1 - STEPS_MAX), drawing.now],
  now: { ...drawing.now, ...some },
  future: [],
});
export function undo({ past, now, future }: Drawing): Drawing {
  const before = past.at(-1);
  return before ? { past: past.slice(0, -1), now: before, future: [now, ...future] } : { past, now, future };
}
export function redo({ past, now, future }: Drawing): Drawing {
  const [next, ...rest] = future;
  return next ? { past: [...past, now], now: next, future: rest } : { past, now, future };
}

export const slotsOf = (draft: Draft, string: RoofString): readonly RoofSlot[] =>
  draft.slots[string.id] ?? string.slots;

export const isPlaced = (slots: readonly RoofSlot[]): boolean =>
  slots.some((s) => s.roofX !== null && s.roofY !== null);

const sameSlots = (a: readonly RoofSlot[], b: readonly RoofSlot[]): boolean =>
  JSON.stringify(a) === JSON.stringify(b);
const sameOutline = (a: Outline, b: Outline): boolean => JSON.stringify(a) === JSON.stringify(b);

/** What differs from what the server has. */
export const changedStrings = (plan: RoofPlan, draft: Draft): RoofString[] =>
  plan.strings.filter((s) => {
    const drawn = draft.slots[s.id];
    return drawn !== undefined && !sameSlots(drawn, s.slots);
  });
export const outlineChanged = (plan: RoofPlan, draft: Draft): boolean =>
  !sameOutline(plan.outline, draft.outline);

/** The one request that keeps all of it. */
export function saveOf(plan: RoofPlan, draft: Draft, reason: string): RoofSave {
  return {
    outline: outlineChanged(plan, draft)
      ? { points: draft.outline.map(([x, y]): [number, number] => [x, y]), seen: plan.outlineVersion }
      : null,
    strings: changedStrings(plan, draft).map((s) => ({
      id: s.id,
      seen: s.version,
      slots: slotsOf(draft, s).map((slot) => ({ ...slot })),
    })),
    reason,
  };
}

interface Spot {
  x: number;
  y: number;
}
export const spotsOf = (slots: readonly RoofSlot[]): (Spot & { position: number })[] =>
  slots.flatMap((s) =>
    s.roofX === null || s.roofY === null ? [] : [{ position: s.position, x: s.roofX, y: s.roofY }],
  );

/** What an eye would see at once: modules beyond the edge, and modules upon others. */
export function remarks(plan: RoofPlan, draft: Draft): string[] {
  const list: string[] = [];
  const drawn = plan.strings.map((s) => ({ string: s, spots: spotsOf(slotsOf(draft, s)) }));
  for (const { string, spots } of drawn) {
    const outside = spots.filter((p) => !within(draft.outline, p)).length;
    if (outside > 0) list.push(roofDraft.ofOutsideTheOutline(outside, string.name));
  }
  drawn.forEach(({ string, spots }, i) => {
    for (const other of drawn.slice(i + 1)) {
      const close = 0.4 * Math.min(string.moduleWidth, other.string.moduleWidth);
      if (
        spots.some((a) => other.spots.some((b) => Math.abs(a.x - b.x) < close && Math.abs(a.y - b.y) < close))
      )
        list.push(roofDraft.andLieUponEach(string.name, other.string.name));
    }
  });
  return list;
}

/** A point moved or set, in decimetres; finer only as typed. */
export const toDecimetre = (m: number): number => Math.round(m * 10) / 10 + 0;

/** Where a new point goes: into the side that it is nearest to, or at the end of an outline that is not closed yet. */
export function insertPoint(outline: Outline, point: readonly [number, number]): Outline {
  if (outline.length < 3) return [...outline, point];
  let best = { at: outline.length, distance: Infinity };
  outline.forEach(([ax, ay], i) => {
    const [bx, by] = outline[(i + 1) % outline.length] ?? [ax, ay];
    const [dx, dy] = [bx - ax, by - ay];
    const t = Math.max(
      0,
      Math.min(1, ((point[0] - ax) * dx + (point[1] - ay) * dy) / (dx * dx + dy * dy || 1)),
    );
    const distance = Math.hypot(point[0] - ax - t * dx, point[1] - ay - t * dy);
    if (distance < best.distance) best = { at: i + 1, distance };
  });
  return [...outline.slice(0, best.at), point, ...outline.slice(best.at)];
}

/** A rectangle whose first corner lies at 0, 0: `width` runs `turned` degrees clockwise from east. */
export function rectangle(width: number, depth: number, turned: number): Outline {
  const a = (-turned * Math.PI) / 180;
  const [c, s] = [Math.cos(a), Math.sin(a)];
  return [
    [0, 0],
    [width, 0],
    [width, depth],
    [0, depth],
  ].map(([x = 0, y = 0]): [number, number] => [toCentimetre(c * x - s * y), toCentimetre(s * x + c * y)]);
}
const toCentimetre = (m: number): number => Math.round(m * 100) / 100 + 0;
