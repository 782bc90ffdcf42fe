import type { EquipmentFamily } from '../../domain/equipment/families';
import type { Entry } from '../../domain/equipment/fields';
import { inverterSheetOf } from '../../domain/equipment/inverter-type';
import { moduleSheetOf } from '../../domain/equipment/module-fields';
import { unitSheetOf } from '../../domain/equipment/unit-fields';
import { designTemperatures } from '../../domain/photovoltaics/limits/design-temperatures';
import type { BuiltString } from '../../domain/photovoltaics/limits/built-site';
import { checkSiteDesign } from '../../domain/photovoltaics/limits/site-design';
import type { SiteDesign } from '../../schemas/api/design';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { designSite, designStrings } from '../queries/design';
import { catalogueRows, connectorPairs, connectorTypes } from '../queries/equipment';
import { visibleSite } from '../queries/visible-site';

async function sheets<T>(tx: Tx, family: EquipmentFamily, of: (entry: Entry) => T): Promise<Map<string, T>> {
  return new Map((await catalogueRows(tx, family)).map((row) => [row.id, of(row.entry)]));
}

/** The value under a key that a foreign key promises. */
function held<T>(map: ReadonlyMap<string, T>, ref: string): T {
  const value = map.get(ref);
  if (value === undefined) throw new Error(`The catalogue has no entry ${ref}.`);
  return value;
}

/**
 * Every design check of a site as it is built at an instant, exceeded first. Arithmetic over what is entered, never an
 * approval.
 *
 * @throws AppError not_found
 */
export async function designFindings(tx: Tx, siteId: number, at: Date): Promise<SiteDesign> {
  const site = found(await designSite(tx, siteId), 'site');
  const modules = await sheets(tx, 'modules', moduleSheetOf);
  const units = await sheets(tx, 'units', unitSheetOf);
  const inverters = await sheets(tx, 'inverters', inverterSheetOf);
  const connectors = new Map((await connectorTypes(tx)).map((c) => [c.id, c]));
  const pairs = await connectorPairs(tx);
  const rows = await designStrings(tx, siteId, at);
  const temperatures = designTemperatures(site);
  const strings = rows.map((row): BuiltString => ({
    id: row.id,
    name: row.name,
    unit: held(units, row.unitType),
    inverter: row.inverterType === null ? null : held(inverters, row.inverterType),
    input: { id: row.inputId, name: row.inputName },
    plane: { name: row.planeName, surfaceTilt: row.surfaceTilt, surfaceAzimuth: row.surfaceAzimuth },
    homeRunLeavesArray: row.homeRunLeavesArray,
    slots: row.slots.map((s) => ({
      position: s.position,
      module: held(modules, s.module),
      unitTypeName: s.unitTypeName,
    })),
  }));
  const findings = checkSiteDesign({
    ruleSet: site.ruleSet,
    structure: site.structure,
    temperatures,
    strings,
    connectors,
    pairs,
  });
  return {
    at: at.toISOString(),
    siteId: site.ref,
    siteName: site.name,
    timeZone: site.timeZone,
    stage: site.stage,
    ruleSet: site.ruleSet,
    structure: site.structure,
    temperatures,
    strings: strings.length,
    stringsWithoutSlots: strings.filter((s) => s.slots.length === 0).map((s) => s.name),
    findings: findings.map((f) => ({ ...f, strings: [...f.strings] })),
  };
}

/** The same for a public identifier. @throws AppError not_found */
export async function siteDesign(tx: Tx, siteRef: string, at: Date): Promise<SiteDesign> {
  return designFindings(tx, found(await visibleSite(tx, siteRef), 'site').id, at);
}
