import type { Actor } from '../../domain/access/permissions';
import type { Annotation, AnnotationsQuery, NewAnnotation } from '../../schemas/api/annotations';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { addAnnotation, annotationOfSite, annotationsOf, setAnnotationRemoved } from '../queries/annotations';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { stringFacts } from '../queries/string-facts';
import { visibleSite } from '../queries/visible-site';
import { annotationRefusals } from '../../words/refusals-cases';

/** Notes pinned on the time axis. */

export interface From {
  at: Date;
  address: string;
}

async function stringOf(tx: Tx, siteRef: string, ref: string): Promise<{ id: number; name: string }> {
  const facts = await stringFacts(tx, ref);
  if (!facts || facts.siteRef !== siteRef)
    throw new AppError('not_found', { message: annotationRefusals.noSuchString });
  return facts;
}

/** @throws AppError not_found */
export async function readAnnotations(
  tx: Tx,
  siteRef: string,
  query: AnnotationsQuery,
): Promise<Annotation[]> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const string = query.string === undefined ? null : await stringOf(tx, siteRef, query.string);
  return annotationsOf(tx, site.id, {
    stringId: string?.id ?? null,
    from: query.from === undefined ? null : new Date(query.from * 1000),
    to: query.to === undefined ? null : new Date(query.to * 1000),
  });
}

const DAY_MS = 86_400_000;

/**
 * Pins a note; the same note (by its ref) twice is one.
 * @throws AppError not_found, invalid, conflict
 */
export async function pinAnnotation(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  note: NewAnnotation,
  by: From,
): Promise<Annotation> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const string = note.string === null ? null : await stringOf(tx, siteRef, note.string);
  const from = new Date(note.from);
  const to = note.to === null ? null : new Date(note.to);
  if (from.getTime() > by.at.getTime() + DAY_MS)
    throw new AppError('invalid', {
      message: annotationRefusals.aboutWhatWas,
      fields: [{ field: 'from', message: annotationRefusals.inTheFuture }],
    });
  const fresh = await addAnnotation(tx, {
    ref: note.ref,
    siteId: site.id,
    stringId: string?.id ?? null,
    from,
    to,
    text: note.text,
    personId: actor.personId,
  });
  const kept = await annotationOfSite(tx, site.id, note.ref);
  if (!kept) throw new AppError('conflict', { message: annotationRefusals.anotherSites });
  if (fresh) {
    await addAuditEntry(tx, {
      organisationId: actor.organisationId,
      personId: actor.personId,
      address: by.address,
      action: 'annotation.pinned',
      subject: string ? `note on ${string.name}` : `note on ${site.name}`,
      after: { from: from.toISOString(), to: to?.toISOString() ?? null, text: note.text },
      siteId: site.id,
      stringId: string?.id ?? null,
    });
    await tellSiteChanged(tx, site.id);
  }
  return kept.annotation;
}

/**
 * Takes a note away, or puts it back. Saying the same twice changes nothing.
 * @throws AppError not_found
 */
export async function setRemoved(
  tx: Tx,
  actor: Actor,
  where: { site: string; annotation: string },
  removed: boolean,
  by: From,
): Promise<Annotation> {
  const site = found(await visibleSite(tx, where.site), 'site');
  const kept = found(await annotationOfSite(tx, site.id, where.annotation), 'note');
  if (kept.removed === removed) return kept.annotation;
  await setAnnotationRemoved(tx, kept.id, removed ? { at: by.at, personId: actor.personId } : null);
  const { text, from, to } = kept.annotation;
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address: by.address,
    action: removed ? 'annotation.removed' : 'annotation.restored',
    subject: kept.annotation.string ? `note on ${kept.annotation.string.name}` : `note on ${site.name}`,
    [removed ? 'before' : 'after']: { from, to, text },
    siteId: site.id,
    stringId: kept.stringId,
  });
  await tellSiteChanged(tx, site.id);
  return kept.annotation;
}
