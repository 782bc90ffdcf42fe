import type { Actor } from '../../domain/access/permissions';
import { checkPart, together } from '../../domain/commissioning/as-built/check-part';
import { mergeEdit, type Value } from '../../domain/commissioning/as-built/merge';
import { fieldOf, type PartKind } from '../../domain/commissioning/as-built/parts';
import { PART_WORDS } from '../../words/domain-as-built-parts';
import type { AsBuilt, PartValues } from '../../schemas/api/as-built';
import { labelOf, nameOf, partOf } from '../../schemas/as-built-values';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { asBuiltParts } from '../queries/as-built';
import { checkNow, deletePart, insertPart, partNumber } from '../queries/as-built-parts';
import { deletedBy, hangingOn, lastChanges } from '../queries/as-built-records';
import { asBuiltSite, type AsBuiltSite } from '../queries/as-built-site';
import { tellAsBuiltChanged, tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { lockAsBuilt } from '../queries/placements';
import { hangingWords, inWords, refuseFaults } from './as-built-words';
import { columnsOf, writeChanges, writeNew } from './write-part';
import { LOCALE } from '../../words/language';
import { editPartRefusals } from '../../words/refusals-as-built';

/** How a change came in. */
export interface How {
  reason: string;
  source: string;
  address?: string | null | undefined;
}

export interface Standing {
  site: AsBuiltSite;
  parts: Omit<AsBuilt, 'at'>;
}

/** The site and its parts as they stand, with the as-built lock taken. */
export async function standing(tx: Tx, siteId: number): Promise<Standing> {
  await lockAsBuilt(tx, [siteId]);
  return {
    site: found(await asBuiltSite(tx, siteId), 'site'),
    parts: found(await asBuiltParts(tx, siteId), 'site'),
  };
}

export async function tellAll(tx: Tx, siteId: number): Promise<void> {
  await tellAsBuiltChanged(tx, siteId);
  await tellSiteChanged(tx, siteId);
}

/** The values of a part with names for identifiers: for the history, which outlives what it tells of. */
export function inNames(
  parts: Standing['parts'],
  kind: PartKind,
  values: Readonly<Record<string, Value>>,
): Record<string, Value> {
  return Object.fromEntries(
    Object.entries(values).map(([key, value]) => {
      const field = fieldOf(kind, key);
      if (field?.kind === 'part' && typeof value === 'string')
        return [key, nameOf(parts, field.of, value) ?? 'unknown'];
      if (field?.kind === 'parts' && Array.isArray(value))
        return [key, (value as readonly string[]).map((v) => nameOf(parts, field.of, v) ?? 'unknown')];
      return [key, value];
    }),
  );
}

/** What `values` name and this site or its catalogue does not have. */
export function unknownNames(
  parts: Standing['parts'],
  kind: PartKind,
  values: Readonly<Record<string, Value>>,
): { key: string; message: string }[] {
  return Object.entries(values).flatMap(([key, value]) => {
    const field = fieldOf(kind, key);
    if (field?.kind !== 'part' && field?.kind !== 'parts') return [];
    const ids = Array.isArray(value) ? (value as readonly string[]) : value === null ? [] : [String(value)];
    return ids.every((id) => nameOf(parts, field.of, id) !== undefined)
      ? []
      : [{ key, message: editPartRefusals.choiceGone(field.label) }];
  });
}

export const faultsAt = (
  prefix: string,
  faults: readonly { key: string; message: string }[],
): { field: string; message: string }[] =>
  faults.map((f) => ({ field: `${prefix}${f.key}`, message: f.message }));

/** @throws AppError invalid where a reason is asked for and none is given */
export function needReason(needed: boolean, how: How): void {
  if (needed && how.reason.trim() === '')
    throw new AppError('invalid', {
      message: editPartRefusals.sayWhy,
      fields: [{ field: 'reason', message: editPartRefusals.sayWhyShort }],
    });
}

/**
 * A new part of any kind but strings (add-strings does those).
 * @throws AppError not_found · invalid · conflict (a name is taken), with fields `values.KEY`
 */
export async function addPart(
  tx: Tx,
  actor: Actor,
  siteId: number,
  part: { kind: Exclude<PartKind, 'site' | 'string'>; values: PartValues },
  how: How,
): Promise<{ id: number; ref: string }> {
  const { site, parts } = await standing(tx, siteId);
  const { kind } = part;
  const checked = checkPart(kind, part.values);
  if (checked.faults) refuseFaults(faultsAt('values.', checked.faults));
  const values = checked.values ?? {};
  refuseFaults(faultsAt('values.', unknownNames(parts, kind, values)));
  needReason(site.stage === 'operating', how);
  const made = await inWords('values.', async () => {
    const row = await insertPart(tx, kind, {
      site_id: siteId,
      ...(await columnsOf(tx, site, kind, values)),
    });
    await writeNew(tx, site, kind, row.id, values);
    return row;
  });
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address: how.address,
    action: `as_built.${kind}_added`,
    subject: `${kind} ${made.ref}`,
    siteId,
    after: { of: labelOf(parts, kind, values), ...inNames(parts, kind, values), source: how.source },
    reason: how.reason.trim(),
  });
  await tellAll(tx, siteId);
  return made;
}

/**
 * Changes a part: `before` is what the editor saw, `after` what it shall be. What others changed meanwhile is kept where
 * it is something else, and told where it is the same field.
 *
 * @throws AppError not_found · invalid · conflict, with fields `values.KEY` or `reason`
 */
export async function changePart(
  tx: Tx,
  actor: Actor,
  siteId: number,
  edit: { kind: PartKind; id: string; before: PartValues; after: PartValues },
  how: How,
): Promise<void> {
  const { site, parts } = await standing(tx, siteId);
  const { kind, id } = edit;
  const subject = `${kind} ${id}`;
  const now = partOf(parts, kind, id);
  const rowId = now && (await partNumber(tx, kind, siteId, id));
  if (!now || rowId === undefined) throw await goneError(tx, siteId, kind, subject);
  const checked = checkPart(kind, edit.after, 'given');
  if (checked.faults) refuseFaults(faultsAt('values.', checked.faults));
  const merged = mergeEdit(edit.before, checked.values ?? {}, now);
  if (merged.clashes.length > 0) {
    const who = await lastChanges(
      tx,
      siteId,
      subject,
      merged.clashes.map((c) => c.key),
    );
    throw new AppError('conflict', {
      message: editPartRefusals.changedMeanwhile(PART_WORDS[kind].one),
      fields: merged.clashes.map((c) => ({
        field: `values.${c.key}`,
        message: clashWords(parts, kind, c.key, c.theirs, who.get(c.key), site.timeZone),
      })),
      current: Object.fromEntries(merged.clashes.map((c) => [c.key, c.theirs])),
    });
  }
  const { changes } = merged;
  // "several" names no module type: the slots keep theirs
  if (kind === 'string' && changes.moduleType === null) delete changes.moduleType;
  if (Object.keys(changes).length === 0) return;
  const whole = { ...now, ...changes };
  refuseFaults(faultsAt('values.', [...unknownNames(parts, kind, changes), ...together(kind, whole)]));
  const units =
    kind === 'string' && parts.strings.find((s) => s.id === id)?.slots.some((s) => s.serial !== null);
  needReason(site.stage === 'operating' || (!!units && ('unitType' in changes || 'slots' in changes)), how);
  await inWords('values.', async () => {
    await writeChanges(tx, { site, parts }, kind, { id, rowId }, whole, changes);
    await checkNow(tx);
  });
  const before = Object.fromEntries(Object.keys(changes).map((key) => [key, now[key] ?? null]));
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address: how.address,
    action: `as_built.${kind}_changed`,
    subject,
    siteId,
    stringId: kind === 'string' ? rowId : null,
    before: inNames(parts, kind, before),
    after: { of: labelOf(parts, kind, now), ...inNames(parts, kind, changes), source: how.source },
    reason: how.reason.trim(),
  });
  await tellAll(tx, siteId);
}

async function goneError(tx: Tx, siteId: number, kind: PartKind, subject: string): Promise<AppError> {
  const by = await deletedBy(tx, siteId, subject);
  if (!by) return new AppError('not_found', { message: editPartRefusals.noSuchPart(PART_WORDS[kind].one) });
  return new AppError('conflict', {
    message: editPartRefusals.deletedMeanwhile(by.name, PART_WORDS[kind].one),
  });
}

function clashWords(
  parts: Standing['parts'],
  kind: PartKind,
  key: string,
  theirs: Value,
  who: { name: string; at: Date } | undefined,
  timeZone: string,
): string {
  const field = fieldOf(kind, key);
  const named = inNames(parts, kind, { [key]: theirs })[key] ?? null;
  const option = field?.kind === 'choice' ? field.options.find((o) => o.value === named)?.label : undefined;
  const shown =
    option ??
    (named === null || named === ''
      ? 'empty'
      : Array.isArray(named)
        ? named.join(', ') || 'empty'
        : typeof named === 'boolean'
          ? named
            ? 'yes'
            : 'no'
          : `"${String(named)}"`);
  const by = who
    ? editPartRefusals.wasSet(
        who.name,
        shown,
        new Intl.DateTimeFormat(LOCALE, { timeZone, hour: '2-digit', minute: '2-digit' }).format(who.at),
      )
    : editPartRefusals.isNow(shown);
  return `${field?.label ?? key}: ${by}.`;
}

/**
 * Deletes a part where nothing hangs on it.
 * @throws AppError not_found · conflict, saying what hangs on it · invalid (reason)
 */
export async function removePart(
  tx: Tx,
  actor: Actor,
  siteId: number,
  part: { kind: Exclude<PartKind, 'site'>; id: string },
  how: How,
): Promise<void> {
  const { site, parts } = await standing(tx, siteId);
  const { kind, id } = part;
  const now = partOf(parts, kind, id);
  const rowId = now && (await partNumber(tx, kind, siteId, id));
  if (!now || rowId === undefined)
    throw new AppError('not_found', { message: editPartRefusals.partGone(PART_WORDS[kind].one) });
  const label = labelOf(parts, kind, now);
  const words = hangingWords(label, await hangingOn(tx, kind, rowId));
  if (words !== null) throw new AppError('conflict', { message: words });
  const units =
    kind === 'string'
      ? (parts.strings.find((s) => s.id === id)?.slots ?? []).flatMap((s) => s.serial ?? [])
      : [];
  needReason(site.stage === 'operating' || units.length > 0, how);
  await inWords('', async () => {
    await deletePart(tx, kind, rowId);
    await checkNow(tx);
  });
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address: how.address,
    action: `as_built.${kind}_deleted`,
    subject: `${kind} ${id}`,
    siteId,
    before: { ...inNames(parts, kind, now), ...(units.length > 0 ? { serials: units } : {}) },
    after: { of: label, source: how.source },
    reason: how.reason.trim(),
  });
  await tellAll(tx, siteId);
}
