import { describe, expect, it } from 'vitest';
import { FIELDS } from '../../domain/equipment/plausibility';
import { starterEquipment } from '../../domain/equipment/starter';
import type { Catalogue, CatalogueItem } from '../../schemas/api/equipment';
import { csvColumns } from './csv';
import { fitOf } from './fit';
import { curveEntry, curveMissing, emptyForm, formOf, groupsOf, readForm, withField } from './form';
import { EQUIPMENT_DEFAULTS, shownItems } from './list';
import { listFinding, touches, usedWords } from '../../words/equipment-sentences';

const STARTER = starterEquipment();
const item = (entry: CatalogueItem['entry'], changed: Partial<CatalogueItem> = {}): CatalogueItem => ({
  id: String(entry.name),
  entry,
  archivedAt: null,
  version: 'v',
  strings: 0,
  sites: 0,
  types: 0,
  ...changed,
});
const modules: Catalogue = {
  family: 'modules',
  items: STARTER.modules.map((e, i) => item(e, i === 0 ? { strings: 12, sites: 2 } : {})),
  connectors: STARTER.connectors.map((c) => ({
    id: String(c.name),
    name: String(c.name),
    maker: String(c.maker),
    family: String(c.family),
    archived: false,
  })),
  pairs: [],
};
const plain = (text: string | null) => text?.replaceAll('\u00a0', ' ');
const fieldOf = (key: string, family: 'modules' | 'units' = 'units') => {
  const found = FIELDS[family].find((f) => f.key === key);
  if (!found) throw new Error(`no field ${key}`);
  return found;
};

describe('a list of the catalogue', () => {
  const names = (view: object) =>
    shownItems(modules, { ...EQUIPMENT_DEFAULTS, ...view }).map((i) => String(i.entry.name));
  it('finds by name and by connector, sorts by figures and by power', () => {
    expect(names({ q: 'poly' })).toEqual(['Poly 285, 60 cells']);
    expect(names({ q: 'oxbow' })).toEqual(['Poly 285, 60 cells']);
    expect(names({ sort: 'power', order: 'down' })[0]).toBe('Mono 545, 144 half cells');
    expect(names({ sort: 'vocRef' })[0]).toBe('Mono 405, 108 half cells, black');
    expect(names({ sort: 'use', order: 'down' })[0]).toBe('Mono 450, 144 half cells');
    expect(names({ sort: 'nothing of ours' })).toHaveLength(5);
  });
  it('keeps archived types apart', () => {
    const archived = {
      ...modules,
      items: modules.items.map((i) => ({ ...i, archivedAt: '2026-11-01T00:00:00Z' })),
    };
    expect(shownItems(archived, EQUIPMENT_DEFAULTS)).toEqual([]);
    expect(shownItems(archived, { ...EQUIPMENT_DEFAULTS, show: 'archived' })).toHaveLength(5);
  });
  it('says what is found and what rests on a type', () => {
    expect(listFinding(modules).heading).toBe('Five module types, one in use');
    expect(listFinding({ ...modules, items: [] }).heading).toBe('No module type yet');
    const [used] = modules.items;
    if (!used) throw new Error('no item');
    expect(plain(usedWords(used))).toBe('12 strings at 2 sites');
    expect(plain(touches(used))).toMatch(/^12 strings at 2 sites rest on this type/);
    expect(touches(item({ name: 'x' }))).toBeNull();
  });
  it('goes out as CSV with every field', () => {
    const columns = csvColumns(modules);
    expect(columns.map((c) => c.header)).toEqual(
      expect.arrayContaining(['Name', 'Open-circuit voltage voc (V)', 'Coefficient of voc (%/K)', 'Strings']),
    );
    const [first] = modules.items;
    const of = (header: string) => first && columns.find((c) => c.header === header)?.value(first);
    expect(of('Coefficient of voc (%/K)')).toBe(-0.27);
    expect(of('Connector of the leads')).toBe('Halyard 4');
  });
});

describe('the form of a type', () => {
  it('draws the curve as soon as its own figures are there', () => {
    const empty = emptyForm('modules');
    expect(curveMissing(readForm('modules', empty.typed))).toBe(8);
    const whole = formOf('modules', STARTER.modules[0] ?? {}).typed;
    const half = readForm('modules', { ...whole, name: '', lengthM: '' });
    expect(half.entry).toBeNull();
    expect(curveEntry(half)).toMatchObject({ vocRef: 49.3 });
    expect(curveEntry(readForm('modules', { ...whole, vmpRef: '60' }))).toBeNull();
    expect(curveEntry(readForm('modules', { ...whole, vocRef: 'x' }))).toBeNull();
  });
  it('a kind fills a new form, and leaves a type that is there alone', () => {
    const fresh = withField('units', { ...emptyForm('units') }, fieldOf('name'), 'U', true);
    const filled = withField('units', fresh, fieldOf('kind'), 'shutdown_only', true).typed;
    expect(filled).toMatchObject({
      name: 'U',
      kind: 'shutdown_only',
      releasedBy: 'keep_alive',
      measures: 'none',
    });
    const there = formOf('units', STARTER.units[0] ?? {});
    expect(withField('units', there, fieldOf('kind'), 'shutdown_only', false).typed).toEqual({
      ...there.typed,
      kind: 'shutdown_only',
    });
  });
  it('shows every field once, by group', () => {
    for (const family of ['modules', 'units', 'connectors', 'inverters'] as const)
      expect(groupsOf(family).flatMap((g) => g.fields)).toEqual(FIELDS[family]);
  });
});

describe('how well a sheet fits its curve', () => {
  it('says so figure by figure', () => {
    const fit = fitOf(STARTER.modules[0] ?? {});
    expect(fit.verdict).toBe('good');
    expect(fit.lines.map((l) => l.label)).toEqual([
      'voc',
      'isc',
      'vmp',
      'imp',
      'pmp',
      'voc per K',
      'pmp per K',
    ]);
    for (const line of fit.lines.slice(0, 2)) expect(Math.abs(line.off)).toBeLessThan(1e-9);
  });
  it('a coefficient that belongs to no silicon is named in the words of the table', () => {
    const fit = fitOf({ ...STARTER.modules[0], betaVoc: -0.0013 });
    expect(fit.verdict).not.toBe('good');
    expect(fit.remarks.join(' ')).toMatch(/pmp per K that follows differs by −/);
  });
});
