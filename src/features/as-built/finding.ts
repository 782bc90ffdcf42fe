import { reports, type PartKind } from '../../domain/commissioning/as-built/parts';
import { counted, number } from '../../drawings/numbers';
import type { AsBuilt, AsBuiltView, StringBuilt } from '../../schemas/api/as-built';
import { nameOf } from '../../schemas/as-built-values';

export const gapsOf = (string: StringBuilt): number => string.slots.filter((s) => s.serial === null).length;

/** What is found of an as-built, and what follows from it. */
export function asBuiltFinding(built: Omit<AsBuilt, 'at'>): { heading: string; sentence: string } {
  const { strings } = built;
  if (strings.length === 0) {
    const missing = missingForStrings(built);
    return {
      heading: 'No strings are drawn yet',
      sentence:
        missing.length > 0
          ? `Before a string can be entered, this site needs ${listed(missing.map((m) => m.words))}.`
          : 'Add strings here, or read them from a file.',
    };
  }
  const slots = strings.reduce((sum, s) => sum + s.slots.length, 0);
  const gaps = strings.reduce((sum, s) => sum + gapsOf(s), 0);
  const heading = `${counted(strings.length, 'string')}, ${counted(slots, 'slot')}; ${
    gaps === 0
      ? 'every slot has a serial'
      : gaps === slots
        ? 'no slot has a serial yet'
        : `${number(gaps)} ${gaps === 1 ? 'slot has' : 'slots have'} no serial`
  }`;
  const mute = built.loggers.filter((l) => l.tokenAt === null);
  if (mute.length > 0)
    return {
      heading,
      sentence: `Logger ${mute.map((l) => l.serial).join(', ')} has no token and cannot report. Make one.`,
    };
  return {
    heading,
    sentence:
      gaps > 0
        ? 'A unit whose serial is not here is heard at the roll call as unknown. Type them, read them on site, or take them from a file.'
        : 'Go on with the design checks, then with the roll call.',
  };
}

export interface Missing {
  words: string;
  /** What is added here to have it; null: in the catalogue. */
  add: PartKind[];
}

/** What a site needs before a string can stand on it. */
export function missingForStrings(built: Omit<AsBuilt, 'at'>): Missing[] {
  const { unitTypes, moduleTypes } = built.catalogue;
  const needs: Missing[] = [];
  if (!unitTypes.some((t) => !t.archived)) needs.push({ words: 'a unit type in the catalogue', add: [] });
  if (!moduleTypes.some((t) => !t.archived)) needs.push({ words: 'a module type in the catalogue', add: [] });
  if (built.planes.length === 0) needs.push({ words: 'a plane', add: ['plane'] });
  if (built.inverters.length === 0) needs.push({ words: 'an inverter', add: ['inverter'] });
  if (built.zones.length === 0) needs.push({ words: 'a zone', add: ['zone'] });
  const kinds = unitTypes.filter((t) => !t.archived).map((t) => t.kind);
  const onlyMute = kinds.length > 0 && kinds.every((k) => !reports(k));
  if (built.loggers.length === 0 && built.transmitters.length === 0)
    needs.push(
      onlyMute
        ? { words: 'a transmitter', add: ['transmitter'] }
        : { words: 'a logger or a transmitter', add: ['logger', 'transmitter'] },
    );
  return needs;
}

export const listed = (words: readonly string[]): string =>
  words.length < 2 ? words.join('') : `${words.slice(0, -1).join(', ')} and ${words.at(-1) ?? ''}`;

const byName = new Intl.Collator('en', { numeric: true, sensitivity: 'base' });

/** The strings of a view: found by name, serial or place on the roof, filtered and sorted. */
export function listedStrings(built: AsBuilt, view: AsBuiltView): StringBuilt[] {
  const find = view.find.trim().toLowerCase();
  const has = (text: string | null) => text !== null && text.toLowerCase().includes(find);
  const name = new Map(built.strings.map((s) => [s.id, s.name]));
  const key: Record<AsBuiltView['sort'], (a: StringBuilt, b: StringBuilt) => number> = {
    name: () => 0,
    slots: (a, b) => a.slots.length - b.slots.length,
    gaps: (a, b) => gapsOf(a) - gapsOf(b),
    plane: (a, b) =>
      byName.compare(nameOf(built, 'plane', a.plane) ?? '', nameOf(built, 'plane', b.plane) ?? ''),
    input: (a, b) =>
      byName.compare(nameOf(built, 'input', a.input) ?? '', nameOf(built, 'input', b.input) ?? ''),
  };
  const sign = view.order === 'down' ? -1 : 1;
  const names = (a: StringBuilt, b: StringBuilt) =>
    byName.compare(name.get(a.id) ?? '', name.get(b.id) ?? '');
  return built.strings
    .filter((s) => view.show === 'all' || gapsOf(s) > 0)
    .filter(
      (s) => find === '' || has(s.name) || s.slots.some((slot) => has(slot.serial) || has(slot.roofPlace)),
    )
    .sort((a, b) => sign * (key[view.sort](a, b) || (view.sort === 'name' ? names(a, b) : 0)) || names(a, b));
}
