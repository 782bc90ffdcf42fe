import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { createElement, type ComponentProps } from 'react';
import { renderToStaticMarkup } from 'react-dom/server';
import { createServer, type ViteDevServer } from 'vite';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type * as CheckPart from '../../src/domain/commissioning/as-built/check-part';
import type * as Checklists from '../../src/domain/cases/checklists';
import type * as Columns from '../../src/domain/commissioning/import/columns';
import type * as Fields from '../../src/domain/equipment/fields';
import type * as Plausibility from '../../src/domain/equipment/plausibility';
import type * as Times from '../../src/domain/history-import/times';
import type * as Advice from '../../src/domain/notices/advice';
import type { AuditList as List } from '../../src/features/audit/AuditList';
import type * as EquipmentFile from '../../src/schemas/equipment-file';
import { language } from '../../src/server/language';
import { CLOSE, OPEN, writePseudoLanguage } from '../support/pseudo-language';
import { ROOT } from './sources';

/** A second language, made of ours: every text in brackets. The plugin is the one that the site is built with. */
const words = fs.mkdtempSync(path.join(os.tmpdir(), 'wakeline-words-'));
const folder = path.join(words, 'qps');
let vite: ViteDevServer;
beforeAll(async () => {
  fs.mkdirSync(folder);
  writePseudoLanguage(folder);
  vite = await createServer({
    root: ROOT,
    configFile: false,
    logLevel: 'silent',
    appType: 'custom',
    server: { middlewareMode: true, watch: null, ws: false },
    optimizeDeps: { noDiscovery: true },
    plugins: language('qps', words),
  });
});
afterAll(async () => {
  await vite.close();
  fs.rmSync(words, { recursive: true });
});
const load = <T>(file: string) => vite.ssrLoadModule(`/${file}`) as Promise<T>;

/** What stands outside of every bracket, its markup and addresses taken away. */
const leftInOurs = (html: string): string =>
  html
    .replace(/<[^>]*>/g, '\n')
    .split('\n')
    .filter((text) => !text.includes(OPEN) && /\p{L}{2}/u.test(text))
    .join('|');

describe('a second language', () => {
  it('is what an island, a sentence and a refusal say, and nothing of ours is left', async () => {
    const { AuditList } = await load<{ AuditList: typeof List }>('src/features/audit/AuditList.tsx');
    const props: ComponentProps<typeof AuditList> = {
      page: {
        at: '2026-11-03T10:15:00Z',
        next: 7,
        items: [
          {
            id: 8,
            at: '2026-11-03T10:10:00Z',
            person: 'Vera',
            address: '127.0.0.1',
            action: 'people.invited',
            subject: '',
            site: null,
            reason: '',
            before: null,
            after: null,
          },
        ],
      },
      view: { q: '', area: 'all' },
      timeZone: 'UTC',
    };
    const html = renderToStaticMarkup(createElement(AuditList, props));
    expect(html).toContain(`${OPEN}invited somebody${CLOSE}`);
    // the name of a format, a time, a person
    expect(leftInOurs(html)).toBe('CSV|10:10 UTC|Vera');

    const { counted } = await load<{ counted: (n: number, one: string) => string }>(
      'src/drawings/numbers.ts',
    );
    expect(counted(2, 'roof')).toContain('roof');
    const { AppError } = await load<{ AppError: new (kind: string) => Error }>('src/server/errors.ts');
    expect(new AppError('forbidden').message).toBe(`${OPEN}Your role does not include this${CLOSE}`);
    const { checkPart } = await load<typeof CheckPart>('src/domain/commissioning/as-built/check-part.ts');
    const faults = checkPart('plane', { name: '', surfaceTilt: 91 }, 'given').faults ?? [];
    expect(faults).toHaveLength(2);
    for (const { message } of faults) {
      expect(message.startsWith(OPEN)).toBe(true);
      // nothing of ours is joined to it
      expect(message.endsWith(CLOSE)).toBe(true);
    }
    // what the domain concludes: an instruction, a line of a checklist, a sentence with figures
    const { adviceFor } = await load<typeof Advice>('src/domain/notices/advice.ts');
    const { checklistOf } = await load<typeof Checklists>('src/domain/cases/checklists.ts');
    const { readTime } = await load<typeof Times>('src/domain/history-import/times.ts');
    const time = readTime('3/4/2026 10:00', null, 'UTC', null);
    for (const said of [
      adviceFor('stuck', null).today,
      checklistOf('stuck')[0]?.check,
      time.kind === 'fault' && time.message,
    ])
      expect(said).toMatch(new RegExp(`^${OPEN}.+${CLOSE}$`));
    const { LANGUAGE } = await load<{ LANGUAGE: string }>('src/words/language.ts');
    expect(LANGUAGE).toBe('qps');
  });

  it('leaves heads of files that are read back as they are, and reads its own names of columns too', async () => {
    const { FIELDS } = await load<typeof Plausibility>('src/domain/equipment/plausibility.ts');
    const { headerOf } = await load<typeof Fields>('src/domain/equipment/fields.ts');
    const { readHeader } = await load<typeof EquipmentFile>('src/schemas/equipment-file.ts');
    const fields = FIELDS.modules;
    const heads = fields.map(headerOf);
    expect(heads.join()).not.toContain(OPEN);
    for (const written of [heads, fields.map((f) => f.label)])
      expect(readHeader('modules', written)).toEqual({ fields, faults: [], ignored: [] });
    const { COLUMN_HEADS, IMPORT_COLUMNS, matchColumns } = await load<typeof Columns>(
      'src/domain/commissioning/import/columns.ts',
    );
    const { COLUMN_LABELS } = await load<{ COLUMN_LABELS: typeof COLUMN_HEADS }>(
      'src/words/domain-import.ts',
    );
    expect(COLUMN_LABELS.serial).toContain(OPEN);
    for (const of of [COLUMN_HEADS, COLUMN_LABELS]) {
      const match = matchColumns(
        IMPORT_COLUMNS.map((c) => of[c]),
        [],
      );
      expect(IMPORT_COLUMNS.map((c) => match[c])).toEqual(IMPORT_COLUMNS.map((_, i) => i));
    }
  });

  it('that lacks a file stops the build and names it', async () => {
    fs.rmSync(path.join(folder, 'ui.ts'));
    await expect(load('src/components/ui/Dialog.tsx')).rejects.toThrow('has no ui.ts');
  });

  it('is English where none is asked for; one that is not there, or leads elsewhere, is refused', () => {
    expect(language(undefined)).toEqual([]);
    expect(language('en')).toEqual([]);
    for (const name of ['xx', '../up', 'EN', 'language.ts'])
      expect(() => language(name), name).toThrow(`there is no folder src/words/${name}`);
  });
});
