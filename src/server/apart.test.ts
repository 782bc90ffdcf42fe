import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { build, type Plugin } from 'vite';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apart } from './apart';
import { language } from './language';

const SOURCES: Readonly<Record<string, string>> = {
  'src/words/roof.ts': `
    import { counted } from './counts';
    const wind = 'Wind from the ';
    export const roofPage = { title: 'Roof of the barn', wind: (of: string) => wind + of };
    export const roofCard = { title: 'Card of a roof', strings: (n: number) => counted.strings(n) };`,
  'src/words/counts.ts': `
    export const counted = { strings: (n: number) => n + ' strings' };
    export const unitsCounted = { units: (n: number) => n + ' units' };`,
  // the language stands in for the product's own words
  'languages/qps/shell.ts': `
    export const noticeCount = { notices: 'Meldungen' };
    export const shellSearch = { found: 'Gefunden' };`,
  'src/schemas/paths.ts': `
    const under = (site: string) => '/sites/' + site;
    export const paths = {
      site: (site: string) => under(site),
      roof: (site: string) => under(site) + '/roof',
      api: { roof: (site: string) => '/api' + under(site), search: () => '/api/search' },
    };`,
  'src/page.ts': `
    import { paths } from './schemas/paths';
    import { roofPage as said } from './words/roof';
    export const page = [said.title, said.wind('west'), paths.roof('barn'), { paths: 1 }.paths];`,
  'src/card.ts': `
    import { paths } from './schemas/paths';
    import { roofCard } from './words/roof';
    const ways = { roof: paths.api.roof };
    export const card = [roofCard.title, roofCard.strings(2), ways.roof('barn')];`,
  'src/head.ts': `
    import { noticeCount } from '${fileURLToPath(new URL('../words/shell', import.meta.url))}';
    export const head = noticeCount.notices;`,
  'src/list.ts': `
    import { paths } from './schemas/paths';
    const kind: 'site' | 'roof' = globalThis.location ? 'roof' : 'site';
    export const list = [paths[kind]('barn'), paths.api.search()];`,
};

let root: string;
beforeAll(() => {
  root = fs.mkdtempSync(path.join(os.tmpdir(), 'wakeline-apart-'));
  for (const [name, text] of Object.entries(SOURCES)) {
    fs.mkdirSync(path.dirname(path.join(root, name)), { recursive: true });
    fs.writeFileSync(path.join(root, name), text);
  }
});
afterAll(() => fs.rmSync(root, { recursive: true }));

/** The scripts of the pages by their names. */
async function built(...others: Plugin[]): Promise<Record<string, string>> {
  const made = await build({
    root,
    configFile: false,
    logLevel: 'silent',
    plugins: [apart(), ...others],
    build: {
      write: false,
      minify: false,
      modulePreload: { polyfill: false },
      rollupOptions: {
        input: ['page', 'card', 'list', 'head'].map((name) => path.join(root, `src/${name}.ts`)),
        preserveEntrySignatures: 'strict',
      },
    },
  });
  const { output } = (Array.isArray(made) ? made[0] : made) as { output: { name?: string; code?: string }[] };
  return Object.fromEntries(output.map(({ name = '', code = '' }) => [name, code]));
}

const read = async (code: string | undefined): Promise<Record<string, unknown>> =>
  (await import(`data:text/javascript,${encodeURIComponent(code ?? '')}`)) as Record<string, unknown>;

describe('the words and paths of a page', () => {
  it('are its own alone, and say what they said', async () => {
    const { page, card } = await built();
    expect(page).not.toMatch(/import|Card of|strings|units|search|'\/api'/);
    expect((await read(page)).page).toEqual([
      'Roof of the barn',
      'Wind from the west',
      '/sites/barn/roof',
      1,
    ]);
    expect(card).not.toMatch(/import|barn roof|Wind|units|search/);
    expect((await read(card)).card).toEqual(['Card of a roof', '2 strings', '/api/sites/barn']);
  });

  it('come whole where a page asks for a path by a name that it finds out', async () => {
    const { list } = await built();
    expect((await read(list)).list).toEqual(['/sites/barn', '/api/search']);
  });

  it('are those of the language that the site is built in', async () => {
    const { head } = await built(...language('qps', path.join(root, 'languages')));
    expect((await read(head)).head).toBe('Meldungen');
    expect(head).not.toMatch(/Gefunden|Notices/);
    expect((await read((await built()).head)).head).toBe('Notices');
  });
});
