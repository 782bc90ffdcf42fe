import { judgeTest, type CarriedResult } from '../../domain/commissioning/shutdown-test-verdict';
import { recordOf, type KeptAct, type TestPlan } from '../../domain/commissioning/shutdown-test-record';
import type { ShutdownTestPage, SignedTest } from '../../schemas/api/shutdown-test';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import {
  actsOf,
  resultsInForce,
  signedTest,
  testHead,
  type InForce,
  type TestHead,
} from '../queries/shutdown-tests';
import { unheardUnits, watchedZone, type WatchedZone } from '../queries/shutdown-test-evidence';
import { visibleSite, type VisibleSite } from '../queries/visible-site';
import { fingerprintOf } from '../reports/fingerprint';
import { signedContent } from './shutdown-test-content';
import { readEvidence, readWatch } from './shutdown-test-evidence';
import { testPageWords } from '../../words/refusals-cases';

/** People who wrote to a test within this time are at it. */
const AT_IT_MS = 30 * 60_000;

export type Content = Omit<SignedTest, 'signature'>;
export interface Draft {
  head: TestHead;
  site: VisibleSite;
  zone: WatchedZone;
  acts: KeptAct[];
  content: Content;
  inForce: InForce[];
}

/**
 * A test that is not signed, as it stands: what people did, what was reported, and what follows from both.
 * @throws AppError not_found
 */
export async function readDraft(tx: Tx, head: TestHead, now: Date): Promise<Draft> {
  const site = found(await visibleSite(tx, head.siteRef), 'site');
  const zone = found(await watchedZone(tx, head.zoneId), 'zone');
  const acts = await actsOf(tx, head.draftId);
  const record = recordOf(acts);
  const evidence = await readEvidence(tx, zone, record, now);
  const inForce = await resultsInForce(tx, head.zoneId);
  const carried = inForce.map((r): CarriedResult => {
    const from = r.carriedFrom ?? { test: r.test, at: r.at };
    const at = new Date(from.at).toISOString();
    return {
      string: r.string,
      name: r.name,
      result: r.result,
      words: testPageWords.stands(at.slice(0, 10)),
      test: from.test,
      at,
    };
  });
  const follows = head.followsId === null ? undefined : await signedTest(tx, { id: head.followsId });
  const content: Content = {
    version: 1,
    test: head.ref,
    facts: zone.facts,
    record,
    evidence,
    verdict: judgeTest(zone.facts, record, evidence, carried),
    follows: follows ? { test: follows.ref, at: follows.at.toISOString() } : null,
  };
  return { head, site, zone, acts, content, inForce };
}

/** The plan of the test that is repeated, for the strings that failed there (for those left open, where none did). */
function suggestedPlan(detail: unknown, zone: WatchedZone): TestPlan | null {
  const before = signedContent(detail);
  const plan = before?.record.plan;
  if (!before || !plan) return null;
  const here = new Set(zone.strings.map((s) => s.part.id));
  const open = before.verdict.strings.filter((s) => here.has(s.string) && s.result !== 'passed');
  const failed = open.filter((s) => s.result === 'failed');
  const strings = (failed.length > 0 ? failed : open).map((s) => s.string);
  const heard = zone.facts.strings.filter((s) => strings.includes(s.id)).flatMap((s) => s.transmitters);
  return {
    ...plan,
    strings,
    rounds: plan.rounds.filter((r) => r === null || heard.includes(r)),
    weather: '',
    instrument: plan.instrument && { ...plan.instrument, provedBefore: false },
  };
}

/** @throws AppError not_found */
export async function shutdownTestPage(
  tx: Tx,
  ref: string,
  now: Date,
  reader: string,
): Promise<ShutdownTestPage> {
  const head = found(await testHead(tx, ref), 'shutdown test');
  const { site, zone, acts, content } = await readDraft(tx, head, now);
  const repeated = head.followsId === null ? undefined : await signedTest(tx, { id: head.followsId });
  const others = new Map<string, string>();
  for (const a of acts)
    if (a.person !== reader && now.getTime() - Date.parse(a.recordedAt) < AT_IT_MS)
      others.set(a.person, a.recordedAt);
  const { facts, record, evidence, verdict, follows } = content;
  return {
    at: now.toISOString(),
    id: head.ref,
    site: { id: site.ref, name: site.name, place: site.place, timeZone: site.timeZone },
    state: head.closedAt === null ? 'draft' : 'ended',
    startedAt: head.startedAt.toISOString(),
    startedBy: head.startedBy,
    ended: head.closedAt && {
      at: head.closedAt.toISOString(),
      by: head.closedBy ?? '',
      reason: head.closeReason ?? '',
    },
    follows,
    suggested: content.record.plan === null && repeated ? suggestedPlan(repeated.detail, zone) : null,
    facts,
    record,
    evidence,
    verdict,
    watch: await readWatch(tx, zone, now),
    unheard: await unheardUnits(
      tx,
      zone.strings.filter((s) => record.plan?.strings.includes(s.part.id) ?? true).map((s) => s.dbId),
    ),
    fingerprint: fingerprintOf(content),
    others: [...others].map(([name, at]) => ({ name, at })),
  };
}
