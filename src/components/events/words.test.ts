import { describe, expect, it } from 'vitest';
import { EVENT_KINDS } from '../../domain/verdicts/codes';
import { eventInWords, KINDS, KIND_WORDS } from './words';

describe('events in words', () => {
  it('name positions while they are few', () => {
    expect(eventInWords({ kind: 'units_stuck', detail: { positions: [5, 9], serials: ['A', 'B'] } })).toBe(
      'Units 5 and 9 are stuck in shutdown',
    );
    expect(eventInWords({ kind: 'units_stuck', detail: { positions: [5] } })).toBe(
      'Unit 5 is stuck in shutdown',
    );
    expect(
      eventInWords({ kind: 'units_silent', detail: { positions: Array.from({ length: 14 }, (_, i) => i) } }),
    ).toBe('14\u00a0units fell silent');
    expect(eventInWords({ kind: 'units_heard', detail: { positions: [], serials: ['XX-1'] } })).toBe(
      'One unit answered for the first time',
    );
  });

  it('say what is in force, where and by whom', () => {
    const detail = { inForce: 'initiator', zone: 'Gym', saidBy: 'Main switch' };
    expect(eventInWords({ kind: 'command', detail })).toBe('Initiator opened: Gym, by Main switch');
    expect(eventInWords({ kind: 'command', detail: { inForce: 'released', zone: 'Gym' } })).toBe(
      'Released: Gym',
    );
  });

  it('say something of every kind, whatever its detail lacks or holds', () => {
    for (const kind of EVENT_KINDS)
      for (const detail of [{}, { positions: 'x', serials: null, inForce: 7, units: 'many', inverter: {} }]) {
        const words = eventInWords({ kind, detail });
        expect(words.length).toBeGreaterThan(5);
        expect(words).not.toMatch(/undefined|null|\[object|NaN/);
      }
  });

  it('have a word for every kind', () => {
    expect(KINDS).toHaveLength(EVENT_KINDS.length);
    expect(new Set(Object.values(KIND_WORDS)).size).toBe(EVENT_KINDS.length);
  });
});
