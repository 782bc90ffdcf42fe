import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CaptureMemory } from './capture-memory';
import {
  OPEN_LINK,
  backOff,
  corrected,
  kept,
  leftOut,
  nextStep,
  ofPerson,
  settle,
  signedIn,
  tally,
  wakeLink,
  type Answer,
  type Link,
  type Waiting,
} from './capture-queue';
import { sendRound } from './capture-sender';
import type { NewRecord } from './capture-store';

const NOW = 1_000_000;
const problem = { title: 'No', message: 'Not so.', fields: [] };
let made = 0;
const waiting = (some: Partial<Waiting> = {}): Waiting => ({
  ref: `ref-${++made}`,
  person: 'ada',
  site: 'site',
  string: 'B2',
  kind: 'reading',
  number: made,
  madeAt: '2026-12-01T10:00:00.000Z',
  label: 'B2',
  body: { supersedes: null },
  state: 'waiting',
  tries: 0,
  notBefore: 0,
  problem: null,
  current: null,
  ...some,
});
const sent = (step: ReturnType<typeof nextStep>): string | null => ('send' in step ? step.send.ref : null);

describe('what goes next', () => {
  it('is the oldest of the person, and nobody else’s', () => {
    const first = waiting();
    const second = waiting();
    const others = waiting({ person: 'bo', number: 0 });
    expect(sent(nextStep([second, others, first], 'ada', OPEN_LINK, NOW))).toBe(first.ref);
    expect(sent(nextStep([second, others, first], 'bo', OPEN_LINK, NOW))).toBe(others.ref);
    expect(nextStep([others], 'ada', OPEN_LINK, NOW)).toEqual({ idle: true });
    expect(tally([first, second, others], 'ada')).toEqual({
      waiting: 2,
      conflicts: 0,
      refused: 0,
      ofOthers: 1,
    });
  });

  it('waits with what wants a decision for all that speaks of it, and goes on with the rest', () => {
    const conflict = waiting({ state: 'conflict' });
    const correction = waiting({ body: { supersedes: conflict.ref } });
    const photo = waiting({ kind: 'photo', body: { subjectRef: correction.ref } });
    const other = waiting();
    expect(sent(nextStep([conflict, correction, photo, other], 'ada', OPEN_LINK, NOW))).toBe(other.ref);
    expect(nextStep([conflict, correction, photo], 'ada', OPEN_LINK, NOW)).toEqual({ idle: true });
  });

  it('keeps the order within a string behind one that the server could not take, not of other strings', () => {
    const busy = waiting({ notBefore: NOW + 5000 });
    const same = waiting();
    const other = waiting({ string: 'B3' });
    expect(sent(nextStep([busy, same, other], 'ada', OPEN_LINK, NOW))).toBe(other.ref);
    expect(nextStep([busy, same], 'ada', OPEN_LINK, NOW)).toEqual({ waitUntil: NOW + 5000 });
    expect(sent(nextStep([busy, same], 'ada', OPEN_LINK, NOW + 5000))).toBe(busy.ref);
  });

  it('is nothing while nobody or another person is signed in, and waits for the network', () => {
    const one = [waiting()];
    for (const state of ['signed_out', 'other_person'] as const)
      expect(nextStep(one, 'ada', { ...OPEN_LINK, state }, NOW)).toEqual({ idle: true });
    const away: Link = { state: 'unreachable', tries: 2, notBefore: NOW + 900 };
    expect(nextStep(one, 'ada', away, NOW)).toEqual({ waitUntil: NOW + 900 });
    expect(sent(nextStep(one, 'ada', wakeLink(away), NOW))).toBe(one[0]?.ref);
  });
});

describe('an answer', () => {
  const record = waiting();
  it('that it is stored takes the record off the phone and opens the link', () => {
    const away: Link = { state: 'unreachable', tries: 3, notBefore: NOW };
    expect(settle(record, { kind: 'stored' }, away, NOW, 0)).toEqual({ record: null, link: OPEN_LINK });
  });
  it('that never came leaves the record as it is and holds the link back, longer each time', () => {
    let link = OPEN_LINK;
    const waits: number[] = [];
    for (let i = 0; i < 12; i++) {
      const settled = settle(record, { kind: 'unreachable' }, link, NOW, 0);
      expect(settled.record).toBe(record);
      waits.push(settled.link.notBefore - NOW);
      link = settled.link;
    }
    expect(waits.slice(0, 4)).toEqual([2000, 4000, 8000, 16_000]);
    expect(waits.at(-1)).toBe(300_000);
    expect(backOff(0, 1)).toBe(1000);
  });
  it('of a busy server holds this record back, as long as the server says', () => {
    expect(settle(record, { kind: 'busy', retryAfterS: 40 }, OPEN_LINK, NOW, 0).record).toMatchObject({
      tries: 1,
      notBefore: NOW + 40_000,
    });
  });
  it('of a conflict or a refusal waits for its person; put right it goes again under the same ref', () => {
    const current = { ref: 'theirs' };
    const conflict = settle(record, { kind: 'conflict', current, problem }, OPEN_LINK, NOW, 0).record!;
    expect(conflict).toMatchObject({ state: 'conflict', current });
    expect(kept(conflict, 'theirs')).toMatchObject({
      ref: record.ref,
      state: 'waiting',
      body: { supersedes: 'theirs' },
    });
    const refused = settle(record, { kind: 'refused', problem }, OPEN_LINK, NOW, 0).record!;
    expect(corrected(refused, { voltage: 8 }, 'B2: 8 V')).toMatchObject({
      ref: record.ref,
      state: 'waiting',
      problem: null,
      body: { voltage: 8 },
    });
  });
  it('of an ended session keeps the record and waits for the sign-in', () => {
    const { record: same, link } = settle(record, { kind: 'signed_out' }, OPEN_LINK, NOW, 0);
    expect(same).toBe(record);
    expect(nextStep([record], 'ada', link, NOW)).toEqual({ idle: true });
    expect(sent(nextStep([record], 'ada', signedIn(), NOW))).toBe(record.ref);
  });
});

it('what spoke of a record that is left out speaks of the one that stands', () => {
  const mine = waiting({ state: 'conflict', body: { supersedes: 'older' } });
  const correction = waiting({ body: { supersedes: mine.ref } });
  const photo = waiting({ kind: 'photo', body: { subjectRef: mine.ref } });
  const both = leftOut([mine, correction, photo], mine.ref, 'theirs');
  expect(both.removed).toEqual([mine.ref]);
  expect(both.changed.map((r) => r.body)).toEqual([{ supersedes: 'theirs' }, { subjectRef: 'theirs' }]);
  const without = leftOut([mine, correction, photo], mine.ref, null);
  expect(without.changed.map((r) => r.body)).toEqual([{ supersedes: 'older' }, { subjectRef: 'older' }]);
  const first = waiting();
  const of = waiting({ kind: 'photo', body: { subjectRef: first.ref } });
  expect(leftOut([first, of], first.ref, null).removed).toEqual([first.ref, of.ref]);
});

/** A server that stores each ref once, and whose newest record of a thing must be named by what replaces it. */
class Server {
  readonly stored: { ref: string; person: string; thing: string; supersedes: string | null }[] = [];
  takes(record: Waiting): Answer {
    const body = record.body as { supersedes: string | null; thing: string };
    if (this.stored.some((s) => s.ref === record.ref)) return { kind: 'stored' };
    const newest = this.stored.filter((s) => s.thing === body.thing).at(-1) ?? null;
    if ((newest?.ref ?? null) !== body.supersedes)
      return { kind: 'conflict', current: { ref: newest?.ref ?? null }, problem };
    this.stored.push({
      ref: record.ref,
      person: record.person,
      thing: body.thing,
      supersedes: body.supersedes,
    });
    return { kind: 'stored' };
  }
}
const MISHAPS = [
  'none',
  'lost_before',
  'lost_after',
  'busy',
  'signed_out',
  'crash_before',
  'crash_after',
] as const;
class Crash extends Error {}

describe('whatever goes wrong in between', () => {
  const acts = fc.array(
    fc.oneof(
      { weight: 3, arbitrary: fc.record({ act: fc.constant('record' as const), thing: fc.nat({ max: 3 }) }) },
      {
        weight: 4,
        arbitrary: fc.record({
          act: fc.constant('send' as const),
          mishaps: fc.array(fc.constantFrom(...MISHAPS), { maxLength: 5 }),
        }),
      },
      {
        weight: 1,
        arbitrary: fc.record({ act: fc.constant('somebody' as const), thing: fc.nat({ max: 3 }) }),
      },
    ),
    { maxLength: 40 },
  );

  it('each record is stored exactly once, in order, and nothing is left behind', async () => {
    await fc.assert(
      fc.asyncProperty(acts, async (list) => {
        const server = new Server();
        const phone = new CaptureMemory();
        const newestOnPhone = new Map<string, string>();
        const refs: string[] = [];
        let now = NOW;
        let link: Link = OPEN_LINK;
        let count = 0;
        const record = async (thing: string): Promise<void> => {
          const ref = `mine-${++count}`;
          const standing =
            newestOnPhone.get(thing) ?? server.stored.filter((s) => s.thing === thing).at(-1)?.ref;
          const made: NewRecord = {
            ...{ ref, person: 'ada', site: 's', string: thing, kind: 'reading', madeAt: '', label: ref },
            body: { thing, supersedes: standing ?? null },
          };
          newestOnPhone.set(thing, ref);
          refs.push(ref);
          await phone.add([made]);
        };
        const round = async (mishaps: string[]): Promise<void> => {
          now += 600_000;
          const queue = [...mishaps];
          try {
            const result = await sendRound(
              {
                kept: phone,
                person: 'ada',
                now: () => now,
                random: () => 0.5,
                send: (sending) => {
                  const mishap = queue.shift() ?? 'none';
                  if (mishap === 'crash_before') throw new Crash();
                  if (mishap === 'lost_before') return Promise.resolve({ kind: 'unreachable' });
                  if (mishap === 'busy') return Promise.resolve({ kind: 'busy', retryAfterS: null });
                  if (mishap === 'signed_out') return Promise.resolve({ kind: 'signed_out' });
                  const answer = server.takes(sending);
                  if (mishap === 'crash_after') throw new Crash();
                  if (mishap === 'lost_after') return Promise.resolve({ kind: 'unreachable' });
                  return Promise.resolve(answer);
                },
              },
              link,
            );
            link = result.link;
          } catch (error) {
            if (!(error instanceof Crash)) throw error;
            link = OPEN_LINK; // the page is loaded again: what is kept is all that is left
          }
          if (link.state === 'signed_out') link = signedIn();
          // their person keeps the own record of every conflict
          for (const one of ofPerson(await phone.all(), 'ada'))
            if (one.state === 'conflict')
              await phone.change([kept(one, (one.current as { ref: string }).ref)]);
        };
        for (const act of list) {
          if (act.act === 'record') await record(`t${act.thing}`);
          else if (act.act === 'send') await round(act.mishaps);
          else {
            const thing = `t${act.thing}`;
            const supersedes = server.stored.filter((s) => s.thing === thing).at(-1)?.ref ?? null;
            server.stored.push({ ref: `theirs-${++count}`, person: 'bo', thing, supersedes });
          }
        }
        for (let i = 0; i < refs.length + 2; i++) await round([]);
        expect(await phone.all()).toEqual([]);
        const mine = server.stored.filter((s) => s.person === 'ada').map((s) => s.ref);
        expect([...mine].sort()).toEqual([...refs].sort());
        for (const thing of new Set(server.stored.map((s) => s.thing))) {
          const chain = server.stored.filter((s) => s.thing === thing);
          chain.forEach((s, i) => expect(s.supersedes).toBe(i === 0 ? null : chain[i - 1]!.ref));
          const own = chain.filter((s) => s.person === 'ada').map((s) => Number(s.ref.split('-')[1]));
          expect(own).toEqual([...own].sort((a, b) => a - b));
        }
      }),
      { numRuns: 300 },
    );
  });
});
