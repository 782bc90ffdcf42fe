import { get, type Route } from './route';

/** The as-built from a file, serials read on site, the roof plan. */
export const IMPORT_SERIALS_ROOF: readonly Route[] = [
  get(
    'commissioning/[site]/import.astro',
    'as_built.write',
    'site',
    (t) => `/commissioning/${t.site}/import`,
  ),
  get(
    'commissioning/[site]/serials.astro',
    'as_built.write',
    'site',
    (t) => `/commissioning/${t.site}/serials`,
  ),
  get('commissioning/[site]/roof.astro', 'as_built.read', 'site', (t) => `/commissioning/${t.site}/roof`),
  {
    file: 'api/sites/[site]/as-built/import.ts',
    method: 'POST',
    permission: 'as_built.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/as-built/import`,
    body: {
      mode: 'check',
      table: { columns: ['string', 'position', 'serial'], lines: [2], rows: [['A1', '1', '']] },
      choices: { decimalMark: null, fillDown: false, meanings: {}, newStrings: null },
    },
    served: [200],
  },
  get('api/sites/[site]/roof.ts', 'as_built.read', 'site', (t) => `/api/sites/${t.site}/roof`),
  {
    file: 'api/sites/[site]/roof.ts',
    method: 'PUT',
    permission: 'as_built.write',
    of: 'site',
    path: (t) => `/api/sites/${t.site}/roof`,
    body: { strings: [] },
    served: [200],
  },
];
