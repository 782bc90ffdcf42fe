import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { UNIT_STATES, VERDICTS } from './codes';
import type { CommandPoint, StringContext } from './context';
import { UNCHANGED, type UnitChange } from './evidence';
import { judgeFrame, sweepString } from './judge';
import { countUnits, newMemory, type StringMemory } from './memory';
import { contextOf, NOON, states, verdicts } from './sample-string';

describe('what must hold of any history', () => {
  const claim = fc.constantFrom<number | null>(null, 0, 1, 2, 3, 4);
  const steps = fc.array(
    fc.record({
      afterS: fc.integer({ min: 0, max: 400 }),
      claims: fc.array(claim, { minLength: 3, maxLength: 3 }),
      out: fc.option(
        fc.array(fc.option(fc.integer({ min: -100, max: 5000 })), { minLength: 3, maxLength: 3 }),
      ),
      sweep: fc.boolean(),
    }),
    { maxLength: 60 },
  );
  const commands = fc.array(
    fc.record({
      afterS: fc.integer({ min: 0, max: 6000 }),
      inForce: fc.constantFrom('released' as const, 'initiator' as const, 'power_lost' as const),
    }),
    { maxLength: 4 },
  );
  const play = (
    path: { afterS: number; claims: (number | null)[]; out: (number | null)[] | null; sweep: boolean }[],
    context: StringContext,
    visit: (memory: StringMemory, atS: number, changes: readonly UnitChange[], swept: boolean) => void,
  ): void => {
    const memory = newMemory(context);
    let atS = NOON;
    for (const step of path) {
      atS += step.afterS;
      const { changes } = step.sweep
        ? sweepString(memory, context, atS)
        : judgeFrame(memory, context, { atS, state: step.claims, voltageOut: step.out ?? undefined });
      visit(memory, atS, changes, step.sweep);
    }
  };
  const zoneOf = (list: { afterS: number; inForce: CommandPoint['inForce'] }[]): CommandPoint[] =>
    list.map((c) => ({ sinceS: NOON + c.afterS, inForce: c.inForce }));

  it('never says ok of a unit that says nothing while shutdown is commanded, and changes tell the whole story', () => {
    fc.assert(
      fc.property(steps, commands, (path, list) => {
        const context = contextOf(zoneOf(list));
        const told = newMemory(context);
        play(path, context, (memory, atS, changes, swept) => {
          for (const c of changes) {
            expect(c.stateBefore).toBe(UNIT_STATES[told.state[c.slot]!] ?? null);
            expect(c.verdictBefore).toBe(VERDICTS[told.verdict[c.slot]!]);
            expect(c.atS).toBeLessThanOrEqual(atS);
            told.state[c.slot] = c.state === null ? -1 : UNIT_STATES.indexOf(c.state);
            told.verdict[c.slot] = VERDICTS.indexOf(c.verdict);
          }
          expect(told.state).toEqual(memory.state);
          expect(told.verdict).toEqual(memory.verdict);
          const command = context.commands.filter((c) => c.sinceS <= atS).at(-1)!;
          if (command.expects === 'shutdown' && swept)
            for (let i = 0; i < 3; i++)
              if (!['passing', 'shutdown'].includes(states(memory)[i]!))
                expect(['unconfirmed', 'not_shutting_down']).toContain(verdicts(memory)[i]);
          const counts = countUnits(memory, context.slots);
          expect(counts.passing + counts.shutdown + counts.unheard + counts.silent + counts.dark).toBe(3);
          expect(counts.units).toBe(3);
        });
      }),
      { numRuns: 300 },
    );
  });

  it('gives the same from memory that went through JSON, and a late frame changes nothing', () => {
    fc.assert(
      fc.property(steps, commands, fc.integer({ min: 1, max: 5000 }), (path, list, late) => {
        const context = contextOf(zoneOf(list));
        const one = newMemory(context);
        let two = newMemory(context);
        let atS = NOON;
        for (const step of path) {
          atS += step.afterS;
          const frame = { atS, state: step.claims, voltageOut: step.out ?? undefined };
          two = JSON.parse(JSON.stringify(two)) as StringMemory;
          const a = step.sweep ? sweepString(one, context, atS) : judgeFrame(one, context, frame);
          const b = step.sweep ? sweepString(two, context, atS) : judgeFrame(two, context, frame);
          expect(b).toEqual(a);
          const before = JSON.stringify(one);
          expect(judgeFrame(one, context, { ...frame, atS: one.atS - late })).toBe(UNCHANGED);
          expect(JSON.stringify(one)).toBe(before);
        }
      }),
      { numRuns: 150 },
    );
  });
});
