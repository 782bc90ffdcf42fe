import { describe, expect, it } from 'vitest';
import { idOf } from '../../../tests/support/now';
import { planOf } from '../../../tests/support/shutdown-test';
import type {
  RoundEvidence,
  StringConduct,
  TestFacts,
  TestRecord,
  TestRound,
} from '../../domain/commissioning/shutdown-test-record';
import { judgeTest } from '../../domain/commissioning/shutdown-test-verdict';
import type { ShutdownTestPage } from '../../schemas/api/shutdown-test';
import { stepWords } from './words';

const at = (s: number) => new Date(Date.parse('2026-06-01T10:00:00Z') + s * 1000).toISOString();
const stamp = (s: number) => ({ at: at(s), recordedAt: at(s), by: 'Una Lathe' });

const part = (name: string, homeRunLeavesArray = true): TestFacts['strings'][number] => ({
  id: idOf(name),
  name,
  kind: 'monitored',
  serials: ['S1'],
  homeRunLeavesArray,
  input: { name: 'x', strings: 1 },
  transmitters: [],
  shutdownV: { nominal: 0.6, max: 0.7 },
  passingFromV: 3,
});
const conduct = (name: string, more: Partial<StringConduct> = {}): StringConduct => ({
  string: idOf(name),
  traces: [],
  units: [],
  reports: 1,
  input: null,
  inputBeforeV: null,
  sums: [],
  inputs: [],
  inputAgain: null,
  ...more,
});
const passing = {
  position: 1,
  serial: 'S1',
  followed: null,
  passedAtS: 45,
  downBefore: false,
  basis: 'measured' as const,
  returned: null,
  heldAtS: null,
};

/** A page in its first round, the command at 10:00 by the logger, of strings by name. */
function pageOf(
  strings: Record<string, Partial<StringConduct>>,
  round: Partial<TestRound> = {},
  seen: Partial<RoundEvidence> = {},
  parts = Object.keys(strings).map((name) => part(name)),
): ShutdownTestPage {
  const facts: TestFacts = {
    site: { id: idOf('site'), name: 'Site', timeZone: 'UTC' },
    zone: { id: idOf('zone'), name: 'Zone 1' },
    initiator: { name: 'Main initiator', place: 'Gate' },
    ruleSet: 'rapid_shutdown_30s',
    reportIntervalS: 60,
    transmitters: [],
    strings: parts,
  };
  const record: TestRecord = {
    plan: planOf(facts.strings.map((s) => s.id)),
    planned: stamp(-120),
    caution: { ...stamp(-100), name: 'Una Lathe' },
    rounds: [
      {
        transmitter: null,
        watchStarted: stamp(-60),
        operated: stamp(2),
        released: null,
        ended: null,
        readings: [],
        ...round,
      },
    ],
    provedAfter: null,
    remarks: [],
    newest: null,
    people: ['Una Lathe'],
  };
  const evidence: RoundEvidence[] = [
    {
      command: { inForce: 'initiator', where: 'Zone 1', since: at(0), by: '' },
      release: null,
      origin: 'reported',
      from: at(-120),
      to: at(200),
      strings: Object.entries(strings).map(([name, more]) => conduct(name, more)),
      ...seen,
    },
  ];
  return {
    at: at(60),
    id: idOf('test'),
    site: { id: idOf('site'), name: 'Site', place: '', timeZone: 'UTC' },
    state: 'draft',
    startedAt: at(-200),
    startedBy: 'Una Lathe',
    ended: null,
    follows: null,
    suggested: null,
    facts,
    record,
    evidence,
    verdict: judgeTest(facts, record, evidence),
    watch: { canWatch: true, words: '', newestAt: null, inForce: [] },
    unheard: { unheard: 0, units: 0 },
    fingerprint: '',
    others: [],
  };
}
const said = (page: ShutdownTestPage) => {
  const { heading, sentence } = stepWords(page, page.record, 0);
  return { heading: heading.replaceAll('\u00a0', ' '), sentence: sentence.replaceAll('\u00a0', ' ') };
};
const held = (v: number, s = 45): Partial<StringConduct> => ({ inputs: [[s, v]] });
const many = (n: number, more: Partial<StringConduct>) =>
  Object.fromEntries(Array.from({ length: n }, (_, i) => [`C${i + 1}`, more]));

describe('the finding while a round is watched', () => {
  it('counts every string over its limit past the time limit, wherever it was measured', () => {
    const some = { ...many(13, held(410)), C1: { ...held(410), units: [passing] } };
    expect(said(pageOf(some)).heading).toBe('13 of 13 strings are still above 30 V');
    expect(said(pageOf({ ...some, C13: held(8) })).heading).toBe('12 of 13 strings are still above 30 V');
  });
  it('names few, and all of them', () => {
    expect(said(pageOf({ A1: held(8), A2: held(410), A3: held(300) })).heading).toBe(
      'A2 and A3 are still above 30 V',
    );
    expect(said(pageOf({ A1: held(8), A3: { ...held(300), units: [passing] } })).heading).toBe(
      'A3 did not shut down',
    );
  });
  it('says of how many nothing is known since the limit', () => {
    const { sentence } = said(pageOf({ A1: held(410), A2: held(410, 20), A3: {} }));
    expect(sentence).toMatch(/^Treat every string as live\. Of 2 strings nothing is known since the 30 s\./);
  });
  it('has no one limit where home runs differ', () => {
    const parts = [part('A1'), part('A2', false)];
    const { heading } = said(pageOf({ A1: held(410), A2: held(410) }, {}, {}, parts));
    expect(heading).toBe('A1 and A2 are still above their limits');
  });
  it('claims nothing before the limit', () => {
    expect(said(pageOf(many(3, held(410, 20)))).heading).toBe(
      'Main initiator was operated: read the home runs',
    );
  });
  it('tells of the release by tap or report before what did not shut down, and still tells that', () => {
    const strings = { A1: held(8), A3: { ...held(300), units: [passing] } };
    for (const page of [
      pageOf(strings, { released: stamp(90) }),
      pageOf(strings, {}, { release: { since: at(90) } }),
    ])
      expect(said(page)).toMatchObject({
        heading: 'Released: watch Zone 1 come back',
        sentence: expect.stringMatching(/^A3 did not shut down\. Every string is live again\./) as string,
      });
    expect(said(pageOf(strings)).sentence).toContain('Clear the roof, then release');
  });
  it('takes what comes back after the release for no failure', () => {
    const back: Partial<StringConduct> = {
      inputs: [
        [45, 8],
        [100, 410],
      ],
    };
    const { sentence } = said(pageOf({ A1: back, A2: back }, { released: stamp(90) }));
    expect(sentence).toBe('Units that do not come back are stuck; the verdict names them.');
    const up = { A1: back, ...many(4, held(410)) };
    expect(said(pageOf(up, { released: stamp(90) })).sentence).toMatch(
      /^4 of 5 strings did not come down in time\. Every/,
    );
  });
  it('waits for a person only until the logger reports the command', () => {
    const strings = many(2, held(410, 20));
    const waiting = said(pageOf(strings, { operated: null }, { command: null, origin: null }));
    expect(waiting.heading).toBe('Watching Zone 1: waiting for a person to operate Main initiator');
    expect(waiting.sentence).toMatch(/only a string that was live can be shown to shut down\.$/);
    expect(said(pageOf(strings, { operated: null })).heading).toBe(
      'The logger reports a shutdown: read the home runs',
    );
  });
});
