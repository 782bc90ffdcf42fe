import { createHash } from 'node:crypto';
import { checkMatrix } from '../../domain/commissioning/checks/string-standing';
import { stagesRead } from '../../domain/commissioning/readings/stages-read';
import type { CaptureSnapshot } from '../../schemas/api/capture';
import type { ChecksPage, DeskPage, ReadingsPage } from '../../schemas/api/checks-page';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { attachmentOut, attachmentsOfSite } from '../queries/attachments';
import { visibleSite } from '../queries/visible-site';
import { captureSnapshot } from './capture-snapshot';
import { siteAndItsSteps } from './commissioning';

async function deskPage(
  tx: Tx,
  siteRef: string,
  person: CaptureSnapshot['person'],
  now: Date,
): Promise<DeskPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  return {
    sheet: await captureSnapshot(tx, siteRef, person, now),
    files: (await attachmentsOfSite(tx, site.id)).map(attachmentOut),
    steps: (await siteAndItsSteps(tx, siteRef)).steps,
  };
}

/**
 * What the desk's page of checks shows: the site as it stands, its photos, and how each string stands.
 * @throws AppError not_found
 */
export async function checksPage(...asked: Parameters<typeof deskPage>): Promise<ChecksPage> {
  const page = await deskPage(...asked);
  return { ...page, ...checkMatrix(page.sheet) };
}

const SITES_REMEMBERED = 50;
/** What was last judged of a site, and of what: pages ask every twenty seconds, readings come a few an hour. */
const judged = new Map<string, { of: string; stages: ReadingsPage['stages'] }>();

function stagesOf(sheet: CaptureSnapshot): ReadingsPage['stages'] {
  const { site, unitTypes, moduleTypes, strings } = sheet;
  const of = createHash('sha256')
    .update(JSON.stringify([unitTypes, moduleTypes, strings]))
    .digest('base64');
  const before = judged.get(site.id);
  if (before?.of === of) return before.stages;
  const stages = stagesRead(sheet);
  judged.delete(site.id);
  judged.set(site.id, { of, stages });
  for (const oldest of judged.keys()) {
    if (judged.size <= SITES_REMEMBERED) break;
    judged.delete(oldest);
  }
  return stages;
}

/**
 * What the desk's page of readings shows: the site as it stands, its photos, and what each stage of each string means.
 * @throws AppError not_found
 */
export async function readingsPage(...asked: Parameters<typeof deskPage>): Promise<ReadingsPage> {
  const page = await deskPage(...asked);
  return { ...page, stages: stagesOf(page.sheet) };
}
