import { createHash, randomUUID } from 'node:crypto';
import type { Actor } from '../../domain/access/permissions';
import { thresholdsOf, THRESHOLDS, type ThresholdKey } from '../../domain/settings/thresholds';
import type { OrganisationBody, OrganisationSettings } from '../../schemas/api/settings';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { readLogo } from '../files/logo';
import { sniff } from '../files/sniff';
import { spooled } from '../files/spool';
import { insertAttachment } from '../queries/attachments';
import { tellAsBuiltChanged, tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import {
  logoBytes,
  organisationRow,
  organisationSiteIds,
  setLogo,
  updateOrganisation,
  updateThresholds,
} from '../queries/settings';
import { timeZones } from './time-zones';
import { logoRefusals } from '../../words/refusals-people';

/** What an organisation sets for itself, every change on record. */

export const LOGO_MAX_BYTES = 5 * 1024 * 1024;
interface From {
  at: Date;
  address: string;
}

/** What differs from the defaults. */
function ownThresholds(kept: unknown): Partial<Record<ThresholdKey, number>> {
  const held = thresholdsOf(kept);
  return Object.fromEntries(
    THRESHOLDS.flatMap(({ key, initial }) => {
      const value = held[key];
      return value === null || value === initial ? [] : [[key, value]];
    }),
  );
}

export async function readSettings(tx: Tx): Promise<OrganisationSettings> {
  const row = found(await organisationRow(tx), 'organisation');
  const { name, phone, timeZone, currency, units, hideRawAfterDays, logo, sites } = row;
  return {
    name,
    phone,
    timeZone,
    currency,
    units,
    hideRawAfterDays,
    thresholds: ownThresholds(row.thresholds),
    logo,
    timeZones: timeZones(),
    sites,
  };
}

export async function saveOrganisation(
  tx: Tx,
  actor: Actor,
  body: OrganisationBody,
  from: From,
): Promise<OrganisationSettings> {
  const row = found(await organisationRow(tx, true), 'organisation');
  const was: OrganisationBody = {
    name: row.name,
    phone: row.phone,
    timeZone: row.timeZone,
    currency: row.currency as OrganisationBody['currency'],
    units: row.units,
    hideRawAfterDays: row.hideRawAfterDays,
  };
  await updateOrganisation(tx, row.id, body);
  await onRecord(tx, actor, from, 'settings.organisation', changedOnly(was, body));
  for (const site of await organisationSiteIds(tx)) await tellSiteChanged(tx, site);
  return readSettings(tx);
}

export async function saveThresholds(
  tx: Tx,
  actor: Actor,
  own: Partial<Record<ThresholdKey, number>>,
  from: From,
): Promise<OrganisationSettings> {
  const row = found(await organisationRow(tx, true), 'organisation');
  const was = thresholdsOf(row.thresholds);
  await updateThresholds(tx, row.id, own);
  await onRecord(tx, actor, from, 'settings.thresholds', changedOnly(was, thresholdsOf(own)));
  for (const site of await organisationSiteIds(tx)) await tellAsBuiltChanged(tx, site);
  return readSettings(tx);
}

const refused = (message: string): AppError =>
  new AppError('invalid', { message, fields: [{ field: 'body', message }] });

/**
 * Takes the body of a request as a logo: a JPEG, PNG or WebP by its bytes, made anew as a PNG of at most 640 × 240.
 * @throws AppError too_large · invalid
 */
export const receiveLogo = (request: Request): Promise<{ data: Buffer; width: number; height: number }> =>
  spooled(request, LOGO_MAX_BYTES, async (file) => {
    const { kind, fault } = sniff(file.head);
    if (kind === null) throw refused(fault);
    if (kind === 'pdf') throw refused(logoRefusals.pdf);
    try {
      return await readLogo(file.path);
    } catch (error) {
      throw refused(
        logoRefusals.unreadable(error instanceof Error ? (error.message.split('\n')[0] ?? '') : 'damaged'),
      );
    }
  });

export async function saveLogo(
  tx: Tx,
  actor: Actor,
  logo: { data: Buffer; width: number; height: number } | null,
  from: From,
): Promise<OrganisationSettings> {
  const row = found(await organisationRow(tx, true), 'organisation');
  let ref: string | null = null;
  if (logo) {
    ref = randomUUID();
    await insertAttachment(tx, {
      ref,
      organisationId: row.id,
      siteId: null,
      stringId: null,
      subject: 'logo',
      subjectRef: null,
      name: 'logo.png',
      note: '',
      placeKept: false,
      personId: actor.personId,
      at: from.at.toISOString(),
      sha256: createHash('sha256').update(logo.data).digest(),
      mediaType: 'image/png',
      thumbnail: null,
      ...logo,
    });
  }
  await setLogo(tx, row.id, ref);
  await onRecord(tx, actor, from, 'settings.logo', { before: { logo: row.logo }, after: { logo: ref } });
  return readSettings(tx);
}

/** PNG; null: none is set. */
export const organisationLogo = async (tx: Tx): Promise<Buffer | null> => (await logoBytes(tx))?.data ?? null;

/** The actor's organisation's logo as a reply. @throws AppError not_found */
export async function logoReply(tx: Tx): Promise<Response> {
  const logo = found(await logoBytes(tx), 'logo');
  return new Response(new Uint8Array(logo.data), {
    headers: {
      'content-type': 'image/png',
      'cache-control': 'private, max-age=86400, immutable',
      'content-security-policy': "default-src 'none'; sandbox",
      'x-content-type-options': 'nosniff',
    },
  });
}

function changedOnly<T extends object>(was: T, is: T): { before: Partial<T>; after: Partial<T> } {
  const keys = (Object.keys(is) as (keyof T)[]).filter((k) => was[k] !== is[k]);
  const of = (from: T): Partial<T> => Object.fromEntries(keys.map((k) => [k, from[k]])) as Partial<T>;
  return { before: of(was), after: of(is) };
}

async function onRecord(
  tx: Tx,
  actor: Actor,
  from: From,
  action: string,
  change: { before: object; after: object },
): Promise<void> {
  if (Object.keys(change.after).length === 0) return;
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address: from.address,
    action,
    subject: 'organisation',
    ...change,
  });
}
