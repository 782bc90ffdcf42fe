import { describe, expect, it } from 'vitest';
import type { HistoryItem } from '../schemas/api/as-built';
import { changedFields, changeText, historyTitle, sourceWords } from './as-built-history-sentences';

const item = (action: string, some: Partial<HistoryItem> = {}): HistoryItem => ({
  id: 1,
  at: '2026-12-01T12:00:00.000Z',
  person: 'Per Aalto',
  action,
  of: 'B3-9',
  before: {},
  after: {},
  reason: '',
  source: 'forms',
  ...some,
});

describe('an entry of the history', () => {
  it.each([
    ['unit_placed', {}, { serial: 'NEW-1' }, 'NEW-1 placed in B3-9'],
    ['unit_removed', { serial: 'OLD-1' }, { serial: null }, 'OLD-1 taken out of B3-9'],
    ['unit_replaced', { serial: 'OLD-1' }, { serial: 'NEW-1' }, 'OLD-1 replaced by NEW-1 in B3-9'],
    [
      'unit_moved',
      { serial: 'OLD-1' },
      { serial: 'NEW-1', from: 'A1-2' },
      'NEW-1 moved from A1-2 to B3-9, in the place of OLD-1',
    ],
    ['unit_moved', { serial: null }, { serial: 'NEW-1', from: 'A1-2' }, 'NEW-1 moved from A1-2 to B3-9'],
  ])('%s: %j → %j', (action, before, after, words) => {
    const entry = item(action, { before, after });
    expect(historyTitle(entry)).toBe(words);
    expect(changedFields(entry)).toEqual([]);
  });

  it('of a part names the fields in the words of its form, with units', () => {
    const entry = item('plane_changed', {
      of: 'South roof',
      before: { surfaceTilt: 10, albedo: 0.2 },
      after: { surfaceTilt: 12, albedo: 0.25 },
    });
    expect(historyTitle(entry)).toBe('Plane South roof changed');
    expect(changeText(entry)).toBe('Tilt: 10 ° → 12 °; Albedo: 0.2 → 0.25');
  });

  it('says choices by their labels, and what is empty', () => {
    const entry = item('site_changed', {
      of: 'Ferry Sheds',
      before: { ruleSet: 'none', contactName: '', temperatureMin: null },
      after: { ruleSet: 'hazard_control', contactName: 'Idony Marrable', temperatureMin: -9 },
    });
    expect(changedFields(entry)).toEqual([
      {
        label: 'Rule set',
        before: 'No rapid shutdown required',
        after: 'Listed hazard-control system instead',
      },
      { label: 'Contact on site', before: 'empty', after: 'Idony Marrable' },
      { label: 'Coldest expected air', before: 'empty', after: '−9 °C' },
    ]);
  });

  it('of what was added or deleted says what it was', () => {
    const added = item('string_added', { of: 'A1', after: { name: 'A1', slots: 14, logger: null } });
    expect(changedFields(added)).toEqual([{ label: 'Slots', before: null, after: '14' }]);
    const deleted = item('string_deleted', { of: 'A1', before: { slots: 2, serials: ['S-01', 'S-02'] } });
    expect(historyTitle(deleted)).toBe('String A1 deleted');
    expect(changeText(deleted)).toBe('Slots: 2; Serials: S-01, S-02');
  });

  it('of slots says each slot', () => {
    const entry = item('slots_changed', {
      of: 'A1',
      before: { 'A1-2': { roofPlace: '' } },
      after: { 'A1-2': { roofPlace: 'by the vent', roofX: 1.5 } },
    });
    expect(changeText(entry)).toBe(
      'A1-2: place on the roof empty → place on the roof by the vent, x (m) 1.5',
    );
  });

  it('of an action that is not known here is still readable', () => {
    expect(historyTitle(item('outline_drawn', { of: 'Ferry Sheds' }))).toBe('Outline drawn: Ferry Sheds');
  });

  it('tells another way than forms', () => {
    expect([sourceWords('forms'), sourceWords('import'), sourceWords(null)]).toEqual(['', 'from a file', '']);
  });
});
