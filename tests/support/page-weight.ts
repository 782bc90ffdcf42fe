import fs from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { gzipSync } from 'node:zlib';
import { build } from 'esbuild';

const ROOT = fileURLToPath(new URL('../../', import.meta.url));
const CLIENT = path.join(ROOT, 'dist/client');
const SERVER = path.join(ROOT, 'dist/server');

/** Scripts of one page, gzip bytes. */
export interface PageWeight {
  /** Under src/pages. */
  page: string;
  /** What is fetched as the page opens: islands with all that they import, scripts of layouts. */
  first: number;
  /** What comes when a chart nears the screen, beyond `first`; 0: the page has no chart. */
  chart: number;
  /** Each island that is fetched once it is scrolled to, with what it brings beyond `first`. */
  visible: [name: string, bytes: number][];
  /** The files of `first`, the heaviest first, with their gzip bytes. */
  files: [name: string, bytes: number][];
}

/** Which file of the build was made of which source: the adapter's own list in the server's manifest. */
function builtFiles(): Map<string, string> {
  const manifest = fs.readdirSync(SERVER).find((name) => /^manifest_.*\.mjs$/.test(name));
  const text = manifest ? fs.readFileSync(path.join(SERVER, manifest), 'utf8') : '';
  const list = /"entryModules":(\{.*?\})/s.exec(text)?.[1];
  if (!list) throw new Error('The build has no list of its entry modules. Build the site first.');
  const found = new Map<string, string>();
  for (const [source, file] of Object.entries(JSON.parse(list) as Record<string, string>))
    if (file.startsWith('_astro/')) {
      const at = source.lastIndexOf('/src/');
      found.set(at < 0 ? source : source.slice(at + 1).replace(/(?<!lang)\.tsx?$/, ''), file);
    }
  return found;
}

interface Script {
  bytes: number;
  now: string[];
  later: string[];
}

/** Every script of the build with what it imports, as esbuild reads it. */
async function scripts(): Promise<Map<string, Script>> {
  const folder = path.join(CLIENT, '_astro');
  const names = fs.readdirSync(folder).filter((name) => name.endsWith('.js'));
  const { metafile } = await build({
    absWorkingDir: folder,
    entryPoints: names.map((name) => `./${name}`),
    bundle: true,
    splitting: true,
    format: 'esm',
    outdir: 'nowhere',
    write: false,
    metafile: true,
    logLevel: 'silent',
    external: ['*'],
  });
  return new Map(
    names.map((name) => {
      const imports = metafile.inputs[name]?.imports ?? [];
      const of = (kind: string): string[] =>
        imports.filter((i) => i.kind === kind).map((i) => path.basename(i.path));
      return [
        name,
        {
          bytes: gzipSync(fs.readFileSync(path.join(folder, name)), { level: 9 }).length,
          now: of('import-statement'),
          later: of('dynamic-import'),
        },
      ];
    }),
  );
}

/** What is fetched with `names`: they and all that they import. */
function closure(all: Map<string, Script>, names: Iterable<string>): Set<string> {
  const found = new Set<string>();
  const walk = (name: string): void => {
    if (found.has(name)) return;
    found.add(name);
    all.get(name)?.now.forEach(walk);
  };
  for (const name of names) walk(name);
  return found;
}

interface Parts {
  now: Set<string>;
  /** Islands that are fetched when they are scrolled to. */
  visible: Set<string>;
}

/** Islands and scripts of an .astro file and of those that it is made of, as paths under the root without ending. */
function partsOf(file: string, seen = new Set<string>()): Parts {
  const parts: Parts = { now: new Set(), visible: new Set() };
  if (seen.has(file)) return parts;
  seen.add(file);
  const text = fs.readFileSync(path.join(ROOT, file), 'utf8');
  const imported = new Map<string, string>();
  for (const [, names = '', from = ''] of text.matchAll(
    /^import\s+(?:type\s+)?([^;]+?)\s+from\s+'([^']+)';/gm,
  ))
    if (from.startsWith('.'))
      for (const name of names.replace(/[{}]/g, '').split(','))
        imported.set(
          name
            .trim()
            .split(/\s+as\s+/)
            .at(-1) ?? '',
          path.posix.join(path.posix.dirname(file), from),
        );
  for (const from of imported.values())
    if (from.endsWith('.astro')) {
      const inside = partsOf(from, seen);
      for (const part of inside.now) parts.now.add(part);
      for (const part of inside.visible) parts.visible.add(part);
    }
  for (const [, name = '', when = ''] of text.matchAll(/<(\w+)[^>]*?\sclient:(\w+)/g)) {
    const from = imported.get(name);
    if (!from) throw new Error(`${file}: the island ${name} is not imported by name.`);
    (when === 'visible' ? parts.visible : parts.now).add(from.replace(/\.tsx?$/, ''));
  }
  const hoisted = [...text.matchAll(/^\s*<script(?![^>]*is:inline)[^>]*>/gm)].length;
  for (let k = 0; k < hoisted; k++) parts.now.add(`${file}?astro&type=script&index=${k}&lang.ts`);
  return parts;
}

/** Every page of the build with the weight of its scripts. */
export async function pageWeights(): Promise<PageWeight[]> {
  const built = builtFiles();
  const all = await scripts();
  const nameOf = (part: string): string | undefined => built.get(part)?.slice('_astro/'.length);
  const canvas = nameOf('src/components/charts/Canvas');
  const renderer = built.get('@astrojs/react/client.js')?.slice('_astro/'.length);
  if (!canvas || !renderer) throw new Error('The build names no chart, or no renderer of islands.');
  const sum = (names: Iterable<string>): number =>
    [...names].reduce((total, name) => total + (all.get(name)?.bytes ?? 0), 0);
  const pages = fs
    .readdirSync(path.join(ROOT, 'src/pages'), { recursive: true, encoding: 'utf8' })
    .filter((name) => name.endsWith('.astro'))
    .sort();
  return pages.map((page) => {
    const { now, visible } = partsOf(`src/pages/${page}`);
    const parts = [...now];
    const islands = parts.filter((part) => !part.includes('?'));
    const names = parts.flatMap((part) => {
      const name = nameOf(part);
      // a short script stands in the page itself
      if (!name && !part.includes('?')) throw new Error(`${page}: the build has no file of ${part}.`);
      return name ? [name] : [];
    });
    const first = closure(all, islands.length > 0 ? [...names, renderer] : names);
    const late = closure(
      all,
      [...first].flatMap((name) => all.get(name)?.later ?? []),
    );
    const withLate = closure(
      all,
      [...late].flatMap((name) => [name, ...(all.get(name)?.later ?? [])]),
    );
    const chart = withLate.has(canvas) ? closure(all, [canvas]) : new Set<string>();
    const beyond = (part: string): number => {
      const name = nameOf(part);
      if (!name || !renderer) throw new Error(`${page}: the build has no file of ${part}.`);
      return sum([...closure(all, [name, renderer])].filter((file) => !first.has(file)));
    };
    return {
      page,
      first: sum(first),
      chart: sum([...chart].filter((name) => !first.has(name))),
      visible: [...visible].map((part): [string, number] => [path.posix.basename(part), beyond(part)]),
      files: [...first]
        .map((name): [string, number] => [name, all.get(name)?.bytes ?? 0])
        .sort((a, b) => b[1] - a[1]),
    };
  });
}
