import { describe, expect, it } from 'vitest';
import type { CauseNow } from '../../schemas/api/now';
import { concerned, placesInWords, placesOf, positionsInWords } from './places';
import { alternativesInWords, byGravity, GRAVITY, isHazard, partInWords, treatAsLive } from './words';

const unit = (stringName: string, position: number | null): CauseNow['units'][number] => ({
  stringId: `id-${stringName}`,
  stringName,
  position,
  serial: null,
  since: '2026-06-01T12:00:00.000Z',
});

describe('where the units of a cause are', () => {
  it('goes by string in the order people count, positions in order', () => {
    const places = placesOf([unit('A10', 4), unit('A2', 11), unit('A2', 3)]);
    expect(places.map((p) => [p.stringName, p.positions])).toEqual([
      ['A2', [3, 11]],
      ['A10', [4]],
    ]);
  });

  it('names positions while they are few, and says when they are unknown', () => {
    expect(placesInWords([unit('C2', 11), unit('C2', 3)])).toBe('string C2, positions 3 and 11');
    expect(placesInWords([unit('C2', 7)])).toBe('string C2, position 7');
    expect(placesInWords([unit('C2', null)])).toBe('string C2, positions unknown');
    expect(positionsInWords(Array.from({ length: 14 }, (_, i) => i + 1))).toBe('14\u00a0units');
    const twenty = ['D1', 'D2'].flatMap((s) => Array.from({ length: 10 }, (_, i) => unit(s, i + 1)));
    expect(placesInWords(twenty)).toBe('strings D1 and D2, 20\u00a0units');
    const many = ['A', 'B', 'C', 'D', 'E'].map((s) => unit(s, 1));
    expect(placesInWords(many)).toBe('5\u00a0strings, 5\u00a0units');
    expect(placesInWords([])).toBe('');
  });

  it('counts a string whose positions are unknown once, as a string', () => {
    expect(concerned([unit('C2', null), unit('C2', null), unit('C1', 4)])).toEqual({ units: 1, strings: 1 });
  });
});

describe('what a cause says', () => {
  it('puts the gravest first, then the oldest', () => {
    const causes = [
      { verdict: 'silent', since: '2026-06-01T08:00:00.000Z' },
      { verdict: 'stuck', since: '2026-06-01T09:00:00.000Z' },
      { verdict: 'not_shutting_down', since: '2026-06-01T12:00:00.000Z' },
      { verdict: 'stuck', since: '2026-06-01T07:00:00.000Z' },
    ] as CauseNow[];
    expect([...causes].sort(byGravity).map((c) => `${c.verdict} ${c.since.slice(11, 13)}`)).toEqual([
      'not_shutting_down 12',
      'stuck 07',
      'stuck 09',
      'silent 08',
    ]);
  });

  it('only what did not shut down is a hazard, and nothing is ever called safe', () => {
    expect(GRAVITY.filter((verdict) => isHazard({ verdict }))).toEqual(['not_shutting_down']);
    expect(treatAsLive({ verdict: 'not_shutting_down' })).toContain('as live');
    expect(treatAsLive({ verdict: 'unconfirmed' })).toContain('as live');
    for (const verdict of GRAVITY) expect(treatAsLive({ verdict }) ?? '').not.toMatch(/\bsafe\b/i);
  });

  it('strings what else it could be into one clause', () => {
    expect(alternativesInWords(['A loose connector', 'The unit is defective', 'NEC says nothing'])).toBe(
      'a loose connector, the unit is defective or NEC says nothing',
    );
    expect(alternativesInWords(['Its supply'])).toBe('its supply');
  });

  it('does not say a part twice', () => {
    expect(partInWords({ kind: 'gateway', name: 'Gateway 3' })).toBe('Gateway 3');
    expect(partInWords({ kind: 'transmitter', name: 'T4' })).toBe('transmitter T4');
  });
});
