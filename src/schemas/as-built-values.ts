import { partNames } from '../words/domain-as-built-parts';
import type { NamedKind, PartKind } from '../domain/commissioning/as-built/parts';
import type { AsBuilt, PartValues } from './api/as-built';

/** A part of an as-built by the keys of its fields: what a form begins with, and what an edit is held against. */

type Parts = Omit<AsBuilt, 'at'>;

/** The module type that all slots of a string have; null: they differ. */
export function moduleTypeOf(string: Parts['strings'][number]): string | null {
  const [first] = string.slots;
  return first && string.slots.every((s) => s.moduleType === first.moduleType) ? first.moduleType : null;
}

/** undefined: it is not there (any more). */
export function partOf(parts: Parts, kind: PartKind, id: string): PartValues | undefined {
  const by = <T extends { id: string }>(list: readonly T[]): T | undefined => list.find((p) => p.id === id);
  switch (kind) {
    case 'site': {
      if (parts.site.id !== id) return undefined;
      const { id: _id, stage: _stage, ...values } = parts.site;
      return values;
    }
    case 'inverter': {
      const found = by(parts.inverters);
      if (!found) return undefined;
      const { id: _id, inputs, ...values } = found;
      return { ...values, inputs: inputs.length };
    }
    case 'string': {
      const found = by(parts.strings);
      if (!found) return undefined;
      const { id: _id, kind: _kind, slots, ...values } = found;
      return { ...values, slots: slots.length, moduleType: moduleTypeOf(found) };
    }
    case 'plane':
      return without(by(parts.planes));
    case 'initiator':
      return without(by(parts.initiators));
    case 'zone':
      return without(by(parts.zones));
    case 'transmitter':
      return without(by(parts.transmitters));
    case 'logger': {
      const found = by(parts.loggers);
      return found && { serial: found.serial };
    }
    case 'sensor':
      return without(by(parts.sensors));
  }
}

function without<T extends PartValues & { id: string }>(part: T | undefined): PartValues | undefined {
  if (!part) return undefined;
  const { id: _id, ...values } = part;
  return values;
}

/** What a field may name at this site, in the order of a list. Archived types only where `keep` names them. */
export function namedOptions(
  parts: Parts,
  of: NamedKind,
  keep: readonly string[] = [],
): { id: string; name: string }[] {
  const offered = (types: readonly { id: string; name: string; archived: boolean }[]) =>
    types
      .filter((t) => !t.archived || keep.includes(t.id))
      .map((t) => ({ id: t.id, name: t.archived ? partNames.archived(t.name) : t.name }));
  switch (of) {
    case 'input':
      return parts.inverters.flatMap((v) =>
        v.inputs.map((i) => ({ id: i.id, name: partNames.input(v.name, i.number) })),
      );
    case 'logger':
      return parts.loggers.map((l) => ({ id: l.id, name: l.serial }));
    case 'plane':
      return parts.planes;
    case 'initiator':
      return parts.initiators;
    case 'zone':
      return parts.zones;
    case 'transmitter':
      return parts.transmitters;
    case 'string':
      return parts.strings;
    case 'unit_type':
      return offered(parts.catalogue.unitTypes);
    case 'module_type':
      return offered(parts.catalogue.moduleTypes);
    case 'inverter_type':
      return offered(parts.catalogue.inverterTypes);
  }
}

/** The name of what a field names; undefined: it is not at this site or in the catalogue. */
export const nameOf = (parts: Parts, of: NamedKind, id: string): string | undefined =>
  namedOptions(parts, of, [id]).find((o) => o.id === id)?.name;

/** What a part is called. */
export function labelOf(parts: Parts, kind: PartKind, values: PartValues): string {
  if (kind === 'logger') return String(values.serial ?? '');
  if (kind === 'sensor')
    return partNames.sensor(
      nameOf(parts, 'logger', String(values.logger ?? '')),
      String(values.number ?? ''),
    );
  return String(values.name ?? '');
}
