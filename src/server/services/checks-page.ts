import type { CaptureSnapshot } from '../../schemas/api/capture';
import type { ChecksPage } from '../../schemas/api/checks-page';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { attachmentOut, attachmentsOfSite } from '../queries/attachments';
import { visibleSite } from '../queries/visible-site';
import { captureSnapshot } from './capture-snapshot';
import { siteAndItsSteps } from './commissioning';

/**
 * What the desk's pages of checks and readings show: the site as it stands, and its photos.
 * @throws AppError not_found
 */
export async function checksPage(
  tx: Tx,
  siteRef: string,
  person: CaptureSnapshot['person'],
  now: Date,
): Promise<ChecksPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  return {
    sheet: await captureSnapshot(tx, siteRef, person, now),
    files: (await attachmentsOfSite(tx, site.id)).map(attachmentOut),
    steps: (await siteAndItsSteps(tx, siteRef)).steps,
  };
}
