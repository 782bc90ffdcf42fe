import { reports, type PartKind } from '../../domain/commissioning/as-built/parts';
import type { AsBuilt, AsBuiltView, StringBuilt } from '../../schemas/api/as-built';
import { nameOf } from '../../schemas/as-built-values';
import { asBuiltFindingWords } from '../../words/as-built';

export const gapsOf = (string: StringBuilt): number => string.slots.filter((s) => s.serial === null).length;

/** What is found of an as-built, and what follows from it. */
export function asBuiltFinding(built: Omit<AsBuilt, 'at'>): { heading: string; sentence: string } {
  const { strings } = built;
  if (strings.length === 0) {
    const missing = missingForStrings(built);
    return {
      heading: asBuiltFindingWords.noStringsAreDrawn,
      sentence:
        missing.length > 0
          ? asBuiltFindingWords.beforeStringCanBe(listed(missing.map((m) => m.words)))
          : asBuiltFindingWords.addStringsHereOr,
    };
  }
  const slots = strings.reduce((sum, s) => sum + s.slots.length, 0);
  const gaps = strings.reduce((sum, s) => sum + gapsOf(s), 0);
  const heading = `${asBuiltFindingWords.countedStringsString(strings.length)}, ${asBuiltFindingWords.countedSlotsSlot(slots)}; ${
    gaps === 0
      ? asBuiltFindingWords.everySlotHasA
      : gaps === slots
        ? asBuiltFindingWords.noSlotHasA
        : asBuiltFindingWords.noSerial(gaps)
  }`;
  const mute = built.loggers.filter((l) => l.tokenAt === null);
  if (mute.length > 0)
    return {
      heading,
      sentence: asBuiltFindingWords.loggerHasNoToken(mute.map((l) => l.serial).join(', ')),
    };
  return {
    heading,
    sentence: gaps > 0 ? asBuiltFindingWords.aUnitWhoseSerial : asBuiltFindingWords.goOnWithThe,
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
  if (!unitTypes.some((t) => !t.archived)) needs.push({ words: asBuiltFindingWords.aUnitTypeIn, add: [] });
  if (!moduleTypes.some((t) => !t.archived))
    needs.push({ words: asBuiltFindingWords.aModuleTypeIn, add: [] });
  if (built.planes.length === 0) needs.push({ words: asBuiltFindingWords.aPlane, add: ['plane'] });
  if (built.inverters.length === 0) needs.push({ words: asBuiltFindingWords.anInverter, add: ['inverter'] });
  if (built.zones.length === 0) needs.push({ words: asBuiltFindingWords.aZone, add: ['zone'] });
  const kinds = unitTypes.filter((t) => !t.archived).map((t) => t.kind);
  const onlyMute = kinds.length > 0 && kinds.every((k) => !reports(k));
  if (built.loggers.length === 0 && built.transmitters.length === 0)
    needs.push(
      onlyMute
        ? { words: asBuiltFindingWords.aTransmitter, add: ['transmitter'] }
        : { words: asBuiltFindingWords.aLoggerOrA, add: ['logger', 'transmitter'] },
    );
  return needs;
}

export const listed = (words: readonly string[]): string =>
  words.length < 2
    ? words.join('')
    : asBuiltFindingWords.wordsAndAt(words.slice(0, -1).join(', '), words.at(-1));

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
