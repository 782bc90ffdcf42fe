import { ordered, stopsOf, type Stop, type WalkString } from '../../domain/commissioning/walk';
import type { WalkedString } from '../../drawings/Walk';
import type { SlotNow, StringNow } from '../../schemas/api/now';
import type { WalkPage, WalkRoofString, WalkView } from '../../schemas/api/walk';
import { walkStops } from '../../words/walk';

export type { Stop, StopKind } from '../../domain/commissioning/walk';

type PlacedSlot = SlotNow & { roofX: number | null; roofY: number | null };
interface PlacedString extends StringNow {
  slots: PlacedSlot[];
}

const roofOf = (page: WalkPage): Map<string, WalkRoofString> =>
  new Map(page.roof.map((r) => [r.stringId, r]));

/** Strings as they hold now, each slot with its place on the roof. */
export function placedStrings(page: WalkPage): PlacedString[] {
  const roof = roofOf(page);
  const answered = new Set(page.answered);
  return page.strings.map((s) => {
    const places = roof.get(s.id);
    return {
      ...s,
      slots: s.slots.map((slot, i) => ({
        ...slot,
        // heard and not reported since: no longer unheard
        state: slot.state === 'unheard' && answered.has(slot.serial ?? '') ? null : slot.state,
        roofX: places?.x[i] ?? null,
        roofY: places?.y[i] ?? null,
      })),
    };
  });
}

/** Every stop of a site in the order of a short path. */
export function stopsOfPage(page: WalkPage): Stop[] {
  const strings: WalkString[] = placedStrings(page).map((s) => ({
    id: s.id,
    name: s.name,
    slots: s.slots,
    finding: s.finding?.kind ?? null,
  }));
  return ordered(stopsOf(strings, { rollCalled: page.rollCalled, answered: new Set(page.answered) }));
}

/** An address carries it as it is, and no string is called so. */
const BETWEEN = '*';
/** Keys of chosen stops as an address carries them; empty: all. */
export const keysOf = (view: Pick<WalkView, 'stops'>): Set<string> =>
  new Set(view.stops.split(BETWEEN).filter(Boolean));
export const stopsParam = (keys: Iterable<string>): string => [...keys].join(BETWEEN);

/** The stops of a view: those chosen, or all of a string's, or all. */
export function chosenStops(stops: readonly Stop[], view: WalkView): Stop[] {
  const keys = keysOf(view);
  const of = view.string === '' ? stops : stops.filter((s) => s.stringName === view.string);
  return keys.size === 0 ? [...of] : ordered(of.filter((s) => keys.has(s.key)));
}

/** What the drawing shows: every string, those with a stop in ink. */
export function drawnWalk(
  page: WalkPage,
  stops: readonly Stop[],
): { strings: WalkedString[]; walked: Set<string>; marked: Set<string>; route: { x: number; y: number }[] } {
  return {
    strings: placedStrings(page),
    walked: new Set(stops.map((s) => s.stringName)),
    marked: new Set(stops.map((s) => s.key)),
    route: stops.flatMap((s) => (s.at ? [s.at] : [])),
  };
}

export interface Spares {
  units: { type: string; count: number }[];
  /** Each pair of halves that the stops' joints take, by name; null: not entered in the catalogue. */
  connectors: { where: string; halves: [string | null, string | null] }[];
}

/** What to bring: a unit for each stop that may need one, and the connector types of each half. */
export function sparesOf(page: WalkPage, stops: readonly Stop[]): Spares {
  const roof = roofOf(page);
  const units = new Map<string, number>();
  const joints = new Map<string, Spares['connectors'][number]>();
  for (const stop of stops) {
    const string = roof.get(stop.stringId);
    if (!string) continue;
    units.set(string.unitType, (units.get(string.unitType) ?? 0) + 1);
    const { module, unitIn, unitOut } = string.connectors;
    for (const joint of [
      { where: walkStops.moduleToUnit, halves: [module, unitIn] as [string | null, string | null] },
      { where: walkStops.unitToUnit, halves: [unitOut, unitOut] as [string | null, string | null] },
    ])
      joints.set(`${joint.where} ${joint.halves.join()}`, joint);
  }
  return {
    units: [...units].map(([type, count]) => ({ type, count })),
    connectors: [...joints.values()],
  };
}

/** Strings with a stop, in the order of the walk, with what a meter should read there. */
export const readingsOf = (
  page: WalkPage,
  stops: readonly Stop[],
): { name: string; kind: StringNow['kind']; roof: WalkRoofString }[] => {
  const roof = roofOf(page);
  const ids = [...new Set(stops.map((s) => s.stringId))];
  return ids.flatMap((id) => {
    const string = page.strings.find((s) => s.id === id);
    const places = roof.get(id);
    return string && places ? [{ name: string.name, kind: string.kind, roof: places }] : [];
  });
};
