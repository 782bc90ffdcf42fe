import type { Actor } from '../../domain/access/permissions';
import type { CaseReport, ReportedCase } from '../../schemas/api/cases';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { reportedBy } from '../queries/cases';
import { visibleSite } from '../queries/visible-site';
import { openCase } from './open-case';
import { caseWords } from '../../words/refusals-cases';

const TITLE_WORDS = 80;

/** The first line of what somebody wrote, as a title: cut between words. */
export function titleOfReport(what: string): string {
  const line = what.trim().split('\n')[0]?.trim() ?? '';
  if (line.length <= TITLE_WORDS) return caseWords.reported(line);
  const cut = line.slice(0, TITLE_WORDS);
  const blank = cut.lastIndexOf(' ');
  return caseWords.reported(`${blank > TITLE_WORDS / 2 ? cut.slice(0, blank) : cut}…`);
}

/**
 * "Something looks wrong": a customer's own words become a case with the figures of this minute.
 * @throws AppError not_found for a site that is not theirs
 */
export async function reportCase(
  tx: Tx,
  actor: Actor,
  site: string,
  report: CaseReport,
  at: Date,
  address: string | null,
): Promise<ReportedCase> {
  const opened = await openCase(
    tx,
    actor,
    {
      ref: report.ref,
      site,
      origin: 'customer',
      title: titleOfReport(report.what),
      what: report.what,
      kind: 'other',
      strings: [],
      parts: [],
      address,
    },
    at,
  );
  return found(
    (await reportedCases(tx, actor, site)).find((c) => c.id === opened.id),
    'report',
  );
}

/** What this person reported at a site: their own words and how each stands, never what staff write. */
export async function reportedCases(tx: Tx, actor: Actor, site: string): Promise<ReportedCase[]> {
  return reportedBy(tx, found(await visibleSite(tx, site), 'site').id, actor.personId);
}
