import type { Knex } from 'knex';
import type { EquipmentFamily } from '../../src/domain/equipment/families';
import type { Entry } from '../../src/domain/equipment/fields';
import { MODULE_DEFAULTS } from '../../src/domain/equipment/module-fields';
import { FIELDS } from '../../src/domain/equipment/plausibility';
import { starterEquipment } from '../../src/domain/equipment/starter';
import { entryOfUnit } from '../../src/domain/equipment/unit-fields';
import { EQUIPMENT_TABLES } from '../../src/server/queries/equipment';
import type { OrganisationPlan } from '../../simulator/plant/plan';
import { insertRows, known, namedIds } from './rows';

export interface SeededEquipment {
  moduleTypes: Map<string, number>;
  unitTypes: Map<string, number>;
  inverterTypes: Map<string, number>;
  connectorTypes: Map<string, number>;
}

/** Entries by name: those of the plan, which stand on its roofs, and then the rest of the starter set. */
function withStarter(planned: readonly Entry[], starter: readonly Entry[]): Entry[] {
  const named = new Map(starter.map((e) => [e.name, e]));
  return [
    ...planned.map((e): Entry => ({ ...(named.get(e.name ?? '') ?? {}), ...e })),
    ...starter.filter((e) => !planned.some((p) => p.name === e.name)),
  ];
}

async function seedFamily(
  db: Knex,
  family: EquipmentFamily,
  organisationId: number,
  entries: readonly Entry[],
  connectors: ReadonlyMap<string, number>,
): Promise<Map<string, number>> {
  const columns: Record<string, string> = { organisation_id: 'int4' };
  for (const f of FIELDS[family])
    columns[f.column] =
      f.kind === 'connector' ? 'int4' : f.kind === 'number' ? (f.whole ? 'int2' : 'real') : 'text';
  const rows = entries.map((entry) => ({
    organisation_id: organisationId,
    ...Object.fromEntries(
      FIELDS[family].map((f) => {
        const value = entry[f.key] ?? null;
        return [
          f.column,
          f.kind === 'connector' && typeof value === 'string'
            ? known(connectors, value, 'the connector type')
            : value,
        ];
      }),
    ),
  }));
  return namedIds(db, EQUIPMENT_TABLES[family], columns, rows);
}

/** What a plan says of a module or unit beyond what its interface promises is taken as it is. */
const SIZE: Entry = { lengthM: 1.72, widthM: 1.13 };

/** The organisation's catalogue: the plan's types and the starter set; numbers by name. */
export async function seedEquipment(
  db: Knex,
  organisation: OrganisationPlan,
  organisationId: number,
): Promise<SeededEquipment> {
  const starter = starterEquipment();
  const connectorTypes = await seedFamily(db, 'connectors', organisationId, starter.connectors, new Map());
  const of = (family: EquipmentFamily, entries: readonly Entry[]) =>
    seedFamily(db, family, organisationId, entries, connectorTypes);
  return {
    connectorTypes,
    moduleTypes: await of(
      'modules',
      withStarter(
        organisation.moduleTypes.map((t): Entry => ({ ...MODULE_DEFAULTS, ...SIZE, ...t })),
        starter.modules,
      ),
    ),
    unitTypes: await of('units', withStarter(organisation.unitTypes.map(entryOfUnit), starter.units)),
    inverterTypes: await of('inverters', starter.inverters),
  };
}

/** The starter set's documented pairs, recorded by a person of the organisation. */
export async function seedPairs(
  db: Knex,
  organisationId: number,
  connectorTypes: ReadonlyMap<string, number>,
  recordedBy: number,
): Promise<void> {
  await insertRows(
    db,
    'connector_pair',
    { organisation_id: 'int4', first_id: 'int4', second_id: 'int4', evidence: 'text', recorded_by: 'int4' },
    starterEquipment().pairs.map((pair) => {
      const ids = [pair.first, pair.second].map((name) => known(connectorTypes, name, 'the connector type'));
      return {
        organisation_id: organisationId,
        first_id: Math.min(...ids),
        second_id: Math.max(...ids),
        evidence: pair.evidence,
        recorded_by: recordedBy,
      };
    }),
  );
}
