import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  causeChanges,
  type CauseChange,
  type FoundCause,
  type FoundUnit,
  type Situation,
  type StoredCause,
  type UnitSays,
} from './changes';
import { CAUSE_KINDS, PATIENCE, type CauseKind } from './kinds';

const T0 = 1_790_000_000;
const unit = (position: number, sinceS = T0 - 3600): FoundUnit => ({
  stringId: 'a1',
  stringName: 'A1',
  position,
  serial: `U${position}`,
  sinceS,
});
const found = (positions: number[], more: Partial<FoundCause> = {}, sinceS = T0 - 3600): FoundCause => ({
  key: 'stuck:transmitter:T1',
  kind: 'stuck',
  sharedPart: { kind: 'transmitter', name: 'T1' },
  headline: `Transmitter T1 is not heard by ${positions.length} units`,
  evidence: 'e',
  figures: {},
  alternatives: [],
  confidence: 0.9,
  units: positions.map((p) => unit(p, sinceS)),
  sinceS,
  lossWhDay: null,
  ...more,
});

/** Rows as the changes leave them. */
function applied(
  stored: readonly StoredCause[],
  changes: readonly CauseChange[],
  nowS: number,
): StoredCause[] {
  const rows = new Map(stored.map((s) => [s.id, s]));
  let next = Math.max(0, ...rows.keys()) + 1;
  for (const c of changes) {
    if (c.do === 'open')
      rows.set(next, {
        ...c.cause,
        id: next++,
        openedS: nowS,
        changedS: nowS,
        closedS: null,
        clearSinceS: null,
      });
    else if (c.do === 'close') rows.set(c.stored.id, { ...c.stored, closedS: nowS, changedS: nowS });
    else
      rows.set(c.stored.id, {
        ...c.stored,
        ...c.cause,
        closedS: null,
        clearSinceS: c.do === 'note' ? c.clearSinceS : null,
        changedS: c.do === 'note' ? c.stored.changedS : nowS,
      });
  }
  return [...rows.values()];
}

/** A site over time: what is found, what units say, what comes of it. */
class Story {
  rows: StoredCause[] = [];
  nowS = T0;
  told: string[] = [];
  look(
    afterS: number,
    list: FoundCause[],
    says: Situation['says'] = () => 'well',
    atRest: Situation['atRest'] = () => false,
  ): string[] {
    this.nowS += afterS;
    const changes = causeChanges({ nowS: this.nowS, stored: this.rows, found: list, says, atRest });
    this.rows = applied(this.rows, changes, this.nowS);
    const told = changes.flatMap((c) => (c.do === 'note' ? [] : [c.do]));
    this.told.push(...told);
    return told;
  }
  get open(): StoredCause[] {
    return this.rows.filter((r) => r.closedS === null);
  }
}
const dark: Situation['says'] = () => 'unknown';

describe('a cause over time', () => {
  it('opens, grows, shrinks, closes and comes back as the same', () => {
    const s = new Story();
    expect(s.look(0, [found([1, 2])])).toEqual(['open']);
    expect(s.look(600, [found([1, 2, 3])])).toEqual(['change']);
    expect(s.look(600, [found([3])])).toEqual(['change']);
    expect(s.open[0]!.units.map((u) => u.position)).toEqual([3]);
    expect(s.look(60, [])).toEqual([]);
    expect(s.look(60, [])).toEqual([]);
    expect(s.look(120, [])).toEqual(['close']);
    expect(s.look(3600, [found([3])])).toEqual(['reopen']);
    expect(s.rows).toHaveLength(1);
  });
  it('does not open before it has stood for a while, and a hazard at once', () => {
    const s = new Story();
    expect(s.look(0, [found([1], {}, T0 - 30)])).toEqual([]);
    const hazard = found([1], { kind: 'not_shutting_down', key: 'n' }, T0);
    expect(s.look(0, [hazard])).toEqual(['open']);
    expect(s.look(1, [{ ...hazard, units: [unit(1), unit(2)] }])).toEqual(['change']);
  });
  it('what comes and goes within minutes is told once', () => {
    const s = new Story();
    s.look(0, [found([1, 2])]);
    for (let k = 0; k < 20; k++) s.look(60, k % 2 ? [found([1, 2])] : []);
    expect(s.told).toEqual(['open']);
  });
  it('lasts through the night, and units that appear one by one at dawn change nothing', () => {
    const s = new Story();
    s.look(0, [found([1, 2, 3])]);
    for (let k = 0; k < 10; k++) s.look(3600, [], dark);
    const alone = (p: number): FoundCause => found([p], { key: `stuck:unit:${p}`, sharedPart: null });
    s.look(60, [alone(2)], dark);
    s.look(60, [alone(2), alone(3)], dark);
    s.look(600, [found([1, 2, 3])], dark);
    expect(s.told).toEqual(['open']);
    expect(s.open[0]!.key).toBe('stuck:transmitter:T1');
  });
  it('an explanation that gives way to another keeps its row', () => {
    const s = new Story();
    s.look(
      0,
      [1, 2].map((p) => found([p], { key: `stuck:unit:${p}`, sharedPart: null })),
    );
    expect(s.open).toHaveLength(2);
    expect(s.look(600, [found([1, 2, 3])]).sort()).toEqual(['change', 'close']);
    expect(s.open).toHaveLength(1);
    expect(s.open[0]).toMatchObject({ id: 1, key: 'stuck:transmitter:T1' });
  });
  it('a unit that is replaced takes its cause with it; the new one begins its own', () => {
    const s = new Story();
    s.look(0, [found([4], { key: 'stuck:unit:a1:4' })]);
    const other = { ...unit(4), serial: 'NEW' };
    s.look(400, [], (_, u) => (u.serial === 'NEW' ? 'shows' : 'gone'));
    s.look(400, [], (_, u) => (u.serial === 'NEW' ? 'shows' : 'gone'));
    expect(s.open).toEqual([]);
    s.look(400, [{ ...found([4], { key: 'stuck:unit:a1:4' }), units: [other] }]);
    expect(s.rows).toHaveLength(2);
    expect(s.told).toEqual(['open', 'close', 'open']);
  });
  it('planned works are no alarm, a hazard during them is', () => {
    const s = new Story();
    const rest = (): boolean => true;
    expect(s.look(0, [found([1])], undefined, rest)).toEqual([]);
    expect(s.look(0, [found([1], { kind: 'not_shutting_down', key: 'n' })], undefined, rest)).toEqual([
      'open',
    ]);
    s.look(0, [found([2])]);
    // what was open stays as it is until they are over
    const hazard = found([1], { kind: 'not_shutting_down', key: 'n' });
    expect(s.look(6000, [found([2, 3]), hazard], undefined, rest)).toEqual([]);
    expect(s.open.some((c) => c.kind === 'stuck' && c.units.length === 1)).toBe(true);
  });
  it('after its time a cause is another one', () => {
    const s = new Story();
    s.look(0, [found([1])]);
    s.look(60, []);
    s.look(600, []);
    expect(s.look(PATIENCE.stuck.reopenS + 60, [found([1])])).toEqual(['open']);
  });
});

const SAYS: UnitSays[] = ['shows', 'well', 'unknown', 'gone'];
const causeArb = fc
  .record({
    kind: fc.constantFrom<CauseKind>(...CAUSE_KINDS),
    key: fc.constantFrom('a', 'b', 'c'),
    positions: fc.uniqueArray(fc.integer({ min: 1, max: 8 }), { minLength: 1, maxLength: 8 }),
    age: fc.integer({ min: 0, max: 5000 }),
  })
  .map(
    ({ kind, key, positions, age }) =>
      (nowS: number) =>
        found(positions, { kind, key: `${kind}:${key}` }, nowS - age),
  );
const stepArb = fc.record({
  afterS: fc.integer({ min: 0, max: 20_000 }),
  // of one kind and moment a unit has one explanation, and a key is there once
  list: fc.uniqueArray(causeArb, { maxLength: 5, selector: (c) => c(0).key }),
  says: fc.array(fc.constantFrom(...SAYS), { minLength: 8, maxLength: 8 }),
  rest: fc.array(fc.boolean(), { minLength: 8, maxLength: 8 }),
});

const disjoint = (list: readonly FoundCause[]): FoundCause[] => {
  const seen = new Set<string>();
  return list.flatMap((c) => {
    const units = c.units.filter((u) => !seen.has(`${c.kind} ${u.position}`));
    units.forEach((u) => seen.add(`${c.kind} ${u.position}`));
    return units.length > 0 ? [{ ...c, units }] : [];
  });
};

describe('whatever happens', () => {
  it('the same situation twice changes nothing more, keys of open rows are unique, and every change is one', () => {
    fc.assert(
      fc.property(fc.array(stepArb, { maxLength: 12 }), (steps) => {
        let rows: StoredCause[] = [];
        let nowS = T0;
        for (const step of steps) {
          nowS += step.afterS;
          const situation: Omit<Situation, 'stored'> = {
            nowS,
            found: disjoint(step.list.map((c) => c(nowS))),
            says: (_, u) => step.says[(u.position ?? 1) - 1]!,
            atRest: (u) => step.rest[(u.position ?? 1) - 1]!,
          };
          const changes = causeChanges({ ...situation, stored: rows });
          const touched = changes.flatMap((c) => (c.do === 'open' ? [] : [c.stored.id]));
          expect(new Set(touched).size).toBe(touched.length);
          for (const c of changes)
            if (c.do === 'change')
              expect([c.cause.key, c.cause.units, c.cause.sharedPart]).not.toEqual([
                c.stored.key,
                c.stored.units,
                c.stored.sharedPart,
              ]);
          rows = applied(rows, changes, nowS);
          const keys = rows.filter((r) => r.closedS === null).map((r) => r.key);
          expect(new Set(keys).size).toBe(keys.length);
          for (const r of rows) expect(r.units.length).toBeGreaterThan(0);
          const again = causeChanges({ ...situation, stored: rows }).filter((c) => c.do !== 'note');
          expect(again).toEqual([]);
        }
      }),
      { numRuns: 400 },
    );
  });
  it('the order in which things are found does not matter for how many causes there are', () => {
    fc.assert(
      fc.property(stepArb, (step) => {
        const list = disjoint(step.list.map((c) => c(T0)));
        const run = (l: FoundCause[]): string[] =>
          causeChanges({ nowS: T0, stored: [], found: l, says: () => 'well', atRest: () => false })
            .flatMap((c) => (c.do === 'open' ? [c.cause.key] : []))
            .sort();
        expect(run([...list].reverse())).toEqual(run(list));
      }),
    );
  });
});
