import { describe, expect, it } from 'vitest';
import { judgementTimes, snowMayLie, SNOW_FROM, SNOW_GONE_FROM, type StringContext } from './context';
import { UNIT_STATES } from './codes';
import { UNIT_PRESETS } from '../equipment/unit-type';
import { sweepString } from './judge';
import { newMemory } from './memory';

describe('snow', () => {
  it('may lie from frost on, until the air is clearly warm, and nothing speaks for it without a sensor', () => {
    expect(snowMayLie(false, SNOW_FROM)).toBe(true);
    expect(snowMayLie(false, SNOW_FROM + 1)).toBe(false);
    expect(snowMayLie(true, SNOW_FROM + 1)).toBe(true);
    expect(snowMayLie(true, SNOW_GONE_FROM)).toBe(false);
    expect(snowMayLie(true, null)).toBe(false);
  });

  it('keeps a string that does not wake dark instead of silent', () => {
    const dawnS = 1_700_000_000;
    const context = (snowLikely: boolean): StringContext => ({
      behaviour: UNIT_PRESETS.monitored,
      times: judgementTimes(60, 30),
      timeLimitSource: 'test',
      slots: [true],
      heardAtS: [dawnS - 5 * 86_400],
      commands: [{ sinceS: 0, expects: 'passing', inForce: 'released' }],
      light: [
        { sinceS: dawnS - 12 * 3600, light: 'dark' },
        { sinceS: dawnS, light: 'light' },
      ],
      snowLikely,
    });
    const stateAt = (snowLikely: boolean) => {
      const memory = newMemory(context(snowLikely));
      sweepString(memory, context(snowLikely), dawnS + 4 * 3600);
      return UNIT_STATES[memory.state[0] ?? -1];
    };
    expect(stateAt(true)).toBe('dark');
    expect(stateAt(false)).toBe('silent');
  });
});
