import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { generator } from '../output/sample-plane';
import { isolationFinding } from './isolation';
import type { IsolationWatch, WatchedUnit } from './isolation-watch';

/**
 * A site of four strings of six units, two strings an input; each string has a current of its own under a common sky.
 * On the drawing A1-3 and A2-3 are in each other's place.
 */
const INTERVAL = 10;
const START = 1_000_000;
const NAMES = ['A1', 'A2', 'B1', 'B2'];

interface Scene {
  /** Strings that are really isolated, from and until when (seconds after the start). */
  isolated?: string[];
  fromS?: number;
  untilS?: number;
  /** Common course of the sky, 1 = as before. */
  sky?: (sinceS: number) => number;
  watched?: string;
  nowS?: number;
  swapped?: boolean;
  level?: number;
  lost?: number;
  strings?: string[];
  seed?: number;
}
function watch(scene: Scene = {}): IsolationWatch {
  const { isolated = [], fromS = 45, untilS = Infinity, sky = () => 1, level = 8, lost = 0.02 } = scene;
  const random = generator(scene.seed ?? 7);
  const names = scene.strings ?? NAMES;
  const nowS = scene.nowS ?? 200;
  const times: number[] = [];
  for (let t = -120; t <= nowS; t += INTERVAL) times.push(t);
  const truth = (string: string, t: number): number =>
    isolated.includes(string) && t >= fromS && t < untilS
      ? 0
      : level * sky(t) * (1 + 0.03 * names.indexOf(string));
  const seat = (string: string, position: number): string =>
    scene.swapped && position === 3 && (string === 'A1' || string === 'A2')
      ? string === 'A1'
        ? 'A2'
        : 'A1'
      : string;
  const units = names.flatMap((string) =>
    Array.from({ length: 6 }, (_, i): WatchedUnit => {
      const gain = 1 + 0.01 * (random() - 0.5);
      return {
        serial: `${string}-${i + 1}`,
        string,
        position: i + 1,
        samples: times.map((t) => ({
          atS: START + t,
          current: random() < lost ? null : truth(seat(string, i + 1), t) * gain + 0.01 * (random() - 0.5),
        })),
      };
    }),
  );
  return {
    string: scene.watched ?? 'A1',
    startedAtS: START,
    nowS: START + nowS,
    reportIntervalS: INTERVAL,
    units,
    inputs: ['A', 'B'].map((input) => {
      const strings = names.filter((n) => n.startsWith(input));
      return {
        name: `Input ${input}`,
        strings,
        samples: times.map((t) => ({
          atS: START + t,
          current: strings.reduce((sum, n) => sum + truth(n, t), 0),
        })),
      };
    }),
  };
}
const fates = (w: IsolationWatch, fate: string): string[] =>
  isolationFinding(w)
    .units.filter((u) => u.fate === fate)
    .map((u) => u.serial);

describe('who is in a string that a person isolates', () => {
  it('all its members and nobody else, and by when', () => {
    const found = isolationFinding(watch({ isolated: ['A1'] }));
    expect(found.outcome).toBe('told');
    expect(found.strings).toEqual(['A1']);
    expect(found.dropped).toEqual({ afterS: START + 40, byS: START + 50 });
    expect(found.returned).toBeNull();
    expect(found.units.filter((u) => u.fate === 'member_dropped')).toHaveLength(6);
    expect(found.units.filter((u) => u.fate === 'other_kept')).toHaveLength(18);
    const [a, b] = found.inputs;
    expect(a?.lost).toBeCloseTo(0.5, 1);
    expect(b?.lost).toBeCloseTo(0, 2);
  });

  it('names the member that kept its current and the other that lost it', () => {
    const w = watch({ isolated: ['A1'], swapped: true });
    expect(fates(w, 'member_kept')).toEqual(['A1-3']);
    expect(fates(w, 'other_dropped')).toEqual(['A2-3']);
    expect(fates(w, 'member_dropped')).toEqual(['A1-1', 'A1-2', 'A1-4', 'A1-5', 'A1-6']);
  });

  it('says the same after the string is back, and when it came back', () => {
    const w = watch({ isolated: ['A1'], swapped: true, untilS: 105, nowS: 400 });
    const found = isolationFinding(w);
    expect(found.outcome).toBe('told');
    expect(found.returned).toEqual({ afterS: START + 100, byS: START + 110 });
    expect(fates(w, 'member_kept')).toEqual(['A1-3']);
    expect(fates(w, 'other_dropped')).toEqual(['A2-3']);
  });

  it('is not decided by a single report', () => {
    expect(isolationFinding(watch({ isolated: ['A1'], nowS: 50, lost: 0 })).outcome).toBe('watching');
    expect(isolationFinding(watch({ isolated: ['A1'], nowS: 60, lost: 0 })).outcome).toBe('told');
  });

  it('notices that another string than the named one was isolated, and that two were', () => {
    const other = isolationFinding(watch({ isolated: ['B2'] }));
    expect([other.outcome, other.strings]).toEqual(['other_string', ['B2']]);
    const both = isolationFinding(
      watch({ isolated: ['A1', 'A2'], watched: 'A1', strings: [...NAMES, 'B3'] }),
    );
    expect([both.outcome, both.strings]).toEqual(['several_strings', ['A1', 'A2']]);
  });
});

describe('what fools nobody', () => {
  it.each<[string, (t: number) => number]>([
    ['a cloud that takes nine tenths', (t) => (t > 50 && t < 120 ? 0.1 : 1)],
    ['clouds that come and go', (t) => 0.55 + 0.4 * Math.sin(t / 11)],
    ['dusk', (t) => Math.max(0, 1 - t / 150)],
    ['an inverter that stops', (t) => (t > 60 ? 0 : 1)],
  ])('%s: no unit is said to have dropped', (_, sky) => {
    for (let nowS = 10; nowS <= 300; nowS += 10) {
      const found = isolationFinding(watch({ sky, nowS }));
      expect(['watching', 'cant_tell']).toContain(found.outcome);
      expect(found.units.every((u) => u.fate === 'not_told')).toBe(true);
    }
  });

  it('an inverter that stops is said to be one, and thick cloud too', () => {
    const stopped = isolationFinding(watch({ sky: (t) => (t > 60 ? 0 : 1) }));
    expect([stopped.outcome, stopped.reason]).toEqual(['cant_tell', 'everything_stopped']);
    const dull = isolationFinding(watch({ sky: (t) => (t > 60 ? 0.02 : 1) }));
    expect([dull.outcome, dull.reason]).toEqual(['cant_tell', 'too_little_current']);
  });

  it('the drop is found under a moving sky', () => {
    const w = watch({ isolated: ['A1'], swapped: true, sky: (t) => 0.55 + 0.35 * Math.sin(t / 13) });
    expect(isolationFinding(w).outcome).toBe('told');
    expect(fates(w, 'member_kept')).toEqual(['A1-3']);
    expect(fates(w, 'other_dropped')).toEqual(['A2-3']);
  });

  it('before the inverter runs and with a string by itself it can not be told', () => {
    expect(isolationFinding(watch({ level: 0.05 }))).toMatchObject({
      outcome: 'cant_tell',
      reason: 'no_current_before',
    });
    expect(isolationFinding(watch({ isolated: ['A1'], strings: ['A1'] }))).toMatchObject({
      outcome: 'cant_tell',
      reason: 'nothing_beside',
    });
    const mute = watch({ isolated: ['A1'] });
    const silent = { ...mute, units: mute.units.map((u) => ({ ...u, samples: [] })) };
    expect(isolationFinding(silent)).toMatchObject({ outcome: 'cant_tell', reason: 'no_reports' });
  });

  it('property: whatever the sky does, who is not in the isolated string is never said to be, and the other way round', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 1e6 }),
        fc.double({ min: 0.35, max: 1, noNaN: true }),
        fc.double({ min: 0, max: 0.25, noNaN: true }),
        fc.integer({ min: 11, max: 120 }),
        fc.constantFrom(...NAMES),
        (seed, mean, swing, fromS, string) => {
          const w = watch({
            seed,
            isolated: [string],
            watched: string,
            fromS,
            sky: (t) => mean + swing * Math.sin((t * seed) / 7e5),
          });
          const found = isolationFinding(w);
          expect(found.outcome).toBe('told');
          for (const u of found.units)
            if (u.string === string) expect(['member_dropped', 'not_told']).toContain(u.fate);
            else expect(['other_kept', 'not_told']).toContain(u.fate);
        },
      ),
      { numRuns: 60 },
    );
  });
});

describe('strings whose units report nothing', () => {
  const only = (scene: Scene) => {
    const w = watch(scene);
    return { ...w, units: [] };
  };
  it('the input tells that a string of it left, not which unit', () => {
    const found = isolationFinding(only({ isolated: ['A1'] }));
    expect([found.outcome, found.strings]).toEqual(['input_only', ['A1']]);
    expect(found.dropped).toEqual({ afterS: START + 40, byS: START + 50 });
    expect(found.units).toEqual([]);
    const back = isolationFinding(only({ isolated: ['A1'], untilS: 105, nowS: 400 }));
    expect([back.outcome, back.returned?.byS]).toEqual(['input_only', START + 110]);
  });
  it('another input that fell is named, a cloud is not', () => {
    const other = isolationFinding(only({ isolated: ['B1'] }));
    expect([other.outcome, other.strings]).toEqual(['other_string', ['B1', 'B2']]);
    expect(isolationFinding(only({ sky: (t) => (t > 40 ? 0.3 : 1) })).outcome).toBe('watching');
  });
});
