import { listed } from '../../drawings/numbers';
import type { CauseNow } from '../../schemas/api/now';
import { sharedCausesPlaces } from '../../words/shared-causes';

type Unit = CauseNow['units'][number];

/** A string of a cause with the positions concerned; none: the string as a whole, its positions unknown. */
export interface Place {
  stringId: string;
  stringName: string;
  positions: number[];
}

const byName = new Intl.Collator('en', { numeric: true });

/** The units of a cause by string, strings by name, positions in order. */
export function placesOf(units: readonly Unit[]): Place[] {
  const places = new Map<string, Place>();
  for (const unit of units) {
    let place = places.get(unit.stringId);
    if (!place)
      places.set(
        unit.stringId,
        (place = { stringId: unit.stringId, stringName: unit.stringName, positions: [] }),
      );
    if (unit.position !== null) place.positions.push(unit.position);
  }
  for (const place of places.values()) place.positions.sort((a, b) => a - b);
  return [...places.values()].sort((a, b) => byName.compare(a.stringName, b.stringName));
}

/** So many positions are named one by one; more are counted. */
const NAMED_MAX = 8;

/** "positions 3 and 11", "14 units", "positions unknown". */
export function positionsInWords(positions: readonly number[]): string {
  if (positions.length === 0) return sharedCausesPlaces.positionsUnknown;
  if (positions.length > NAMED_MAX) return sharedCausesPlaces.countedPositionsUnit(positions.length);
  return `${positions.length === 1 ? sharedCausesPlaces.position : sharedCausesPlaces.positions} ${listed(positions)}`;
}

/** "string C2, positions 3 and 11", "strings D1 and D2, 20 units", "12 strings, 168 units". */
export function placesInWords(units: readonly Unit[]): string {
  const places = placesOf(units);
  const first = places[0];
  if (!first) return '';
  if (places.length === 1)
    return sharedCausesPlaces.stringNamePositions(first.stringName, positionsInWords(first.positions));
  const known = units.filter((u) => u.position !== null).length;
  const names =
    places.length <= 4
      ? sharedCausesPlaces.stringsListedSaid(listed(places.map((p) => p.stringName)))
      : sharedCausesPlaces.countedPlacesString(places.length);
  return known > 0 ? `${names}, ${sharedCausesPlaces.countedKnownUnit(known)}` : names;
}

/** "Two units", "One string", "Two units and one string": what a cause concerns, to begin a sentence. */
export function concerned(units: readonly Unit[]): { units: number; strings: number } {
  return {
    units: units.filter((u) => u.position !== null).length,
    strings: new Set(units.filter((u) => u.position === null).map((u) => u.stringId)).size,
  };
}
