import type { InverterSheet } from '../../equipment/inverter-type';
import type { ModuleSheet } from '../../equipment/module-type';
import type { UnitSheet } from '../../equipment/unit-type';
import type { RuleSet } from '../../verdicts/context';
import type { DesignTemperatures } from './design-temperatures';

export type Structure = 'one_or_two_family_dwelling' | 'other_building' | 'not_on_building';

/** One string as drawn, with what stands at both of its ends. */
export interface StringDesign {
  /** By type, at least one module. */
  modules: readonly { type: ModuleSheet; count: number }[];
  unit: UnitSheet;
  /** null: the inverter has no type of the catalogue yet. */
  inverter: InverterSheet | null;
  /** All strings of its input, itself among them: isc and imp of each at STC, A. */
  onInput: readonly { iscRef: number; impRef: number }[];
  ruleSet: RuleSet;
  structure: Structure;
  homeRunLeavesArray: boolean;
  temperatures: DesignTemperatures;
}

export const moduleCount = (modules: StringDesign['modules']): number =>
  modules.reduce((n, m) => n + m.count, 0);
