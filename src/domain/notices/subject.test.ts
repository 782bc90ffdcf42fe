import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { OVER_AFTER_S, toldOf, TOLD_EVENTS, type NoticeEvent } from './event';
import { afterEvent, afterWait, type SubjectState } from './subject';
import { EVENT_KINDS } from '../verdicts/codes';

const T0 = Date.UTC(2026, 11, 1, 10);
const minutes = (m: number) => new Date(T0 + m * 60_000);

/** Runs comings and goings, minute by minute; what was told, and when. */
function run(moves: readonly { at: number; phase: 'comes' | 'goes' }[], untilMin: number, waitS = 0) {
  let state: SubjectState | null = null;
  const told: { what: 'comes' | 'goes'; at: number }[] = [];
  let there = false;
  let lastCame = 0;
  for (let m = 0; m <= untilMin; m++) {
    moves.forEach((move, i) => {
      if (move.at !== m) return;
      there = move.phase === 'comes';
      const step = afterEvent(
        state,
        { id: i + 1, phase: move.phase, at: minutes(m), waitS, holds: there },
        minutes(m),
      );
      state = step.state;
      if (step.tell) told.push({ what: step.tell, at: m });
    });
    if (!state) continue;
    const step = afterWait(state, there, minutes(m));
    state = step.state;
    lastCame = step.state.came;
    if (step.tell) told.push({ what: step.tell, at: m });
  }
  return { told, came: lastCame };
}

describe('what comes and goes', () => {
  it('is told when it comes, and over once it stayed away for half an hour', () => {
    expect(
      run(
        [
          { at: 0, phase: 'comes' },
          { at: 60, phase: 'goes' },
        ],
        200,
      ).told,
    ).toEqual([
      { what: 'comes', at: 0 },
      { what: 'goes', at: 90 },
    ]);
  });

  it('that flaps is one line, and says how often it came back', () => {
    const moves = [0, 10, 20].flatMap((at) => [
      { at, phase: 'comes' as const },
      { at: at + 5, phase: 'goes' as const },
    ]);
    expect(run(moves, 200).told).toEqual([
      { what: 'comes', at: 0 },
      { what: 'goes', at: 55 },
    ]);
    expect(run(moves, 26).came).toBe(2);
  });

  it('that has to last is not told when it went before', () => {
    const brief = [
      { at: 0, phase: 'comes' as const },
      { at: 20, phase: 'goes' as const },
    ];
    expect(run(brief, 300, 3600).told).toEqual([]);
    expect(run(brief.slice(0, 1), 300, 3600).told).toEqual([{ what: 'comes', at: 60 }]);
  });

  it('that is over by the time it is read is never told', () => {
    const step = afterEvent(
      null,
      { id: 1, phase: 'comes', at: minutes(0), waitS: 0, holds: false },
      minutes(300),
    );
    expect(step.tell).toBeNull();
    const gone = afterEvent(
      step.state,
      { id: 2, phase: 'goes', at: minutes(9), waitS: 0, holds: false },
      minutes(300),
    );
    expect(afterWait(gone.state, false, minutes(300)).tell).toBeNull();
  });

  it('told goes and comes in turn, never over sooner than stated, and an event twice is once', () => {
    const moves = fc
      .uniqueArray(fc.integer({ min: 0, max: 400 }), { minLength: 1, maxLength: 25 })
      .map((at) =>
        [...at]
          .sort((a, b) => a - b)
          .map((m, i) => ({ at: m, phase: i % 2 ? ('goes' as const) : ('comes' as const) })),
      );
    fc.assert(
      fc.property(moves, fc.constantFrom(0, 600, 3600), (list, waitS) => {
        const { told } = run(list, 1000, waitS);
        told.forEach((t, i) => {
          expect(t.what).toBe(i % 2 ? 'goes' : 'comes');
          const last = list.filter((m) => m.at <= t.at).at(-1);
          if (t.what === 'goes') {
            expect(last?.phase).toBe('goes');
            expect(t.at - (last?.at ?? 0)).toBeGreaterThanOrEqual(OVER_AFTER_S / 60);
          } else expect(last?.phase).toBe('comes');
        });
        // at the end people know what is so
        const end = list.at(-1)?.phase;
        expect(told.length % 2 === 1).toBe(end === 'comes');
      }),
    );
    const once = afterEvent(
      null,
      { id: 7, phase: 'comes', at: minutes(0), waitS: 0, holds: true },
      minutes(0),
    );
    const gone = afterEvent(
      once.state,
      { id: 8, phase: 'goes', at: minutes(1), waitS: 0, holds: false },
      minutes(1),
    );
    const twice = afterEvent(
      gone.state,
      { id: 7, phase: 'comes', at: minutes(0), waitS: 0, holds: true },
      minutes(2),
    );
    expect(twice.state).toEqual(gone.state);
  });
});

describe('what an event is to people', () => {
  const event = (more: Partial<NoticeEvent>): NoticeEvent => ({
    id: 1,
    kind: 'cause_opened',
    at: minutes(0),
    recordedAt: minutes(0),
    siteId: 5,
    detail: {},
    ...more,
  });

  it.each<[NoticeEvent['kind'], Record<string, unknown>, string[]]>([
    ['cause_opened', { cause: 'x', kind: 'not_shutting_down', hazard: true }, ['hazard']],
    ['cause_opened', { cause: 'x', kind: 'silent' }, ['silence']],
    ['cause_reopened', { cause: 'x', kind: 'stuck' }, ['cause']],
    ['cause_opened', {}, []],
    ['case_opened', { origin: 'customer' }, ['report']],
    ['case_opened', { origin: 'hand' }, ['case']],
    ['case_closed', {}, ['own_report', 'case']],
    ['units_stuck', {}, []],
  ])('%s %j', (kind, detail, expected) => {
    expect(toldOf(event({ kind, detail })).map((t) => t.kind)).toEqual(expected);
  });

  it('history is no news, but what lasts is told while it lasts', () => {
    const recordedAt = minutes(61);
    expect(toldOf(event({ kind: 'case_opened', recordedAt, detail: { origin: 'hand' } }))).toEqual([]);
    expect(toldOf(event({ recordedAt, detail: { cause: 'x' } }))).toHaveLength(1);
  });

  it('names people only by whole numbers', () => {
    const [mine] = toldOf(event({ kind: 'case_mentioned', detail: { mentions: [3, '4', null, 1.5] } }));
    expect(mine?.to).toEqual([3]);
  });

  it('reads every kind that it tells of, and no other', () => {
    const detail = { cause: 'x', gateway: 'G1', logger: 'L1', assigneeId: 1, mentions: [1] };
    const tells = EVENT_KINDS.filter((kind) => toldOf(event({ kind, detail })).length > 0);
    expect([...tells].sort()).toEqual([...TOLD_EVENTS].sort());
  });
});
