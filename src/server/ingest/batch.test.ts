import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { FrameRow } from '../queries/ingest-rows';
import { FRAMES_A_BATCH, takeBatch, type Item } from './batch';

const UNITS = 4;
const frame = (stringId: number, at: number, state: (number | null)[]): FrameRow => ({
  stringId,
  siteId: 1,
  at,
  voltage: state.map((s) => (s === null ? null : 100)),
  voltageIn: null,
  current: state.map((s) => (s === null ? null : 10)),
  power: null,
  temperature: state.map((s) => (s === null ? null : 200)),
  signal: state.map((s) => (s === null ? null : -70)),
  via: state.map((s) => (s === null ? null : 1)),
  state,
});
const item = (rows: FrameRow[]): Item => ({
  work: { kind: 'frames', rows },
  readings: rows.length * UNITS,
  siteId: 1,
  loggerId: 1,
  gateways: new Map(),
  taken: 0,
  fault: null,
  written: () => undefined,
  refused: () => undefined,
});
const drain = (queue: Item[]) => {
  const batches = [];
  while (queue.length > 0) batches.push(takeBatch(queue));
  return batches;
};

describe('a batch', () => {
  it('merges the same string and instant', () => {
    const [batch] = drain([
      item([frame(1, 60, [1, null, 1, null])]),
      item([frame(1, 60, [null, 2, 2, null])]),
    ]);
    expect(batch?.frames.map((f) => f.state)).toEqual([[1, 2, 1, null]]);
    expect(batch?.finished).toHaveLength(2);
  });

  it('never holds an incomplete frame beside another of its string', () => {
    const whole = [1, 1, 1, 1];
    const part = [1, null, 1, 1];
    const batches = drain([
      item([frame(1, 60, whole), frame(1, 120, part), frame(1, 180, whole), frame(2, 60, part)]),
    ]);
    expect(batches.map((b) => b.frames.map((f) => f.at))).toEqual([[60], [120], [180, 60]]);
    expect(batches.map((b) => b.finished.length)).toEqual([0, 0, 1]);
  });

  it('whatever comes: every frame is in a batch, a key at most once in each, items finish once and in order', () => {
    const state = fc.array(fc.constantFrom(1, 2, null), { minLength: UNITS, maxLength: UNITS });
    const rows = fc.array(fc.tuple(fc.integer({ min: 1, max: 5 }), fc.integer({ min: 1, max: 6 }), state), {
      minLength: 1,
      maxLength: 30,
    });
    fc.assert(
      fc.property(fc.array(rows, { minLength: 1, maxLength: 12 }), (messages) => {
        const items = messages.map((m) => item(m.map(([s, at, st]) => frame(s, at, [...st]))));
        const batches = drain([...items]);
        expect(batches.flatMap((b) => b.finished)).toEqual(items);
        const wanted = new Map<string, Set<number>>();
        for (const m of messages)
          for (const [s, at, st] of m) {
            const heard = wanted.get(`${s} ${at}`) ?? new Set();
            wanted.set(`${s} ${at}`, heard);
            st.forEach((v, i) => v !== null && heard.add(i));
          }
        const got = new Map<string, Set<number>>();
        for (const { frames } of batches) {
          expect(frames.length).toBeLessThanOrEqual(FRAMES_A_BATCH);
          const keys = frames.map((f) => `${f.stringId} ${f.at}`);
          expect(new Set(keys).size).toBe(keys.length);
          for (const f of frames) {
            const alone = frames.filter((g) => g.stringId === f.stringId).length === 1;
            if (f.state.includes(null)) expect(alone).toBe(true);
            const heard = got.get(`${f.stringId} ${f.at}`) ?? new Set();
            got.set(`${f.stringId} ${f.at}`, heard);
            f.state.forEach((v, i) => v !== null && heard.add(i));
          }
        }
        expect(got).toEqual(wanted);
      }),
    );
  });
});
