import type { z } from 'zod';
import type { Actor } from '../../domain/access/permissions';
import type { RoofPlan, roofSave } from '../../schemas/api/roof';
import type { Tx } from '../db/transaction';
import { AppError, found, type FieldFault } from '../errors';
import { addAuditEntry } from '../queries/people';
import { lockAsBuilt } from '../queries/placements';
import { roofFacts, setOutline } from '../queries/roof';
import { visibleSite } from '../queries/visible-site';
import { fingerprintOf } from '../reports/fingerprint';
import { needReason, tellAll } from './edit-as-built';
import { setSlotFacts } from './edit-as-built-strings';
import { roofRefusals } from '../../words/refusals-as-built';

/** @throws AppError not_found */
export async function roofPlanOf(tx: Tx, siteRef: string): Promise<RoofPlan> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const { outline, strings } = await roofFacts(tx, site.id);
  const compare = new Intl.Collator('en', { numeric: true });
  return {
    site: { id: site.ref, name: site.name, stage: site.stage },
    outline: outline ?? [],
    outlineVersion: fingerprintOf(outline ?? []),
    strings: strings
      .map((s) => ({ ...s, version: fingerprintOf(s.slots) }))
      .sort((a, b) => compare.compare(a.name, b.name)),
  };
}

/** An outline in the history: so that a person can set it again. */
const outlineWords = (points: readonly (readonly [number, number])[]): string =>
  points.length === 0
    ? ''
    : `${points.length} points: ${points.map((p) => p.join(' / ').replaceAll('-', '−')).join(', ')} m`;

/**
 * Keeps an outline and where strings lie, all of it or nothing, with history.
 * @throws AppError not_found · invalid · conflict: somebody has changed `outline` or `strings.N` since it was seen
 */
export async function saveRoof(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  save: z.output<typeof roofSave>,
  address: string | null,
): Promise<RoofPlan> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  await lockAsBuilt(tx, [site.id]);
  const now = await roofPlanOf(tx, siteRef);
  const byId = new Map(now.strings.map((s) => [s.id, s]));
  const stale: FieldFault[] = [];
  if (save.outline && save.outline.seen !== now.outlineVersion)
    stale.push({ field: 'outline', message: roofRefusals.outlineChanged });
  save.strings.forEach(({ id, seen }, n) => {
    const string = byId.get(id);
    if (!string) stale.push({ field: `strings.${n}`, message: roofRefusals.stringGone });
    else if (string.version !== seen)
      stale.push({
        field: `strings.${n}`,
        message: roofRefusals.laidAnew(string.name),
      });
  });
  if (stale.length > 0)
    throw new AppError('conflict', {
      message: roofRefusals.nothingSaved(stale.map((f) => f.message).join(' ')),
      fields: stale,
    });
  const how = { reason: save.reason, source: 'forms', address };
  if (save.outline && JSON.stringify(save.outline.points) !== JSON.stringify(now.outline)) {
    needReason(site.stage === 'operating', how);
    await setOutline(tx, site.id, save.outline.points);
    await addAuditEntry(tx, {
      organisationId: site.organisationId,
      personId: actor.personId,
      address,
      action: 'as_built.site_changed',
      subject: `site ${site.ref}`,
      siteId: site.id,
      before: { outline: outlineWords(now.outline) },
      after: { of: site.name, outline: outlineWords(save.outline.points), source: how.source },
      reason: save.reason,
    });
    await tellAll(tx, site.id);
  }
  await setSlotFacts(
    tx,
    actor,
    site.id,
    save.strings.flatMap(({ id, slots }) => slots.map((slot) => ({ string: id, ...slot }))),
    how,
  );
  return roofPlanOf(tx, siteRef);
}
