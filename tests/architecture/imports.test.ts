import fs from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { importsOf, isTest, ROOT, sources, type Source } from './sources';
import { FEATURES, names, packageOf, rowOf, SERVER_PACKAGES, TABLE, type Row } from './table';

const all = sources();
const product = all.filter(({ file }) => !isTest(file));

/** What tools make or read: the build, the package's own description. */
const MADE = /^(dist\/|package\.json$)/;

/** What an import breaks, or undefined. */
function fault(
  { file }: Pick<Source, 'file'>,
  to: { specifier: string; file: string | undefined },
): string | undefined {
  const row = rowOf(file);
  if (!row) return `${file} is in no folder of the table`;
  if (to.file !== undefined) {
    const target = rowOf(to.file);
    if (!target)
      return MADE.test(to.file) && /^(src\/server|tests)\//.test(file)
        ? undefined
        : `${file} imports ${to.file}, which is in no folder of the table`;
    if (
      target.folder === row.folder ||
      row.may.includes(target.folder) ||
      row.may.some((m) => names(m, to.file ?? ''))
    )
      return undefined;
    return `${file} (${row.folder}) may not import ${to.file} (${target.folder})`;
  }
  const name = packageOf(to.specifier);
  return packageAllowed(row, name)
    ? undefined
    : `${file} (${row.folder}) may not import the package ${to.specifier}`;
}

function packageAllowed(row: Row, name: string): boolean {
  if (row.packages === 'any') return true;
  if (row.packages === 'browser') return name !== 'node:' && !SERVER_PACKAGES.includes(name);
  if (row.folder.startsWith('src/server')) return name === 'node:' || row.packages.includes(name);
  return row.packages.includes(name);
}

function cycleFrom(start: string, edges: Map<string, string[]>): string[] | undefined {
  const trail: string[] = [];
  const state = new Map<string, 'open' | 'done'>();
  const visit = (file: string): string[] | undefined => {
    if (state.get(file) === 'done') return undefined;
    if (state.get(file) === 'open') return [...trail.slice(trail.indexOf(file)), file];
    state.set(file, 'open');
    trail.push(file);
    for (const next of edges.get(file) ?? []) {
      const cycle = visit(next);
      if (cycle) return cycle;
    }
    trail.pop();
    state.set(file, 'done');
    return undefined;
  };
  return visit(start);
}

describe('imports', () => {
  it('follow the table', () => {
    expect(product.flatMap((source) => source.imports.flatMap((to) => fault(source, to) ?? []))).toEqual([]);
  });

  it('are not circular', () => {
    const edges = new Map(
      all.map((s) => [s.file, s.imports.flatMap((i) => (i.file && !i.typeOnly ? [i.file] : []))]),
    );
    const cycles = new Set(all.flatMap((s) => cycleFrom(s.file, edges)?.join(' → ') ?? []));
    expect([...cycles]).toEqual([]);
  });

  it('of what the domain says bring nothing of the domain but types, and no other words', () => {
    const mayRun = [
      'src/words/domain-*',
      'src/words/language.ts',
      'src/drawings/numbers.ts',
      'src/drawings/times.ts',
    ];
    const said = product.filter(({ file }) => names('src/words/domain-*', file));
    expect(said.length).toBeGreaterThan(0);
    expect(
      said.flatMap(({ file, imports }) =>
        imports
          .filter(
            ({ file: to = '', typeOnly }) =>
              !mayRun.some((entry) => names(entry, to)) && !(typeOnly && to.startsWith('src/domain/')),
          )
          .map((i) => `${file} → ${i.specifier}`),
      ),
    ).toEqual([]);
  });

  it('never reach a test from the product', () => {
    const into = product
      .filter(({ file }) => !file.startsWith('tests/'))
      .flatMap(({ file, imports }) =>
        imports
          .filter((i) => i.file?.startsWith('tests/') || (i.file && isTest(i.file)))
          .map((i) => `${file} → ${i.file}`),
      );
    expect(into).toEqual([]);
  });
});

describe('the rules themselves', () => {
  const from = (file: string, specifier: string, target?: string) =>
    fault({ file }, { specifier, file: target });
  it.each([
    ['src/domain/verdicts/state.ts', 'knex', undefined],
    ['src/domain/verdicts/state.ts', 'node:fs', undefined],
    ['src/domain/verdicts/state.ts', '../../schemas/ingest', 'src/schemas/ingest.ts'],
    ['src/domain/causes/words.ts', '../../words/language', 'src/words/language.ts'],
    ['src/features/fleet/Fleet.tsx', '../site/Site', 'src/features/site/Site.tsx'],
    ['src/features/fleet/Fleet.tsx', 'pg', undefined],
    ['src/pages/index.astro', '../server/db/pools', 'src/server/db/pools.ts'],
    ['src/server/queries/fleet.ts', '../services/x', 'src/server/services/x.ts'],
    ['src/server/http/page.ts', '../../features/fleet/Fleet', 'src/features/fleet/Fleet.tsx'],
    ['simulator/main.ts', '../src/server/config', 'src/server/config.ts'],
    ['src/lib/api.ts', '../server/config', 'src/server/config.ts'],
    ['src/elsewhere/x.ts', 'zod', undefined],
  ])('%s may not import %s', (file, specifier, target) => {
    expect(from(file, specifier, target)).toBeTypeOf('string');
  });

  it.each([
    ['src/domain/causes/words.ts', '../../words/domain-causes', 'src/words/domain-causes.ts'],
    ['src/features/fleet/Fleet.tsx', '../../lib/api', 'src/lib/api.ts'],
    ['src/pages/index.astro', '../server/http/page', 'src/server/http/page.ts'],
    ['src/server/services/x.ts', '../queries/fleet', 'src/server/queries/fleet.ts'],
    ['simulator/main.ts', 'ws', undefined],
  ])('%s may import %s', (file, specifier, target) => {
    expect(from(file, specifier, target)).toBeUndefined();
  });

  it('see every kind of import', () => {
    const text = `---
import a from './a';
import type { B } from './b';
export * from './c';
const d = await import('./d');
type E = import('./e').E;
---
<script>import './f';</script>`;
    expect(importsOf('src/pages/x.astro', text).map((i) => [i.specifier, i.typeOnly])).toEqual([
      ['./a', false],
      ['./b', true],
      ['./c', false],
      ['./d', false],
      ['./e', true],
      ['./f', false],
    ]);
  });

  it('find a cycle', () => {
    const edges = new Map([
      ['a', ['b']],
      ['b', ['c']],
      ['c', ['b']],
    ]);
    expect(cycleFrom('a', edges)).toEqual(['b', 'c', 'b']);
  });
});

describe('folders', () => {
  const foldersIn = (folder: string): string[] =>
    fs.existsSync(path.join(ROOT, folder))
      ? fs
          .readdirSync(path.join(ROOT, folder), { withFileTypes: true })
          .filter((entry) => entry.isDirectory())
          .map((entry) => entry.name)
      : [];

  it('are listed in the table', () => {
    const unlisted = TABLE.flatMap(({ folder, subfolders }) =>
      subfolders
        ? foldersIn(folder)
            .filter((name) => !subfolders.includes(name))
            .map((name) => `${folder}/${name}`)
        : [],
    );
    const inSrc = foldersIn('src').map((name) => `src/${name}`);
    expect([...unlisted, ...inSrc.filter((folder) => !TABLE.some((row) => row.folder === folder))]).toEqual(
      [],
    );
  });

  it('hold every source file', () => {
    expect(all.map(({ file }) => file).filter((file) => !rowOf(file))).toEqual([]);
  });

  it('of features are the areas of the product', () => {
    expect(
      foldersIn('src/features').filter((name) => !(FEATURES as readonly string[]).includes(name)),
    ).toEqual([]);
  });
});
