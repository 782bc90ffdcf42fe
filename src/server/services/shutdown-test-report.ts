import { z } from 'zod';
import type { ShutdownTestList, ShutdownTestReport, SignedTest } from '../../schemas/api/shutdown-test';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import {
  signedTest,
  shutdownTestStanding,
  testHead,
  testRows,
  type SignedRow,
} from '../queries/shutdown-tests';
import { watchedZone } from '../queries/shutdown-test-evidence';
import { visibleSite } from '../queries/visible-site';
import { fingerprintOf } from '../reports/fingerprint';
import { signedContent } from './shutdown-test-content';
import { readEvidence } from './shutdown-test-evidence';
import { testReportThings } from '../../words/refusals-cases';

/** Tests of a site by zone, signed, under way and ended. @throws AppError not_found */
export async function shutdownTestList(tx: Tx, siteRef: string, now: Date): Promise<ShutdownTestList> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  return {
    at: now.toISOString(),
    site: { id: site.ref, name: site.name, place: site.place, timeZone: site.timeZone },
    zones: await shutdownTestStanding(tx, site.id),
    tests: await testRows(tx, site.id),
  };
}

/** Whether a test is signed (or an earlier record), under way or ended. @throws AppError not_found */
export async function testState(tx: Tx, siteRef: string, ref: string): Promise<'signed' | 'draft'> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const signed = await signedTest(tx, { ref });
  if (signed?.siteRef === site.ref) return 'signed';
  const head = await testHead(tx, ref);
  found(head?.siteRef === site.ref ? head : null, testReportThings.test);
  return 'draft';
}

const EARLIER_READINGS = z.looseObject({
  readings: z
    .array(
      z.looseObject({
        string: z.string(),
        afterS: z.number().nullish(),
        positiveToNegative: z.number().nullish(),
        positiveToEarth: z.number().nullish(),
        negativeToEarth: z.number().nullish(),
      }),
    )
    .catch([]),
});

/**
 * A signed test with all its evidence, its fingerprint taken again, and what has come since.
 * @throws AppError not_found
 */
export async function shutdownTestReport(tx: Tx, ref: string, now = new Date()): Promise<ShutdownTestReport> {
  const row = found(await signedTest(tx, { ref }), testReportThings.signed);
  const site = found(await visibleSite(tx, row.siteRef), 'site');
  const record = signedContent(row.detail);
  const recomputed = record ? fingerprintOf(row.detail) : null;
  const link = (l: { test: string; at: string } | null) => l && { ...l, at: new Date(l.at).toISOString() };
  return {
    at: now.toISOString(),
    id: row.ref,
    site: { id: site.ref, name: site.name, place: site.place, timeZone: site.timeZone },
    record,
    earlier: record ? null : earlierOf(row),
    signature: record?.signature ?? null,
    fingerprint: row.fingerprint,
    recomputed,
    matches: row.fingerprint !== null && recomputed === row.fingerprint,
    supersededBy: link(row.supersededBy),
    follows: link(row.follows),
    late: record ? await lateReports(tx, ref, record, now) : { reports: 0, strings: [] },
  };
}

function earlierOf(row: SignedRow): ShutdownTestReport['earlier'] {
  const read = EARLIER_READINGS.safeParse(row.detail).data?.readings ?? [];
  return {
    at: row.at.toISOString(),
    zone: row.zone,
    madeBy: row.madeBy,
    result: row.result,
    strings: row.strings,
    readings: read.map((r) => ({
      string: r.string,
      afterS: r.afterS ?? null,
      volts: [r.positiveToNegative ?? null, r.positiveToEarth ?? null, r.negativeToEarth ?? null],
    })),
  };
}

/** Reports of the test's minutes that are there now and were not when it was signed. */
async function lateReports(
  tx: Tx,
  ref: string,
  record: SignedTest,
  now: Date,
): Promise<ShutdownTestReport['late']> {
  const head = await testHead(tx, ref);
  const zone = head && (await watchedZone(tx, head.zoneId));
  if (!zone) return { reports: 0, strings: [] };
  const again = await readEvidence(tx, zone, record.record, now);
  const more = new Map<string, number>();
  record.evidence.forEach((round, i) => {
    for (const then of round.strings) {
      const today = again[i]?.strings.find((s) => s.string === then.string);
      const n = (today?.reports ?? 0) - then.reports;
      if (n > 0) more.set(then.string, (more.get(then.string) ?? 0) + n);
    }
  });
  const names = record.facts.strings.filter((s) => more.has(s.id)).map((s) => s.name);
  return { reports: [...more.values()].reduce((a, b) => a + b, 0), strings: names };
}
