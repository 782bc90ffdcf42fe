import type { ModuleType } from '../../src/domain/equipment/module-type';
import { moduleSheetOf } from '../../src/domain/equipment/module-fields';
import { starterEquipment } from '../../src/domain/equipment/starter';
import { unitSheetOf } from '../../src/domain/equipment/unit-fields';
import type { UnitType } from '../../src/domain/equipment/unit-type';

/** Equipment of our own invention, with figures of the size that such equipment has: the starter set, and more of it. */

const STARTER = starterEquipment();
const MODULES = STARTER.modules.map(moduleSheetOf);
const UNITS = STARTER.units.map(unitSheetOf);

/** A type of the starter set by its name. */
function starter<T extends { name: string }>(types: readonly T[], name: string): T {
  const found = types.find((t) => t.name === name);
  if (!found) throw new Error(`The starter set has no type "${name}".`);
  return found;
}

export const [BOTH_SIDES, OUTPUT_SIDE, HOLDING, ON_KEEP_ALIVE, SHUTDOWN_ONLY, OPTIMIZING] = [
  'Reporting unit, both sides',
  'Reporting unit, output side',
  'Reporting unit that holds',
  'Reporting unit on keep-alive',
  'Shutdown unit',
  'Optimizing unit',
] as const;
export const [MONO_450, MONO_430, POLY_285] = [
  'Mono 450, 144 half cells',
  'Mono 430, 108 half cells',
  'Poly 285, 60 cells',
] as const;

export const MODULE_TYPES: ModuleType[] = [MONO_450, MONO_430, POLY_285].map((name) =>
  starter(MODULES, name),
);

const REPORTING = starter(UNITS, OUTPUT_SIDE);
export const UNIT_TYPES: UnitType[] = [
  starter(UNITS, BOTH_SIDES),
  REPORTING,
  { ...REPORTING, name: HOLDING, onCommandLoss: 'holds' },
  {
    ...starter(UNITS, BOTH_SIDES),
    name: ON_KEEP_ALIVE,
    outOfBox: 'shutdown',
    releasedBy: 'keep_alive',
  },
  starter(UNITS, SHUTDOWN_ONLY),
  starter(UNITS, OPTIMIZING),
];
