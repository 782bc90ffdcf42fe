import type { StringFinding, UnitState, Verdict } from '../verdicts/codes';

/** Where somebody on the roof has to go, and in which order. Metres, y to the north. */

export interface WalkSlot {
  position: number;
  serial: string | null;
  roofPlace: string;
  roofX: number | null;
  roofY: number | null;
  state: UnitState | null;
  verdict: Verdict | null;
}
export interface WalkString {
  id: string;
  name: string;
  slots: readonly WalkSlot[];
  finding: StringFinding | null;
}

/** Why one goes there; the gravest first. */
export const STOP_KINDS = ['not_shutting_down', 'stuck', 'silent', 'unheard', 'unplaced'] as const;
export type StopKind = (typeof STOP_KINDS)[number];

export interface Stop {
  /** "B3-5"; "B3" for a string of which no position is known. */
  key: string;
  stringId: string;
  stringName: string;
  /** null: the string as a whole, its positions unknown. */
  position: number | null;
  serial: string | null;
  roofPlace: string;
  at: { x: number; y: number } | null;
  kind: StopKind;
}

/**
 * What is out of order at a slot; null: nothing that asks for a visit.
 * @param rollCalled whether units were asked to answer: before that, unheard is how they come out of the box
 */
export function stopKindOf(slot: WalkSlot, rollCalled: boolean): StopKind | null {
  if (slot.serial === null) return 'unplaced';
  if (slot.verdict === 'not_shutting_down' || slot.verdict === 'stuck') return slot.verdict;
  if (slot.state === 'silent') return 'silent';
  return slot.state === 'unheard' && rollCalled ? 'unheard' : null;
}

/**
 * The exceptions of a site's strings, in the order in which strings and positions come.
 *
 * @param answered serials that have answered and may not have reported since: they are not unheard
 */
export function stopsOf(
  strings: readonly WalkString[],
  options: { rollCalled: boolean; answered: ReadonlySet<string> },
): Stop[] {
  return strings.flatMap((s) => {
    const stops = s.slots.flatMap((slot): Stop[] => {
      const kind = stopKindOf(slot, options.rollCalled);
      if (kind === null || (kind === 'unheard' && options.answered.has(slot.serial ?? ''))) return [];
      return [
        {
          key: `${s.name}-${slot.position}`,
          stringId: s.id,
          stringName: s.name,
          position: slot.position,
          serial: slot.serial,
          roofPlace: slot.roofPlace,
          at: slot.roofX === null || slot.roofY === null ? null : { x: slot.roofX, y: slot.roofY },
          kind,
        },
      ];
    });
    if (
      s.finding === null ||
      stops.some((stop) => stop.kind === 'not_shutting_down' || stop.kind === 'stuck')
    )
      return stops;
    const first = s.slots[0];
    return [
      {
        key: s.name,
        stringId: s.id,
        stringName: s.name,
        position: null,
        serial: null,
        roofPlace: first?.roofPlace ?? '',
        at: first?.roofX == null || first.roofY === null ? null : { x: first.roofX, y: first.roofY },
        kind: s.finding === 'not_shutting_down' ? 'not_shutting_down' : 'stuck',
      },
      ...stops,
    ];
  });
}

const apart = (a: { x: number; y: number }, b: { x: number; y: number }): number =>
  Math.hypot(a.x - b.x, a.y - b.y);

/** Metres walked along stops in their order; those without a place are left out. */
export function walkLength(stops: readonly Pick<Stop, 'at'>[]): number {
  const places = stops.flatMap((s) => (s.at ? [s.at] : []));
  return places.reduce((sum, p, i) => (i === 0 ? 0 : sum + apart(places[i - 1]!, p)), 0);
}

/** Beyond this many stops starting points are tried from a few only. */
const STARTS_MAX = 24;

/**
 * Stops in the order of a short path over the roof, open at both ends: from every start the nearest neighbour next,
 * then stretches turned round as long as that shortens it (2-opt, Croes 1958). Stops without a place come last.
 */
export function ordered<S extends Pick<Stop, 'at' | 'key'>>(stops: readonly S[]): S[] {
  const placed = stops.filter((s) => s.at !== null);
  const rest = stops.filter((s) => s.at === null);
  const step = Math.max(1, Math.ceil(placed.length / STARTS_MAX));
  let best = placed;
  let bestLength = walkLength(placed);
  for (let start = 0; start < placed.length; start += step) {
    const path = turned(nearestFirst(placed, start));
    const length = walkLength(path);
    if (length < bestLength - 1e-9) [best, bestLength] = [path, length];
  }
  return [...turned(best), ...rest];
}

function nearestFirst<S extends Pick<Stop, 'at'>>(stops: readonly S[], start: number): S[] {
  const left = [...stops];
  const path = left.splice(start, 1);
  while (left.length > 0) {
    const here = path[path.length - 1]!.at!;
    let next = 0;
    for (let i = 1; i < left.length; i++)
      if (apart(here, left[i]!.at!) < apart(here, left[next]!.at!)) next = i;
    path.push(...left.splice(next, 1));
  }
  return path;
}

function turned<S extends Pick<Stop, 'at'>>(stops: readonly S[]): S[] {
  let path = [...stops];
  const place = (i: number) => path[i]?.at ?? null;
  for (let better = true; better;) {
    better = false;
    for (let i = 0; i < path.length - 1; i++)
      for (let j = i + 1; j < path.length; j++) {
        // turning round i … j exchanges the steps before i and after j; the ends of the path have none
        const [before, first, last, after] = [place(i - 1), place(i)!, place(j)!, place(j + 1)];
        const was = (before ? apart(before, first) : 0) + (after ? apart(last, after) : 0);
        const now = (before ? apart(before, last) : 0) + (after ? apart(first, after) : 0);
        if (now < was - 1e-9) {
          path = [...path.slice(0, i), ...path.slice(i, j + 1).reverse(), ...path.slice(j + 1)];
          better = true;
        }
      }
  }
  return path;
}
