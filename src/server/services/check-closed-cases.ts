import { AFTER_CLOSING, lookAgain, type LookedAgain } from '../../domain/cases/after-closing';
import { daylightBetween } from '../../domain/cases/daylight';
import type { CaseFigures } from '../../domain/cases/figures';
import { asIngest, type Tx } from '../db/transaction';
import {
  daysSince,
  lockUnchecked,
  relapsesSince,
  uncheckedCases,
  type ClosedCase,
} from '../queries/cases-closed';
import { addCaseEntry, addCaseEvent, writeCheck } from '../queries/cases-write';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { gatherCaseFigures } from './case-figures';

/**
 * Looks again at every closed case that was not looked at since: the figures of now beside those of its opening. What
 * did not hold is opened again. One transaction a case, so that a job killed anywhere leaves none half written; a case
 * of which nothing can be told yet is left for the next run.
 * @returns how many were decided, and how many of them were opened again
 */
export async function checkClosedCases(at: Date): Promise<{ checked: number; reopened: number }> {
  const result = { checked: 0, reopened: 0 };
  for (const id of await asIngest((tx) => uncheckedCases(tx, at))) {
    const outcome = await asIngest((tx) => checkCase(tx, id, at));
    if (outcome !== 'wait') result.checked += 1;
    if (outcome === 'not_held') result.reopened += 1;
  }
  return result;
}

async function checkCase(tx: Tx, id: number, at: Date): Promise<LookedAgain['outcome']> {
  const kept = await lockUnchecked(tx, id, at);
  if (!kept) return 'wait';
  const now = await gatherCaseFigures(tx, at, { siteId: kept.siteId, stringRefs: kept.stringRefs });
  const relapses = await relapsesSince(tx, kept.stringIds, kept.closedAt, at);
  const found = lookAgain({
    kind: kept.kind,
    closedMs: kept.closedAt.getTime(),
    nowMs: at.getTime(),
    now,
    strings: kept.stringRefs,
    parts: kept.parts,
    cause: kept.causeOpen === null ? null : { open: kept.causeOpen },
    // units that only fell silent for a while are a relapse of silence, not of what else was wrong
    relapses: relapses.filter((r) => r.verdict !== 'silent' || kept.kind === 'silent'),
    lightMs: daylightBetween(kept.closedAt.getTime(), at.getTime(), kept, AFTER_CLOSING.lightMs),
    shutdownSince: kept.shutdownSince,
    plannedWork: kept.plannedWork,
    days: await daysSince(tx, kept.siteId, kept.stringIds, kept.closedAt),
  });
  if (found.outcome !== 'wait') await write(tx, kept, { ...found, outcome: found.outcome }, now, at);
  return found.outcome;
}

async function write(
  tx: Tx,
  kept: ClosedCase,
  found: LookedAgain & { outcome: Exclude<LookedAgain['outcome'], 'wait'> },
  now: CaseFigures,
  at: Date,
): Promise<void> {
  const reopen = found.outcome === 'not_held';
  const { outcome, headline, lines } = found;
  await writeCheck(tx, kept.id, { at, after: { ...now, outcome }, reopen });
  const entry = { caseId: kept.id, siteId: kept.siteId, at, personId: null };
  await addCaseEntry(tx, { ...entry, kind: 'checked', body: headline, detail: { outcome, lines } });
  if (!reopen) {
    await tellSiteChanged(tx, kept.siteId);
    return;
  }
  await addCaseEntry(tx, {
    ...entry,
    kind: 'reopened',
    body: headline,
    detail: { outcome, lines, version: kept.version + 1 },
  });
  await addCaseEvent(tx, {
    organisationId: kept.organisationId,
    siteId: kept.siteId,
    stringIds: kept.stringIds,
    at,
    kind: 'case_reopened',
    detail: {
      case: kept.ref,
      number: kept.number,
      title: kept.title,
      reason: [headline, ...lines].join(' '),
      assigneeId: kept.assigneeId,
    },
  });
  await addAuditEntry(tx, {
    organisationId: kept.organisationId,
    personId: null,
    action: 'case.reopened',
    subject: `case ${kept.ref}`,
    siteId: kept.siteId,
    after: { found: headline, figures: lines },
  });
  await tellSiteChanged(tx, kept.siteId);
}
