import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { AFTER_CLOSING, lookAgain, type LookAgain } from './after-closing';
import { CASE_KINDS } from './cases';
import { sampleFigures, sampleLook, sampleString, withSlot } from './sample-case';

const HOUR_MS = 3_600_000;
const outcome = (change: Partial<LookAgain>) => lookAgain(sampleLook(change)).outcome;
const stuck = withSlot(sampleString({ voltage: 200.5, passing: 5, shutdown: 1, stuck: 1 }), 5, {
  state: 'shutdown',
  verdict: 'stuck',
  voltage: 0.5,
});

describe('a case of stuck units, looked at again', () => {
  it('held when every unit passed through the following daylight', () => {
    const found = lookAgain(sampleLook());
    expect(found).toEqual({
      outcome: 'held',
      headline: 'The 2 units were right in the daylight since the closing.',
      lines: ['B3 gives 240.0 V of 240.0 V expected'],
    });
  });

  it('did not hold where a unit of it is stuck', () => {
    const found = lookAgain(sampleLook({ now: sampleFigures([stuck]) }));
    expect(found.outcome).toBe('not_held');
    expect(found.headline).toBe(
      'Position 5 of B3 is stuck in shutdown and B3 gives 200.5 V of 240.0 V expected.',
    );
  });

  it('leaves out units that it is not about', () => {
    const other = withSlot(sampleString(), 1, { verdict: 'stuck', state: 'shutdown' });
    expect(outcome({ now: sampleFigures([other]) })).toBe('held');
    expect(outcome({ now: sampleFigures([other]), parts: [] })).toBe('not_held');
  });

  it('of silence is about being heard: a unit that is stuck meanwhile is another cause’s', () => {
    expect(outcome({ kind: 'silent', now: sampleFigures([stuck]) })).toBe('held');
    const silent = withSlot(sampleString(), 5, { state: 'silent' });
    expect(outcome({ kind: 'silent', now: sampleFigures([silent]) })).toBe('not_held');
  });

  it('did not hold where the voltage has not returned, though all units claim to pass', () => {
    expect(outcome({ now: sampleFigures([sampleString({ voltage: 201 })]) })).toBe('not_held');
    // within the band, or less than a part of one unit
    expect(outcome({ now: sampleFigures([sampleString({ voltage: 231 })]) })).toBe('held');
    expect(outcome({ now: sampleFigures([sampleString({ voltage: 220 })]) })).toBe('held');
    // an optimizing string's voltage is the inverter's
    expect(outcome({ now: sampleFigures([sampleString({ voltage: 150, optimizing: true })]) })).toBe('held');
  });

  it('did not hold where it came back and went again meanwhile', () => {
    const relapse = {
      stringId: 'b3',
      position: 5,
      verdict: 'stuck',
      atMs: sampleLook().closedMs + 2 * HOUR_MS,
    };
    expect(lookAgain(sampleLook({ relapses: [relapse] }))).toMatchObject({
      outcome: 'not_held',
      headline: 'Position 5 of B3 was stuck in shutdown again since the closing.',
    });
    // what ended within the grace is the repair itself
    expect(outcome({ relapses: [{ ...relapse, atMs: sampleLook().closedMs + 60_000 }] })).toBe('held');
    expect(outcome({ relapses: [{ ...relapse, position: 1 }] })).toBe('held');
  });

  it.each([
    ['minutes after the closing', { closedMs: sampleLook().nowMs - 60_000 }],
    ['in the dark', { now: sampleFigures([stuck], { is: 'dark', elevation: -20 }) }],
    ['while shutdown is commanded', { now: sampleFigures([{ ...stuck, inForce: 'initiator' }]) }],
    ['during planned work', { plannedWork: true, now: sampleFigures([stuck]) }],
    ['without reports', { now: sampleFigures([{ ...stuck, at: '2026-06-01T11:00:00.000Z' }]) }],
    ['before enough daylight has passed', { lightMs: HOUR_MS }],
  ] as [string, Partial<LookAgain>][])('waits %s', (_when, change) => {
    expect(outcome(change)).toBe('wait');
  });

  it('says after a week that it can’t tell, and why', () => {
    const found = lookAgain(
      sampleLook({ closedMs: sampleLook().nowMs - 8 * 24 * HOUR_MS, plannedWork: true }),
    );
    expect(found.outcome).toBe('cant_tell');
    expect(found.headline).toContain('Planned work');
  });

  it('did not hold while its cause lasts', () => {
    expect(outcome({ cause: { open: true } })).toBe('not_held');
  });
});

describe('other kinds', () => {
  it('units that did not shut down show it at the next shutdown only', () => {
    const kind = 'not_shutting_down' as const;
    expect(outcome({ kind, lightMs: HOUR_MS })).toBe('wait');
    expect(outcome({ kind })).toBe('cant_tell');
    expect(outcome({ kind, shutdownSince: true })).toBe('held');
    const passing = withSlot(sampleString({ inForce: 'initiator' }), 2, { verdict: 'not_shutting_down' });
    // the gravest needs no grace, no light and no end of works
    expect(
      outcome({
        kind,
        now: sampleFigures([passing], { is: 'dim' }),
        closedMs: sampleLook().nowMs - 60_000,
        plannedWork: true,
      }),
    ).toBe('not_held');
    const followed = sampleString({ inForce: 'initiator', shutdown: 6, passing: 0 });
    expect(lookAgain(sampleLook({ kind, now: sampleFigures([followed]) })).headline).toContain(
      'Only a meter',
    );
  });

  it('low output is judged by the first day after the closing that counts', () => {
    const kind = 'low_output' as const;
    const day = { stringId: 'b3', day: '2026-06-02', ratio: 0.99, z: 0.1 };
    expect(outcome({ kind })).toBe('wait');
    expect(outcome({ kind, days: [{ ...day, ratio: null }] })).toBe('wait');
    expect(outcome({ kind, days: [day] })).toBe('held');
    expect(outcome({ kind, days: [{ ...day, ratio: 0.8, z: -9 }] })).toBe('not_held');
    // lower than the limit, but no further from its siblings than they are from each other
    expect(outcome({ kind, days: [{ ...day, ratio: 0.94, z: -1 }] })).toBe('held');
  });

  it('what nights judge waits for one', () => {
    const kind = 'loop_resistance' as const;
    expect(outcome({ kind })).toBe('wait');
    const closedMs = sampleLook().nowMs - AFTER_CLOSING.nightMs;
    expect(outcome({ kind, closedMs })).toBe('held');
    expect(outcome({ kind, closedMs, cause: { open: true } })).toBe('not_held');
    expect(outcome({ kind, closedMs, cause: null })).toBe('cant_tell');
  });

  it('a case that names nothing can’t be told', () => {
    expect(outcome({ kind: 'other', strings: [], parts: [], cause: null })).toBe('cant_tell');
  });
});

it('never opens a case again before anything could be known, whatever its kind', () => {
  fc.assert(
    fc.property(fc.constantFrom(...CASE_KINDS), fc.boolean(), (kind, open) => {
      fc.pre(kind !== 'not_shutting_down');
      const found = lookAgain(
        sampleLook({
          kind,
          cause: { open },
          closedMs: sampleLook().nowMs - 60_000,
          now: sampleFigures([stuck]),
        }),
      );
      expect(['wait', 'cant_tell']).toContain(found.outcome);
    }),
  );
});
