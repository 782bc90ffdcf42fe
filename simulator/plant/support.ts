import { MODULE_TYPES, UNIT_TYPES } from '../scenarios/catalogue';
import { DEMO_SEED, demoFleet, demoSite } from '../scenarios/demo';
import type { Fault } from '../faults/kinds';
import { SitePlant } from './site-plant';
import type { Mode } from './string-plant';
import { MODES } from './string-plant';

/** A moment at which the demo's sites stand where their stories want them. */
export const SINCE = Date.UTC(2026, 11, 1, 10) / 1000;
const fleet = demoFleet(DEMO_SEED, SINCE);

/** One site of the demo without its own faults and open switches, run to `fromS`. */
export function plantOf(name: string, fromS = SINCE, faults: Fault[] = []): SitePlant {
  const site = { ...demoSite(fleet, name), faults: [], openInitiators: [] };
  const plant = new SitePlant(site, { modules: MODULE_TYPES, units: UNIT_TYPES }, DEMO_SEED, SINCE, fromS);
  for (const f of faults) plant.faults.add(f, fromS - 7200);
  plant.step(fromS);
  return plant;
}

/** Steps second by second, as the running simulator does. */
export function run(plant: SitePlant, seconds: number): void {
  const fromS = plant.atS;
  for (let i = 1; i <= seconds; i++) plant.step(fromS + i);
}

export const modesOf = (plant: SitePlant, string: string): Mode[] =>
  Array.from(plant.byName.get(string)?.mode ?? [], (m) => MODES[m] ?? 'unpowered');

export const stringOf = (plant: SitePlant, name: string) => {
  const found = plant.byName.get(name);
  if (!found) throw new Error(`The plant has no string ${name}.`);
  return found;
};
