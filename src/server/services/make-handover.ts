import sharp from 'sharp';
import type { Actor } from '../../domain/access/permissions';
import { commissioningSteps, openGaps } from '../../domain/commissioning/steps';
import { localDay } from '../../drawings/times';
import type { MakeHandover, PackItem } from '../../schemas/api/handover';
import { paths } from '../../schemas/paths';
import { publicUrl } from '../config';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { letter } from '../mail/letter';
import { asBuiltParts } from '../queries/as-built';
import { commissioningFacts } from '../queries/commissioning-facts';
import {
  addHandoverEvent,
  addPack,
  beginOperating,
  customersOf,
  nextVersion,
  packsOf,
  type PackRow,
} from '../queries/handover';
import { handoverRows, thumbnailsOf } from '../queries/handover-data';
import { tellAsBuiltChanged, tellSiteChanged } from '../queries/live-notices';
import { addMessage } from '../queries/outbox';
import { addAuditEntry, findPersonName } from '../queries/people';
import { visibleSite, type VisibleSite } from '../queries/visible-site';
import { asBuiltCsvText } from '../reports/as-built-csv';
import { fingerprintOf } from '../reports/fingerprint';
import { packData, type PackData } from '../reports/handover/data';
import { handoverPdf } from '../reports/handover/document';
import { designWords } from './handover-design';
import { packTests } from './handover-tests';
import { lettersSentMakeHandover } from '../../words/letters-sent';

/** Photos on paper need no more than this many bytes each, and not every one of thousands. */
const MOST_PHOTOS = 400;

export const packItem = (row: PackRow): PackItem => ({
  ref: row.ref,
  version: row.version,
  madeBy: row.madeBy,
  madeAt: row.madeAt.toISOString(),
  remark: row.remark,
  fingerprint: row.fingerprint,
  pdfBytes: row.pdfBytes,
  csvBytes: row.csvBytes,
  openPoints: row.openPoints,
});

/**
 * Makes the papers of a site as it stands, keeps them as the next version, and lets the site operate. With
 * `tellCustomers` a letter with the link waits in the outbox for each customer of the site.
 *
 * @throws AppError not_found · conflict where points still block: each is named
 */
export async function makeHandover(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  { remark, tellCustomers }: MakeHandover,
  at: Date,
  address: string | null,
): Promise<PackItem> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const version = await nextVersion(tx, site.id);
  const facts = found((await commissioningFacts(tx, [site.id])).get(site.id), 'site');
  const open = openGaps(commissioningSteps(facts));
  if (open.length > 0)
    throw new AppError('conflict', {
      message: lettersSentMakeHandover.pointsOpen(open.length),
      fields: open.slice(0, 50).map((gap) => ({ field: gap.key, message: gap.words })),
    });

  const data = packData.parse(await handoverRows(tx, site.id));
  const tests = await packTests(tx, data);
  const design = await designWords(tx, site.id, at);
  const fingerprint = fingerprintOf({ data, tests, design });
  const madeBy = (await findPersonName(tx, actor.personId)) ?? '';
  const pdf = await handoverPdf(
    data,
    { version, at, madeBy, remark, fingerprint },
    { tests, design, photos: await photosOf(tx, site.id, data) },
  );
  const ref = await addPack(tx, {
    siteId: site.id,
    version,
    personId: actor.personId,
    at,
    remark,
    fingerprint,
    data: { ...data, tests, design },
    pdf,
    csv: Buffer.from(asBuiltCsvText(found(await asBuiltParts(tx, site.id), 'site')), 'utf8'),
  });
  const began = await beginOperating(tx, site.id, localDay(at, site.timeZone));
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address,
    action: 'handover.made',
    subject: `site ${site.ref}`,
    siteId: site.id,
    reason: remark,
    after: {
      version,
      fingerprint,
      acceptedGaps: data.gaps.length,
      stageBecame: began ? 'operating' : site.stage,
    },
  });
  await addHandoverEvent(tx, site, { pack: ref, version, person: madeBy, personId: actor.personId }, at);
  if (tellCustomers) await tellOf(tx, site, { ref, version });
  if (began) await tellAsBuiltChanged(tx, site.id);
  await tellSiteChanged(tx, site.id);
  const made = (await packsOf(tx, site.id)).find((p) => p.ref === ref);
  return packItem(found(made, 'pack'));
}

/** Small pictures as JPEG, the one form that paper takes from everything. */
async function photosOf(tx: Tx, siteId: number, data: PackData): Promise<Map<string, Buffer>> {
  const all = await thumbnailsOf(tx, siteId);
  const photos = new Map<string, Buffer>();
  for (const { ref } of data.photos.slice(0, MOST_PHOTOS)) {
    const bytes = all.get(ref);
    if (bytes)
      photos.set(ref, await sharp(bytes).flatten({ background: '#ffffff' }).jpeg({ quality: 82 }).toBuffer());
  }
  return photos;
}

async function tellOf(tx: Tx, site: VisibleSite, pack: { ref: string; version: number }): Promise<void> {
  const href = `${publicUrl()}${paths.customer(site.ref)}`;
  for (const customer of await customersOf(tx, site.id)) {
    const { text, html } = letter({
      greeting: lettersSentMakeHandover.helloCustomer(customer.name),
      paragraphs: [
        pack.version === 1
          ? lettersSentMakeHandover.handedOver(site.name)
          : lettersSentMakeHandover.papersRenewed(site.name, pack.version),
        lettersSentMakeHandover.keepPapers,
      ],
      action: { words: lettersSentMakeHandover.seeYourSiteAnd, href },
      footer: lettersSentMakeHandover.youGetThisLetter(site.name),
    });
    await addMessage(tx, {
      organisationId: site.organisationId,
      personId: customer.personId,
      siteId: site.id,
      kind: 'handover',
      eventKey: `handover:${pack.ref}`,
      to: { address: customer.email, name: customer.name },
      subject:
        pack.version === 1
          ? lettersSentMakeHandover.yourPapersAreReady(site.name)
          : lettersSentMakeHandover.newPapersVersion(site.name, pack.version),
      text,
      html,
    });
  }
}
