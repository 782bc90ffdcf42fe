import { caseKindOf } from '../../domain/cases/cases';
import { checklistOf } from '../../domain/cases/checklists';
import { CHECKLIST_SOURCE } from '../../words/domain-checklists';
import { DAILY_KINDS, type CauseKind } from '../../domain/causes/kinds';
import type { CausePage, CausesPage, CausesView, SiteStanding } from '../../schemas/api/causes';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { causeEvents, currencyOf, listCauses, oneCause, sitesWithCauses } from '../queries/causes-list';
import { contactsOf } from '../queries/fleet';
import { worksAhead } from '../queries/planned-works';
import { visibleSite } from '../queries/visible-site';

const SHOWN_MAX = 300;

export async function causesPage(tx: Tx, view: CausesView, at: Date): Promise<CausesPage> {
  const currency = await currencyOf(tx);
  const causes = await listCauses(tx, view, currency, SHOWN_MAX + 1);
  return {
    at: at.toISOString(),
    view,
    causes: causes.slice(0, SHOWN_MAX),
    more: causes.length > SHOWN_MAX,
    sites: await sitesWithCauses(tx),
    currency,
  };
}

/**
 * One cause with its history, whom to call and what to check first.
 * @throws AppError not_found
 */
export async function causePage(tx: Tx, ref: string, at: Date): Promise<CausePage> {
  const currency = await currencyOf(tx);
  const { siteNumber, ...cause } = found(await oneCause(tx, ref, currency), 'cause');
  return {
    ...cause,
    at: at.toISOString(),
    currency,
    contact: (await contactsOf(tx, [siteNumber]))[0] ?? null,
    events: await causeEvents(tx, { ...cause, siteNumber }),
    checks: checklistOf(caseKindOf(cause.kind)).map(({ check, why, caution }) => ({
      check,
      why,
      caution: caution ?? null,
    })),
    checksSource: CHECKLIST_SOURCE,
  };
}

/**
 * Works that go on or come at a site, and the open causes that its days show.
 * @throws AppError not_found
 */
export async function siteStanding(tx: Tx, siteRef: string, at: Date): Promise<SiteStanding> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const view: CausesView = { show: 'open', kind: 'any', site: siteRef, q: '', sort: 'gravity' };
  const causes = await listCauses(tx, view, null, SHOWN_MAX);
  const daily: readonly CauseKind[] = DAILY_KINDS;
  return {
    works: await worksAhead(tx, site.id, at),
    daily: causes
      .filter((c) => daily.includes(c.kind))
      .map(({ id, headline, since, lossWhDay }) => ({ id, headline, since, lossWhDay })),
  };
}
