import { describe, expect, it } from 'vitest';
import { UNIT_PRESETS } from '../equipment/unit-type';
import { newMemory, NO_STATE, resetSlot, resizeMemory } from './memory';

const context = (slots: boolean[]) => ({ slots, behaviour: UNIT_PRESETS.monitored });

describe('a string with another number of slots', () => {
  const known = () => {
    const memory = newMemory(context([true, true, true]));
    Object.assign(memory, {
      atS: 1000,
      sumV: 114,
      sumAtS: 990,
      pending: 'unexplained_voltage',
      pendingCount: 1,
    });
    memory.state[0] = 1;
    memory.seen[0] = 990;
    return memory;
  };

  it('keeps what is known of the slots that stay, and how far it was judged', () => {
    const grown = known();
    resizeMemory(grown, context([true, true, true, true, false]));
    expect(grown.state).toEqual([1, ...newMemory(context([true, true, true, false])).state]);
    expect(grown.state[4]).toBe(NO_STATE);
    expect(grown.seen).toEqual([990, 0, 0, 0, 0]);
    expect(grown.atS).toBe(1000);
    const shrunk = known();
    resizeMemory(shrunk, context([true]));
    expect(shrunk.state).toEqual([1]);
    expect(shrunk.settled).toHaveLength(1);
  });

  it('begins anew what was concluded of the string as a whole', () => {
    const memory = known();
    resizeMemory(memory, context([true, true]));
    expect(memory).toMatchObject({ sumV: 0, sumAtS: 0, pending: '', pendingCount: 0 });
  });

  it('has every list as long as its slots', () => {
    const memory = known();
    resizeMemory(memory, context(new Array<boolean>(7).fill(true)));
    for (const list of Object.values(memory).filter(Array.isArray)) expect(list).toHaveLength(7);
    resetSlot(memory, context(new Array<boolean>(7).fill(true)), 0);
    expect(memory.seen[0]).toBe(0);
  });
});
