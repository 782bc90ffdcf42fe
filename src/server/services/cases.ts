import type { Actor } from '../../domain/access/permissions';
import { caseKindOf } from '../../domain/cases/cases';
import { checklistLines } from '../../domain/cases/checklists';
import {
  CLOSED_DAYS,
  type CaseDraft,
  type CaseItem,
  type CasePage,
  type CasesPage,
  type CasesView,
} from '../../schemas/api/cases';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { casesOf, caseWithFigures, entriesOf, photosOf, siteOfString, stringChoices } from '../queries/cases';
import { causeForCase, openCaseOfCause, staffOf } from '../queries/cases-write';
import { siteChoices } from '../queries/site';
import { visibleSite } from '../queries/visible-site';
import { causesNow } from './causes';
import { caseWords } from '../../words/refusals-cases';

const named = (people: readonly { ref: string; name: string }[]) =>
  people.map((p) => ({ id: p.ref, name: p.name }));

/** The cases that the actor sees; `show: all` brings closed ones of any age. */
export async function casesPage(tx: Tx, actor: Actor, show: CasesView['show'], at: Date): Promise<CasesPage> {
  const staff = await staffOf(tx);
  const closedDays = show === 'all' ? null : CLOSED_DAYS;
  return {
    at: at.toISOString(),
    me: staff.find((p) => p.id === actor.personId)?.ref ?? '',
    cases: await casesOf(tx, at, { closedDays }),
    closedDays,
    people: named(staff),
    sites: await siteChoices(tx),
  };
}

/** Cases of a site that are not closed, for its own page. @throws AppError not_found */
export async function openCasesOfSite(tx: Tx, siteRef: string, at: Date): Promise<CaseItem[]> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  return (await casesOf(tx, at, { siteId: site.id, closedDays: 0 })).filter((c) => c.closedAt === null);
}

/** @throws AppError not_found */
export async function casePage(tx: Tx, actor: Actor, ref: string, at: Date): Promise<CasePage> {
  const kept = found(await caseWithFigures(tx, ref, at), 'case');
  const staff = await staffOf(tx);
  const me = staff.find((p) => p.id === actor.personId);
  return {
    at: at.toISOString(),
    me: { id: me?.ref ?? '', name: me?.name ?? '' },
    case: {
      ...kept.item,
      what: kept.what,
      cause: kept.cause,
      parts: kept.parts,
      checklist: kept.checklist,
      lines: checklistLines(kept.item.kind, kept.checklist),
      before: kept.before,
      after: kept.after,
      checkedAt: kept.checkedAt,
    },
    entries: await entriesOf(tx, kept.rowId),
    photos: await photosOf(tx, ref),
    people: named(staff),
    contact: kept.contact,
    strings: await stringChoices(tx, kept.siteRowId),
  };
}

export interface DraftFrom {
  cause?: string | undefined;
  string?: string | undefined;
  site?: string | undefined;
  position?: number | undefined;
}

/**
 * What the form for a new case begins with: from a cause, from a string, for a site, or empty.
 * @throws AppError not_found for a cause or string that the actor may not see
 */
export async function caseDraft(tx: Tx, from: DraftFrom, at: Date): Promise<CaseDraft> {
  const sites = await siteChoices(tx);
  const blank: CaseDraft = {
    at: at.toISOString(),
    sites,
    people: named(await staffOf(tx)),
    site: sites.length === 1 ? (sites[0]?.id ?? null) : null,
    strings: [],
    origin: 'hand',
    cause: null,
    existing: null,
    title: '',
    what: '',
    kind: 'other',
    chosen: [],
    parts: [],
  };
  const draft = from.cause
    ? await draftOfCause(tx, from.cause, blank)
    : from.string
      ? await draftOfString(tx, from.string, from.position, blank, at)
      : { ...blank, site: sites.find((s) => s.id === from.site)?.id ?? blank.site };
  if (!draft.site) return draft;
  const site = found(await visibleSite(tx, draft.site), 'site');
  return { ...draft, strings: await stringChoices(tx, site.id) };
}

async function draftOfCause(tx: Tx, ref: string, blank: CaseDraft): Promise<CaseDraft> {
  const cause = found(await causeForCase(tx, ref), 'cause');
  const existing = await openCaseOfCause(tx, cause.id);
  const also = cause.alternatives.length > 0 ? caseWords.couldAlsoBe(cause.alternatives.join('; ')) : '';
  return {
    ...blank,
    site: cause.siteRef,
    origin: 'cause',
    cause: { id: cause.ref, headline: cause.headline },
    existing: existing ? { id: existing.ref, number: existing.number, title: existing.title } : null,
    title: cause.headline,
    what: `${cause.evidence}${also}`,
    kind: caseKindOf(cause.kind),
    chosen: [...new Set([...cause.strings, ...cause.units.map((u) => u.stringId)])],
    parts: cause.units.map((u) => ({ string: u.stringId, position: u.position })),
  };
}

async function draftOfString(
  tx: Tx,
  ref: string,
  position: number | undefined,
  blank: CaseDraft,
  at: Date,
): Promise<CaseDraft> {
  const string = found(await siteOfString(tx, ref), 'string');
  const site = found(await visibleSite(tx, string.site), 'site');
  const causes = (await causesNow(tx, at, [site.id])).flatMap(({ units, ...cause }) => {
    const here = units.filter(
      (u) => u.stringId === ref && (position === undefined || u.position === null || u.position === position),
    );
    return here.length > 0 ? [{ ...cause, here }] : [];
  });
  const cause = causes.find((c) => c.verdict === 'not_shutting_down') ?? causes[0];
  const place =
    position === undefined ? caseWords.ofString(string.name) : caseWords.ofPosition(string.name, position);
  return {
    ...blank,
    site: string.site,
    origin: 'string',
    title: cause?.headline ?? place,
    what: cause?.evidence ?? '',
    kind: cause ? caseKindOf(cause.verdict) : blank.kind,
    chosen: [ref],
    parts:
      position !== undefined
        ? [{ string: ref, position }]
        : (cause?.here ?? []).map((u) => ({ string: ref, position: u.position })),
  };
}
