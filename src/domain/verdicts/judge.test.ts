import { describe, expect, it } from 'vitest';
import { UNIT_PRESETS } from '../equipment/unit-type';
import type { CommandPoint, LightSpan } from './context';
import { UNCHANGED } from './evidence';
import { judgeFrame, sweepString } from './judge';
import { newMemory, resetSlot } from './memory';
import { contextOf, MINUTE, NOON, released, report, running, states, verdicts } from './sample-string';

describe('a released string', () => {
  it('is ok while its units pass, and says nothing when nothing changes', () => {
    const context = contextOf([released]);
    const memory = running(context, NOON);
    expect(states(memory)).toEqual(['passing', 'passing', 'passing']);
    expect(judgeFrame(memory, context, { atS: NOON + 60, state: [1, 1, 1] })).toBe(UNCHANGED);
  });

  it('calls a unit in shutdown stuck at the third report, not before', () => {
    const context = contextOf([released]);
    const memory = running(context, NOON);
    expect(report(memory, context, NOON + 60, ['passing', 'shutdown', 'passing'])).toMatchObject([
      { position: 2, state: 'shutdown', verdict: 'ok' },
    ]);
    expect(report(memory, context, NOON + 120, ['passing', 'shutdown', 'passing'])).toEqual([]);
    const [change] = report(memory, context, NOON + 180, ['passing', 'shutdown', 'passing']);
    expect(change).toMatchObject({ position: 2, verdict: 'stuck', atS: NOON + 180 });
    expect(change?.evidence).toMatchObject({ basis: 'claim', thresholdS: 120, inForce: 'released' });
    expect(change?.evidence.couldBe.length).toBeGreaterThan(1);
  });

  it('counts the grace from the release', () => {
    const context = contextOf([
      { sinceS: NOON - 3600, inForce: 'initiator' },
      { sinceS: NOON, inForce: 'released' },
    ]);
    const memory = newMemory(context);
    report(memory, context, NOON - 1800, ['shutdown', 'shutdown', 'shutdown']);
    report(memory, context, NOON + 5, ['passing', 'shutdown', 'shutdown']);
    report(memory, context, NOON + 65, ['passing', 'passing', 'shutdown']);
    expect(verdicts(memory)).toEqual(['ok', 'ok', 'ok']);
    report(memory, context, NOON + 125, ['passing', 'passing', 'shutdown']);
    expect(verdicts(memory)).toEqual(['ok', 'ok', 'stuck']);
    expect(report(memory, context, NOON + 185, ['passing', 'passing', 'passing'])).toMatchObject([
      { verdict: 'ok', verdictBefore: 'stuck' },
    ]);
  });

  it('keeps a stuck unit stuck through the night and judges a release by night after sunrise', () => {
    const dusk = NOON + 6 * 3600;
    const dawn = NOON + 18 * 3600;
    const light: LightSpan[] = [
      { sinceS: NOON - 6 * 3600, light: 'light' },
      { sinceS: dusk, light: 'dark' },
      { sinceS: dawn - 1800, light: 'dim' },
      { sinceS: dawn, light: 'light' },
    ];
    const context = contextOf(
      [
        { sinceS: NOON - 3 * 3600, inForce: 'initiator' },
        { sinceS: dusk + 3600, inForce: 'released' },
      ],
      { light },
    );
    const memory = newMemory(context);
    for (let t = NOON; t < dusk; t += MINUTE)
      report(memory, context, t, ['shutdown', 'shutdown', 'shutdown']);
    sweepString(memory, context, dusk + 600);
    expect(states(memory)).toEqual(['dark', 'dark', 'dark']);
    expect(verdicts(memory)).toEqual(['unconfirmed', 'unconfirmed', 'unconfirmed']);
    sweepString(memory, context, dusk + 2 * 3600);
    expect(verdicts(memory)).toEqual(['ok', 'ok', 'ok']);
    for (let t = dawn - 1200; t <= dawn + 60; t += MINUTE)
      report(memory, context, t, ['shutdown', 'shutdown', 'shutdown']);
    expect(verdicts(memory)).toEqual(['ok', 'ok', 'ok']);
    report(memory, context, dawn + 120, ['passing', 'passing', 'shutdown']);
    expect(verdicts(memory)).toEqual(['ok', 'ok', 'stuck']);
  });

  it('finds flapping by day and not at dusk', () => {
    const day = contextOf([released]);
    const memory = running(day, NOON);
    for (let k = 1; k <= 6; k++)
      report(memory, day, NOON + k * 200, ['passing', k % 2 ? 'shutdown' : 'passing', 'passing']);
    expect(verdicts(memory)).toEqual(['ok', 'flapping', 'ok']);
    for (let t = NOON + 1260; t < NOON + 1200 + 3700; t += MINUTE)
      report(memory, day, t, ['passing', 'passing', 'passing']);
    expect(verdicts(memory)).toEqual(['ok', 'ok', 'ok']);

    const dusk = contextOf([released], { light: [{ sinceS: NOON - 60, light: 'dim' }] });
    const other = running(dusk, NOON);
    for (let k = 1; k <= 6; k++)
      report(other, dusk, NOON + k * 200, ['passing', k % 2 ? 'shutdown' : 'passing', 'passing']);
    expect(verdicts(other)).toEqual(['ok', 'ok', 'ok']);
  });
});

describe('a string that is told to shut down', () => {
  const zone: CommandPoint[] = [released, { sinceS: NOON + 30, inForce: 'initiator' }];

  it('tells who followed, when, and who passes on', () => {
    const context = contextOf(zone);
    const memory = running(context, NOON);
    const [followed] = report(memory, context, NOON + 42, ['shutdown', null, null]);
    expect(followed).toMatchObject({ verdict: 'ok', state: 'shutdown' });
    expect(followed?.evidence.followedAfterS).toEqual([0, 12]);
    const changes = report(memory, context, NOON + 60, ['shutdown', 'passing', 'shutdown']);
    expect(changes.map((c) => c.position)).toEqual([3]);
    const [gravest] = report(memory, context, NOON + 120, ['shutdown', 'passing', 'shutdown']);
    expect(gravest).toMatchObject({ position: 2, verdict: 'not_shutting_down' });
    expect(gravest?.evidence).toMatchObject({
      thresholdS: 30,
      thresholdSource: 'NEC 690.12(B), 2017 and later editions: 30 s',
    });
  });

  it('gives the time of following as an interval between reports', () => {
    const context = contextOf(zone);
    const memory = running(context, NOON);
    report(memory, context, NOON + 48, ['passing', 'passing', 'passing']);
    const [change] = report(memory, context, NOON + 108, ['shutdown', 'shutdown', 'shutdown']);
    expect(change?.evidence.followedAfterS).toEqual([18, 78]);
    expect(change?.verdict).toBe('ok'); // it may have been in time: late only where it was seen past the limit
  });

  it('calls late what was seen passing past the limit and then followed', () => {
    const context = contextOf(zone);
    const memory = running(context, NOON);
    report(memory, context, NOON + 70, ['passing', 'shutdown', 'shutdown']);
    expect(verdicts(memory)[0]).toBe('not_shutting_down');
    const [change] = report(memory, context, NOON + 100, ['shutdown', 'shutdown', 'shutdown']);
    expect(change).toMatchObject({ verdict: 'late', verdictBefore: 'not_shutting_down' });
    expect(change?.evidence.followedAfterS).toEqual([40, 70]);
  });

  it('is never ok for what says nothing: silent, dark, unheard', () => {
    const context = contextOf(zone, { n: 4 });
    const memory = newMemory(context);
    for (let t = NOON - 600; t <= NOON; t += MINUTE)
      report(memory, context, t, ['passing', t < NOON - 300 ? 'passing' : null, 'passing', null]);
    sweepString(memory, context, NOON + 31);
    expect(states(memory)).toEqual(['passing', 'silent', 'passing', 'unheard']);
    expect(verdicts(memory)).toEqual(['ok', 'unconfirmed', 'ok', 'unconfirmed']);
    // heard until the command and not since: one report past the limit it is unconfirmed too
    sweepString(memory, context, NOON + 30 + 30 + 60);
    expect(verdicts(memory)).toEqual(['unconfirmed', 'unconfirmed', 'unconfirmed', 'unconfirmed']);
  });

  it('is unconfirmed again for a unit that followed and then fell silent', () => {
    const context = contextOf(zone);
    const memory = running(context, NOON);
    report(memory, context, NOON + 40, ['shutdown', 'shutdown', 'shutdown']);
    report(memory, context, NOON + 100, ['shutdown', 'shutdown', null]);
    sweepString(memory, context, NOON + 230);
    expect(states(memory)).toEqual(['shutdown', 'shutdown', 'silent']);
    expect(verdicts(memory)).toEqual(['ok', 'ok', 'unconfirmed']);
  });

  it('keeps not shutting down when such a unit falls silent, and lets the release end it', () => {
    const context = contextOf([...zone, { sinceS: NOON + 2000, inForce: 'released' }]);
    const memory = running(context, NOON);
    report(memory, context, NOON + 90, ['shutdown', 'passing', 'shutdown']);
    sweepString(memory, context, NOON + 600);
    expect(states(memory)[1]).toBe('silent');
    expect(verdicts(memory)[1]).toBe('not_shutting_down');
    sweepString(memory, context, NOON + 2001);
    expect(verdicts(memory)[1]).toBe('ok');
  });

  it('is unconfirmed for units that tell nothing, whatever comes', () => {
    const context = contextOf(zone, { kind: 'shutdown_only' });
    const memory = newMemory(context);
    sweepString(memory, context, NOON);
    expect(verdicts(memory)).toEqual(['ok', 'ok', 'ok']);
    sweepString(memory, context, NOON + 31);
    expect(states(memory)).toEqual(['nothing', 'nothing', 'nothing']);
    expect(verdicts(memory)).toEqual(['unconfirmed', 'unconfirmed', 'unconfirmed']);
  });

  it('accepts a report of shutdown that came before word of the command', () => {
    const before = contextOf([released]);
    const memory = running(before, NOON);
    report(memory, before, NOON + 41, ['shutdown', 'shutdown', 'shutdown']);
    const after = contextOf(zone);
    sweepString(memory, after, NOON + 45);
    expect(verdicts(memory)).toEqual(['ok', 'ok', 'ok']);
    report(memory, after, NOON + 60, ['shutdown', 'shutdown', 'shutdown']);
    expect(memory.followedTo).toEqual([11, 11, 11]);
  });

  it('asks nothing of a type that holds when only its command was lost', () => {
    const behaviour = { ...UNIT_PRESETS.monitored, onCommandLoss: 'holds' as const };
    const context = contextOf([released, { sinceS: NOON + 30, inForce: 'power_lost' }], { behaviour });
    const memory = running(context, NOON);
    report(memory, context, NOON + 120, ['passing', 'passing', 'passing']);
    expect(verdicts(memory)).toEqual(['ok', 'ok', 'ok']);
  });
});

describe('claims are only claims', () => {
  const behaviour = { ...UNIT_PRESETS.monitored, measures: 'output' as const };
  it('a claim of shutdown with module voltage on its output is not shutting down', () => {
    const context = contextOf([released, { sinceS: NOON, inForce: 'initiator' }], { behaviour });
    const memory = running(context, NOON - 60);
    const changes = report(memory, context, NOON + 60, ['shutdown', 'shutdown', 'shutdown'], [61, 3850, 58]);
    expect(changes.find((c) => c.position === 2)).toMatchObject({
      state: 'passing',
      verdict: 'not_shutting_down',
      evidence: { basis: 'measured', claim: 'shutdown' },
    });
    expect(verdicts(memory)).toEqual(['ok', 'not_shutting_down', 'ok']);
  });
  it('a claim of passing with 0.6 V on its output is stuck', () => {
    const context = contextOf([released], { behaviour });
    const memory = running(context, NOON);
    for (let k = 1; k <= 3; k++)
      report(memory, context, NOON + 60 * k, ['passing', 'passing', 'passing'], [3510, 60, 3490]);
    expect(states(memory)).toEqual(['passing', 'shutdown', 'passing']);
    expect(verdicts(memory)).toEqual(['ok', 'stuck', 'ok']);
  });
  it('a negative output proves nothing: shade bypasses a passing module too', () => {
    const context = contextOf([released], { behaviour });
    const memory = running(context, NOON);
    for (let k = 1; k <= 4; k++)
      report(memory, context, NOON + 60 * k, ['passing', 'passing', 'passing'], [3510, -50, 3490]);
    expect(verdicts(memory)).toEqual(['ok', 'ok', 'ok']);
  });
  it('a claim of fault keeps the state it had as far as it is fresh', () => {
    const context = contextOf([released]);
    const memory = running(context, NOON);
    report(memory, context, NOON + 60, ['passing', 'fault', 'passing']);
    expect(states(memory)[1]).toBe('passing');
  });
});

describe('silence and light', () => {
  const dawn = NOON - 3 * 3600;
  const light: LightSpan[] = [
    { sinceS: dawn - 10 * 3600, light: 'dark' },
    { sinceS: dawn, light: 'light' },
  ];
  it('is silent after three report intervals, since when they were over', () => {
    const context = contextOf([released]);
    const memory = running(context, NOON);
    expect(sweepString(memory, context, NOON + 179).changes).toEqual([]);
    const { changes } = sweepString(memory, context, NOON + 400);
    expect(changes.map((c) => [c.state, c.atS])).toEqual([
      ['silent', NOON + 180],
      ['silent', NOON + 180],
      ['silent', NOON + 180],
    ]);
  });
  it('misses one unit that does not wake with its neighbours, later the whole string, unless it may be snow', () => {
    const context = contextOf([released], { light });
    const memory = newMemory(context);
    for (let t = dawn - 16 * 3600; t < dawn - 12 * 3600; t += 600)
      report(memory, context, t, ['passing', 'passing', 'passing']);
    sweepString(memory, context, dawn - 3600);
    expect(states(memory)).toEqual(['dark', 'dark', 'dark']);
    for (let t = dawn + 300; t <= dawn + 300 + 1800; t += MINUTE)
      report(memory, context, t, ['passing', 'passing', null]);
    sweepString(memory, context, dawn + 1500);
    expect(states(memory)[2]).toBe('dark');
    sweepString(memory, context, dawn + 2160);
    expect(states(memory)[2]).toBe('silent');

    for (const [snowLikely, state] of [
      [true, 'dark'],
      [false, 'silent'],
    ] as const) {
      const other = contextOf([released], { light, snowLikely });
      const asleep = newMemory(other);
      report(asleep, other, dawn - 16 * 3600, ['passing', 'passing', 'passing']);
      sweepString(asleep, other, dawn - 3600);
      sweepString(asleep, other, dawn + 7300);
      expect(states(asleep)).toEqual([state, state, state]);
    }
  });
  it('takes buffered frames of an outage in order without calling the unit back too early', () => {
    const context = contextOf([released]);
    const memory = running(context, NOON);
    sweepString(memory, context, NOON + 1200);
    expect(report(memory, context, NOON + 60, ['passing', 'passing', 'passing'])).toEqual([]);
    expect(states(memory)[0]).toBe('silent');
    report(memory, context, NOON + 1140, ['passing', 'passing', 'passing']);
    expect(states(memory)).toEqual(['passing', 'passing', 'passing']);
  });
  it('says of a report that was overtaken by the silence before it no earlier time than the silence', () => {
    const context = contextOf([released]);
    const memory = running(context, NOON);
    sweepString(memory, context, NOON + 200);
    expect(states(memory)[0]).toBe('silent');
    expect(report(memory, context, NOON + 60, ['passing', 'passing', 'passing']).map((c) => c.atS)).toEqual([
      NOON + 180,
      NOON + 180,
      NOON + 180,
    ]);
  });
});

describe('an exchanged unit', () => {
  it('forgets one slot and no other', () => {
    const context = contextOf([released]);
    const memory = running(context, NOON);
    resetSlot(memory, context, 1);
    expect(states(memory)).toEqual(['passing', 'unheard', 'passing']);
  });
});
