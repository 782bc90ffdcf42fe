import type { ConnectorIdentity, DocumentedPair } from '../../equipment/connectors';
import type { InverterSheet } from '../../equipment/inverter-type';
import type { ModuleSheet } from '../../equipment/module-type';
import type { UnitSheet } from '../../equipment/unit-type';
import type { RuleSet } from '../../verdicts/context';
import type { StringDesign, Structure } from './design';
import type { DesignTemperatures } from './design-temperatures';

/** A string as built, with the types that stand on it. */
export interface BuiltString {
  id: string;
  name: string;
  unit: UnitSheet;
  /** In order of position: the module's type, and the name of the unit type that sits there; null: no unit recorded. */
  slots: readonly { position: number; module: ModuleSheet; unitTypeName: string | null }[];
  input: { id: string; name: string };
  inverter: InverterSheet | null;
  plane: { name: string; surfaceTilt: number; surfaceAzimuth: number };
  homeRunLeavesArray: boolean;
}

export interface BuiltSite {
  ruleSet: RuleSet;
  structure: Structure;
  temperatures: DesignTemperatures;
  strings: readonly BuiltString[];
  /** By the identifiers that modules and units name. */
  connectors: ReadonlyMap<string, ConnectorIdentity>;
  pairs: readonly DocumentedPair[];
}

/** Modules of a string by type. */
export function modulesOf(string: Pick<BuiltString, 'slots'>): StringDesign['modules'] {
  const counts = new Map<string, { type: ModuleSheet; count: number }>();
  for (const { module } of string.slots) {
    const known = counts.get(module.name);
    if (known) known.count += 1;
    else counts.set(module.name, { type: module, count: 1 });
  }
  return [...counts.values()];
}

/** isc and imp of a string at STC, A: the lowest module sets imp, the highest isc is what may flow. */
export const currentsOf = (string: Pick<BuiltString, 'slots'>): { iscRef: number; impRef: number } => ({
  iscRef: Math.max(...string.slots.map((s) => s.module.iscRef)),
  impRef: Math.min(...string.slots.map((s) => s.module.impRef)),
});
