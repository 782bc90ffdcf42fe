import { describe, expect, it } from 'vitest';
import { COMMANDS, EVENT_KINDS } from './codes';
import { commandWords, eventWords } from './event-words';

describe('the words of an event', () => {
  it.each(EVENT_KINDS)('%s has a line without any detail', (kind) => {
    const { words } = eventWords(kind, {});
    expect(words).toMatch(/^[A-Z]/);
    expect(words).not.toMatch(/undefined|null|\s$/);
  });

  it('names positions up to four, then counts', () => {
    expect(eventWords('units_stuck', { positions: [5] }).words).toBe('Position 5 is stuck in shutdown');
    expect(eventWords('units_stuck', { positions: [5, 9] }).words).toBe(
      'Positions 5 and 9 are stuck in shutdown',
    );
    expect(eventWords('units_silent', { positions: [1, 2, 3, 4, 5] }).words).toBe('5 units fell silent');
  });

  it('keeps crimson for what does not shut down', () => {
    const crimson = EVENT_KINDS.filter((kind) => eventWords(kind, {}).tone === 'crimson');
    expect(crimson).toEqual(['units_not_shutting_down']);
    expect(eventWords('string_finding', { finding: 'not_shutting_down' }).tone).toBe('crimson');
  });

  it('says what came in force and where', () => {
    expect(eventWords('command', { inForce: 'initiator', zone: 'Whole roof' })).toEqual({
      words: 'Shutdown by the initiator, Whole roof',
      tone: 'plum',
    });
    expect(eventWords('command', { inForce: 'made up' }).words).toBe('A command came in force');
    for (const inForce of COMMANDS) expect(commandWords(inForce)).toMatch(/^[A-Z]/);
  });

  it('does not show a detail of another type', () => {
    expect(eventWords('gateway_silent', { gateway: { name: 'x' } }).words).toBe('A gateway fell silent');
    expect(eventWords('units_stuck', { positions: 'all' }).words).toBe('Units are stuck in shutdown');
  });
});
