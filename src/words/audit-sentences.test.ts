import { describe, expect, it } from 'vitest';
import { actionWords, changesOf, subjectWords } from './audit-sentences';

describe('an entry in words', () => {
  it('says what was done, also where it has no words yet', () => {
    expect(actionWords('people.deactivated')).toBe('deactivated a person');
    expect(actionWords('as_built.inverter_added')).toBe('added an inverter');
    expect(actionWords('as_built.plane_deleted')).toBe('deleted a plane');
    expect(actionWords('some_area.did_it')).toBe('some area: did it');
  });

  it('leaves out what only machines read', () => {
    expect(subjectWords('shutdown test 65b42a41-89ef-4328-b178-3bb023092cc0')).toBe('shutdown test');
    expect(subjectWords('unit T8E2-02ED-97')).toBe('unit T8E2-02ED-97');
    expect(
      changesOf({
        before: null,
        after: {
          kiosk: true,
          endsOn: null,
          source: 'on_site',
          slots: [{ moduleType: 'Mono 450', roofX: null }],
        },
      }),
    ).toEqual([
      { field: 'kiosk', before: null, after: 'yes' },
      { field: 'source', before: null, after: 'on site' },
      { field: 'slots', before: null, after: 'module type Mono 450' },
    ]);
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
      { field: 'sites', before: 'x', after: null },
    ]);
  });
});
