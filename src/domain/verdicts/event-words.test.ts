import { describe, expect, it } from 'vitest';
import { COMMANDS, EVENT_KINDS } from './codes';
import { commandWords } from './command-words';
import { eventWords, KIND_WORDS, KINDS } from './event-words';

describe('the words of an event', () => {
  it.each(EVENT_KINDS)('%s has a line without any detail', (kind) => {
    const { words } = eventWords(kind, {});
    expect(words).toMatch(/^[A-Z]/);
    expect(words).not.toMatch(/undefined|null|\s$/);
  });

  it('names positions while they are few, then counts', () => {
    expect(eventWords('units_stuck', { positions: [5] }).words).toBe('Position 5 is stuck in shutdown');
    expect(eventWords('units_stuck', { positions: [5, 9] }).words).toBe(
      'Positions 5 and 9 are stuck in shutdown',
    );
    const many = Array.from({ length: 14 }, (_, i) => i + 1);
    expect(eventWords('units_silent', { positions: many }).words).toBe('14 units fell silent');
    expect(eventWords('units_heard', { positions: [], serials: ['XX-1'] }).words).toBe(
      'One unit answered the roll call',
    );
    expect(eventWords('units_recovered', { positions: [5], from: 'stuck' }).words).toBe(
      'Position 5 passes again',
    );
  });

  it('has a word for every kind', () => {
    expect(KINDS).toHaveLength(EVENT_KINDS.length);
    expect(new Set(Object.values(KIND_WORDS)).size).toBe(EVENT_KINDS.length);
  });

  it('keeps crimson for what does not shut down', () => {
    const crimson = EVENT_KINDS.filter((kind) => eventWords(kind, {}).tone === 'crimson');
    expect(crimson).toEqual(['units_not_shutting_down']);
    expect(eventWords('string_finding', { finding: 'not_shutting_down' }).tone).toBe('crimson');
  });

  it('says what came in force and where', () => {
    expect(
      eventWords('command', { inForce: 'initiator', zone: 'Whole roof', saidBy: 'Main switch' }),
    ).toEqual({
      words: 'Shutdown by the initiator, Whole roof, by Main switch',
      tone: 'plum',
    });
    expect(eventWords('command', { inForce: 'made up' }).words).toBe('A command came in force');
    for (const inForce of COMMANDS) expect(commandWords(inForce)).toMatch(/^[A-Z]/);
  });

  it('does not show a detail of another type', () => {
    for (const kind of EVENT_KINDS)
      expect(
        eventWords(kind, { positions: 'x', serials: null, inForce: 7, units: 'many', inverter: {} }).words,
      ).not.toMatch(/undefined|null|\[object|NaN/);
    expect(eventWords('gateway_silent', { gateway: { name: 'x' } }).words).toBe('A gateway fell silent');
    expect(eventWords('units_stuck', { positions: 'all' }).words).toBe('Units are stuck in shutdown');
  });
});
