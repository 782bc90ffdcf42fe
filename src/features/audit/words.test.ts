import { describe, expect, it } from 'vitest';
import { actionWords, changesOf } from './words';

describe('an entry in words', () => {
  it('says what was done, also where it has no words yet', () => {
    expect(actionWords('people.deactivated')).toBe('deactivated a person');
    expect(actionWords('some_area.did_it')).toBe('some area: did it');
  });

  it('shows only what differs', () => {
    expect(
      changesOf({ before: { role: 'analyst', name: 'Vera' }, after: { role: 'manager', name: 'Vera' } }),
    ).toEqual([{ field: 'role', before: 'analyst', after: 'manager' }]);
  });

  it('shows what is new and what is gone', () => {
    expect(changesOf({ before: null, after: { serial: 'A1' } })).toEqual([
      { field: 'serial', before: null, after: 'A1' },
    ]);
    expect(changesOf({ before: { serial: 'A1', sites: ['x'] }, after: null })).toEqual([
      { field: 'serial', before: 'A1', after: null },
      { field: 'sites', before: '["x"]', after: null },
    ]);
  });
});
