import { describe, expect, it } from 'vitest';
import { UNIT_PRESETS } from '../equipment/unit-type';
import { commandedAt, commandedSpans, judgementTimes, lightAt, lightSpans, timeLimitOf } from './context';

const keepAlive = UNIT_PRESETS.shutdown_only;
const byLogger = UNIT_PRESETS.monitored;
const point = (sinceS: number, inForce: 'released' | 'initiator' | 'keep_alive_lost') => ({
  sinceS,
  inForce,
});

describe('what a string is to do', () => {
  it('passes while any transmitter that it hears is released', () => {
    const spans = commandedSpans(
      keepAlive,
      'operating',
      [point(10, 'released')],
      [
        { own: [point(20, 'released'), point(100, 'keep_alive_lost')], zone: [point(10, 'released')] },
        { own: [point(20, 'released'), point(200, 'keep_alive_lost')], zone: [point(10, 'released')] },
      ],
    );
    expect(commandedAt(spans, 150)).toMatchObject({ expects: 'passing' });
    expect(commandedAt(spans, 250)).toEqual({ sinceS: 200, expects: 'shutdown', inForce: 'keep_alive_lost' });
  });
  it('shuts down with its zone even where a neighbour still sends', () => {
    const spans = commandedSpans(
      keepAlive,
      'operating',
      [point(10, 'released'), point(100, 'initiator')],
      [{ own: [point(10, 'released')], zone: [point(10, 'released')] }],
    );
    expect(commandedAt(spans, 101)).toEqual({ sinceS: 100, expects: 'shutdown', inForce: 'initiator' });
  });
  it('takes the start of an unbroken shutdown, and only the zone where the logger releases', () => {
    const spans = commandedSpans(
      byLogger,
      'operating',
      [point(10, 'released'), point(100, 'initiator'), point(130, 'keep_alive_lost')],
      [{ own: [point(50, 'keep_alive_lost')], zone: [] }],
    );
    expect(commandedAt(spans, 99).expects).toBe('passing');
    expect(commandedAt(spans, 500)).toEqual({ sinceS: 100, expects: 'shutdown', inForce: 'initiator' });
  });
  it('knows nothing of a new site that nobody has spoken of, and expects an operating one to run', () => {
    expect(commandedAt(commandedSpans(byLogger, 'commissioning', [], []), 5).expects).toBe('unknown');
    expect(commandedAt(commandedSpans(byLogger, 'operating', [], []), 5).expects).toBe('passing');
  });
  it('says unknown where one transmitter is off and of the other nothing is known', () => {
    const spans = commandedSpans(
      keepAlive,
      'commissioning',
      [],
      [
        { own: [point(20, 'keep_alive_lost')], zone: [] },
        { own: [], zone: [] },
      ],
    );
    expect(commandedAt(spans, 30).expects).toBe('unknown');
  });
});

describe('light', () => {
  it('turns from dark by dim to light with the sun and by a sensor only darker', () => {
    const elevation = (t: number): number => t / 100 - 10;
    const spans = lightSpans(elevation, 0, 4000, 100);
    expect(spans.map((s) => s.light)).toEqual(['dark', 'dim', 'light']);
    expect(lightAt(spans, 1100).light).toBe('dim');
    // bounds are exact however coarse the look
    expect(lightSpans(elevation, 0, 4000, 300).map((s) => s.sinceS)).toEqual([0, 1000, 1600]);
    expect(lightAt([], 5)).toEqual({ sinceS: 0, light: 'light' });
    expect(lightSpans(elevation, 0, 4000, 100, () => 20).map((s) => s.light)).toEqual(['dark', 'dim']);
  });
});

describe('times', () => {
  it('takes the rule set at its word and names it', () => {
    expect(timeLimitOf('rapid_shutdown_10s').timeLimitS).toBe(10); // NEC 690.12, 2014 edition
    expect(timeLimitOf('rapid_shutdown_30s').timeLimitS).toBe(30); // NEC 690.12(B), 2017 and later
    expect(timeLimitOf('none').source).toContain('yardstick');
    expect(judgementTimes(60, 30).graceS).toBe(120);
    expect(judgementTimes(10, 30).graceS).toBe(30);
  });
});
