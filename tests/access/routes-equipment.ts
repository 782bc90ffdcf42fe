import { get, type Route } from './route';

/** A type of equipment that is nobody’s. */
const NO_TYPE = '/api/equipment/modules/00000000-0000-4000-8000-000000000000';

/** Routes of the catalogue of equipment and of the design checks. */
export const DESIGN_AND_EQUIPMENT: readonly Route[] = [
  get('equipment/index.astro', 'equipment.read', 'nothing', () => '/equipment', [303]),
  get('equipment/[family]/index.astro', 'equipment.read', 'nothing', () => '/equipment/connectors'),
  get('equipment/[family]/import.astro', 'equipment.write', 'nothing', () => '/equipment/units/import'),
  get('equipment/[family]/[type].astro', 'equipment.read', 'nothing', () => '/equipment/modules/new'),
  get('commissioning/[site]/design.astro', 'as_built.read', 'site', (t) => `/commissioning/${t.site}/design`),
  get('api/equipment/[family]/index.ts', 'equipment.read', 'nothing', () => '/api/equipment/modules'),
  {
    file: 'api/equipment/[family]/index.ts',
    method: 'POST',
    permission: 'equipment.write',
    of: 'nothing',
    path: () => '/api/equipment/modules',
    body: { typed: {} },
    served: [422],
  },
  get('api/equipment/[family].csv.ts', 'equipment.read', 'nothing', () => '/api/equipment/units.csv'),
  get('api/equipment/[family]/[type].ts', 'equipment.read', 'nothing', () => NO_TYPE, [404]),
  {
    file: 'api/equipment/[family]/[type].ts',
    method: 'PUT',
    permission: 'equipment.write',
    of: 'nothing',
    path: () => NO_TYPE,
    body: { typed: {}, version: 'x' },
    served: [404],
  },
  {
    file: 'api/equipment/[family]/[type].ts',
    method: 'PATCH',
    permission: 'equipment.write',
    of: 'nothing',
    path: () => NO_TYPE,
    body: { archived: true },
    served: [404],
  },
  {
    file: 'api/equipment/[family]/import.ts',
    method: 'POST',
    permission: 'equipment.write',
    of: 'nothing',
    path: () => '/api/equipment/inverters/import',
    body: { text: 'Colour\nblue\n' },
    served: [200],
  },
  {
    file: 'api/equipment/connector-pairs/index.ts',
    method: 'POST',
    permission: 'connector_evidence.record',
    of: 'nothing',
    path: () => '/api/equipment/connector-pairs',
    body: {},
    served: [422],
  },
  {
    file: 'api/equipment/connector-pairs/[pair]/index.ts',
    method: 'DELETE',
    permission: 'connector_evidence.record',
    of: 'nothing',
    path: () => '/api/equipment/connector-pairs/00000000-0000-4000-8000-000000000000',
    served: [404],
  },
  {
    file: 'api/equipment/connector-pairs/[pair]/files.ts',
    method: 'POST',
    permission: 'connector_evidence.record',
    of: 'nothing',
    path: () =>
      '/api/equipment/connector-pairs/00000000-0000-4000-8000-000000000000/files?ref=00000000-0000-4000-8000-000000000003&name=x.pdf',
    body: {},
    served: [404],
  },
  get('api/sites/[site]/design.csv.ts', 'as_built.read', 'site', (t) => `/api/sites/${t.site}/design.csv`),
];
