import { createHash } from 'node:crypto';
import { groupedBy } from '../../domain/grouped-by';
import { signedRecords } from '../../domain/commissioning/checks/sign-off';
import type { CheckRecord } from '../../schemas/api/checks';
import type { CaptureSnapshot } from '../../schemas/api/capture';
import { PHOTO_MAX_BYTES } from '../../schemas/lists-and-limits';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { moduleTypesOf, ruleSetOf, stringSheets, unitTypesOf } from '../queries/captured-site';
import { checkOut, latestChecks, latestSignOffs } from '../queries/checks';
import { connectorPairs, connectorTypes } from '../queries/equipment';
import { latestReadings, readingOut } from '../queries/readings';
import { visibleSite } from '../queries/visible-site';
import { fingerprintOf } from '../reports/fingerprint';

/** What a signature over the checks of a string is made of: the records as they stand, in the order of the list. */
export const checksFingerprint = (records: readonly CheckRecord[]): string =>
  fingerprintOf(
    signedRecords(records).map(({ ref, check, result, reason, note, figures, at, person }) => ({
      ref,
      check,
      result,
      reason,
      note,
      figures,
      at,
      person,
    })),
  );

const without = <T extends { stringId: string }>({ stringId: _, ...rest }: T): Omit<T, 'stringId'> => rest;

/**
 * All that checks and readings at a site are recorded and judged by, as it stands.
 * @throws AppError not_found
 */
export async function captureSnapshot(
  tx: Tx,
  siteRef: string,
  person: CaptureSnapshot['person'],
  now: Date,
): Promise<CaptureSnapshot> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const checks = groupedBy((await latestChecks(tx, site.id)).map(checkOut), (r) => r.stringId);
  const readings = groupedBy((await latestReadings(tx, site.id)).map(readingOut), (r) => r.stringId);
  const signs = new Map((await latestSignOffs(tx, site.id)).map((s) => [s.stringId, s]));
  const strings = (await stringSheets(tx, site.id, now)).map(({ dbId: _, ...string }) => {
    const records = checks.get(string.id) ?? [];
    const fingerprint = checksFingerprint(records);
    const sign = signs.get(string.id);
    return {
      ...string,
      checks: records.map(without),
      fingerprint,
      readings: (readings.get(string.id) ?? []).map(without),
      signOff: sign
        ? {
            ref: sign.ref,
            person: sign.person,
            at: sign.at.toISOString(),
            fingerprint: sign.fingerprint,
            stale: sign.fingerprint !== fingerprint,
          }
        : null,
    };
  });
  return {
    at: now.toISOString(),
    person,
    site: {
      id: site.ref,
      name: site.name,
      place: site.place,
      timeZone: site.timeZone,
      stage: site.stage,
      ruleSet: await ruleSetOf(tx, site.id),
    },
    unitTypes: await unitTypesOf(tx, site.id),
    moduleTypes: await moduleTypesOf(tx, site.id),
    connectors: (await connectorTypes(tx)).map(({ dbId: _, ...connector }) => connector),
    pairs: await connectorPairs(tx),
    strings,
    limits: { photoMaxBytes: PHOTO_MAX_BYTES },
  };
}

/** The version of a snapshot: the same while nothing in it but its time has changed. */
export function snapshotTag(snapshot: CaptureSnapshot): string {
  const { at: _, ...rest } = snapshot;
  return `"${createHash('sha256').update(JSON.stringify(rest)).digest('base64url').slice(0, 27)}"`;
}
