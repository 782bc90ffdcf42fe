import sharp from 'sharp';
import type { Actor } from '../../domain/access/permissions';
import { STRINGS_WITH_UNITS } from '../../domain/cases/figures';
import { localDay } from '../../drawings/times';
import type { HistoryQuantity, StringHistory } from '../../schemas/api/string';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import { attachmentBytes } from '../queries/attachments';
import { eventsOfCase } from '../queries/cases';
import { handoverRows } from '../queries/handover-data';
import { findPersonName } from '../queries/people';
import { visibleSite } from '../queries/visible-site';
import { fileName } from '../reports/csv';
import { evidenceZip } from '../reports/evidence-pack/archive';
import type { Evidence, EvidenceAbout, EvidenceString } from '../reports/evidence-pack/data';
import { evidencePdf } from '../reports/evidence-pack/document';
import { historyDrawing, staircaseDrawing, type PaperDrawing } from '../reports/evidence-pack/drawings';
import { fingerprintOf } from '../reports/fingerprint';
import { packData } from '../reports/handover/data';
import { casePage } from './cases';
import { readHistory } from './string-history';
import { caseEvidenceWords } from '../../words/refusals-cases';

const PHOTOS_SHOWN = 60;
const DAY_MS = 86_400_000;
const EVENT_DAYS = { before: 14, after: 14 };
const EVENTS_MAX = 300;
/** A photo on paper needs no more pixels than this. */
const PHOTO_PIXELS = 1100;

interface Gathered {
  data: Evidence;
  about: EvidenceAbout;
  photos: Map<string, Buffer>;
}

async function gather(tx: Tx, actor: Actor, ref: string, at: Date): Promise<Gathered> {
  const page = await casePage(tx, actor, ref, at);
  const c = page.case;
  const site = found(await visibleSite(tx, c.siteId), 'site');
  const built = packData.parse(await handoverRows(tx, site.id));
  const on = localDay(c.openedAt, c.timeZone);
  const strings: EvidenceString[] = [];
  for (const { id, name } of c.strings) {
    const of = built.strings.find((s) => s.id === id);
    if (!of) continue;
    const drawn =
      strings.length < STRINGS_WITH_UNITS // the rows name all of them
        ? {
            day: await readHistory(tx, id, { range: 'day', quantity: 'voltage', on }, at),
            week: await readHistory(tx, id, { range: 'week', quantity: 'power', on }, at),
          }
        : null;
    strings.push({ id, name, built: of, drawn });
  }
  const names = new Set(c.strings.map((s) => s.name));
  const opened = Date.parse(c.openedAt);
  const data: Evidence = {
    case: c,
    entries: page.entries,
    photos: page.photos.slice(0, PHOTOS_SHOWN),
    contact: page.contact,
    organisation: built.site.organisation,
    place: built.site.place,
    ruleSet: built.site.ruleSet,
    strings,
    meterReadings: built.readings.filter((r) => names.size === 0 || names.has(r.string)),
    events: await eventsOfCase(tx, {
      ref,
      siteId: site.id,
      strings: c.strings.map((s) => s.id),
      from: new Date(opened - EVENT_DAYS.before * DAY_MS),
      to: new Date(Math.min(at.getTime(), opened + EVENT_DAYS.after * DAY_MS)),
      limit: EVENTS_MAX,
    }),
  };
  const photos = new Map<string, Buffer>();
  for (const photo of data.photos) {
    const file = await attachmentBytes(tx, photo.id, 'full');
    if (file) photos.set(photo.id, file.data);
  }
  const madeBy = (await findPersonName(tx, actor.personId)) ?? '';
  return { data, about: { at, madeBy, fingerprint: fingerprintOf(data) }, photos };
}

async function drawingsOf(data: Evidence) {
  const shown = data.strings.flatMap(({ id, name, drawn }) => (drawn ? [{ id, name, ...drawn }] : []));
  const ids = new Set(shown.map((s) => s.id));
  const draw = async <T extends { id: string }>(
    list: readonly T[],
    one: (item: T) => Promise<PaperDrawing>,
  ): Promise<Map<string, PaperDrawing>> => {
    const drawn = new Map<string, PaperDrawing>();
    for (const item of list) drawn.set(item.id, await one(item));
    return drawn;
  };
  const figures = (of: Evidence['case']['before']) =>
    (of?.strings ?? []).filter((s) => ids.has(s.id) && s.slots.length > 0 && s.at !== null);
  return {
    before: await draw(figures(data.case.before), staircaseDrawing),
    after: await draw(figures(data.case.after), staircaseDrawing),
    day: await draw(shown, (s) => historyDrawing(s.day, caseEvidenceWords.voltsOf(s.name))),
    week: await draw(shown, (s) => historyDrawing(s.week, caseEvidenceWords.watts(s.name))),
  };
}

async function pdfOf({ data, about, photos }: Gathered): Promise<Buffer> {
  const small = new Map<string, Buffer>();
  for (const [ref, bytes] of photos)
    small.set(
      ref,
      await sharp(bytes)
        .resize({ width: PHOTO_PIXELS, height: PHOTO_PIXELS, fit: 'inside', withoutEnlargement: true })
        .flatten({ background: '#ffffff' })
        .jpeg({ quality: 82 })
        .toBuffer(),
    );
  return evidencePdf(data, about, await drawingsOf(data), small);
}

const QUANTITIES: readonly HistoryQuantity[] = ['voltage', 'current', 'power'];

async function readingsOf(tx: Tx, { data, about }: Gathered) {
  const on = localDay(data.case.openedAt, data.case.timeZone);
  const tables = new Map<string, { day: StringHistory[]; week: StringHistory[] }>();
  for (const { id, name } of data.strings) {
    const read = async (range: 'day' | 'week'): Promise<StringHistory[]> => {
      const list: StringHistory[] = [];
      for (const quantity of QUANTITIES)
        list.push(await readHistory(tx, id, { range, quantity, on }, about.at));
      return list;
    };
    tables.set(name, { day: await read('day'), week: await read('week') });
  }
  return tables;
}

/**
 * What whoever is called next gets of a case, as it stands at this moment.
 * @throws AppError not_found
 */
export async function caseEvidence(
  tx: Tx,
  actor: Actor,
  ref: string,
  form: 'pdf' | 'zip',
  at: Date,
): Promise<Response> {
  const gathered = await gather(tx, actor, ref, at);
  const pdf = await pdfOf(gathered);
  const bytes =
    form === 'pdf'
      ? new Uint8Array(pdf)
      : evidenceZip(gathered.data, gathered.about, pdf, await readingsOf(tx, gathered), gathered.photos);
  const { number, siteName } = gathered.data.case;
  return new Response(new Uint8Array(bytes), {
    headers: {
      'content-type': form === 'pdf' ? 'application/pdf' : 'application/zip',
      'content-disposition': `attachment; filename="${fileName(`${siteName}-case-${number}`)}.${form}"`,
      'cache-control': 'private, no-store',
      'x-content-type-options': 'nosniff',
    },
  });
}
