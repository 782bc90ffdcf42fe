import { randomUUID } from 'node:crypto';
import { readdir } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { crc32 } from 'node:zlib';
import sharp from 'sharp';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { attachmentQuery, type AttachmentQuery } from '../../src/schemas/api/attachments';
import { PHOTO_MAX_BYTES } from '../../src/schemas/lists-and-limits';
import { asActor } from '../../src/server/db/transaction';
import { fileReply } from '../../src/server/files/file-reply';
import { attachmentByRef, attachmentBytes, attachmentsOfSite } from '../../src/server/queries/attachments';
import { receiveFile, storeAttachment } from '../../src/server/services/store-attachment';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { failure } from '../support/refusal';

const HALL = 'Old Tannery Market Hall';
let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;
let manager: Actor;
let stranger: Actor;
let customer: Actor;
const now = new Date();

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, 'Netloft Terrace']);
  technician = await fleet.actor('technician@lowfield.example');
  manager = await fleet.actor('manager@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  customer = await fleet.actor('customer@lowfield.example');
});
afterAll(() => db.drop());
beforeEach(async () => {
  await db.owner.query('delete from attachment');
});

const query = (more: Partial<AttachmentQuery> = {}): AttachmentQuery =>
  attachmentQuery.parse({
    ref: randomUUID(),
    subject: 'install_check',
    subjectRef: randomUUID(),
    name: 'IMG 4711.JPG',
    at: now.toISOString(),
    ...more,
  });
type Body = Uint8Array | string | ReadableStream<Uint8Array>;
const request = (body: Body, headers: Record<string, string> = {}): Request =>
  new Request('http://here/', {
    method: 'POST',
    body: body as BodyInit,
    headers,
    duplex: 'half',
  } as RequestInit);
async function send(body: Body, what = query(), actor = technician, headers = {}) {
  const file = await receiveFile(actor, fleet.site(HALL).ref, request(body, headers), what);
  return asActor(actor, (tx) => storeAttachment(tx, actor, fleet.site(HALL).ref, what, file, now));
}
const picture = (width: number, height: number) =>
  sharp({ create: { width, height, channels: 3, background: '#4a7' } });
/** A photo as a phone takes it: lying on its side, with the place in it. */
const fromPhone = (width = 3000, height = 2000) =>
  picture(width, height)
    .withExif({
      IFD0: { Model: 'Phone of ours' },
      IFD3: {
        GPSLatitudeRef: 'N',
        GPSLatitude: '51/1 30/1 0/1',
        GPSLongitudeRef: 'E',
        GPSLongitude: '0/1 7/1 0/1',
      },
    })
    .withMetadata({ orientation: 6 })
    .jpeg()
    .toBuffer();
const stored = (ref: string, variant: 'full' | 'thumbnail' = 'full', actor = technician) =>
  asActor(actor, (tx) => attachmentBytes(tx, ref, variant));
const folders = async () => (await readdir(tmpdir())).filter((f) => f.startsWith('wakeline-file-')).length;

describe('a photo', () => {
  it('is turned upright, made smaller, and loses place and camera', async () => {
    const original = await fromPhone();
    const before = await sharp(original).metadata();
    expect(before.orientation).toBe(6);
    expect(before.exif?.includes('Phone of ours')).toBe(true);
    const { record, made } = await send(original);
    expect(made).toBe(true);
    expect(record).toMatchObject({ mediaType: 'image/jpeg', width: 1707, height: 2560, placeKept: false });
    const full = await stored(record.ref);
    const after = await sharp(full?.data).metadata();
    expect([after.format, after.width, after.height, after.exif, after.orientation]).toEqual([
      'jpeg',
      1707,
      2560,
      undefined,
      undefined,
    ]);
    expect(full?.data.includes('Phone of ours')).toBe(false);
    const small = await stored(record.ref, 'thumbnail');
    expect(await sharp(small?.data).metadata()).toMatchObject({ width: 213, height: 320 });
    expect(record.byteSize).toBe(full?.data.length);
  });

  it('keeps the place where it is wanted, in the large picture only', async () => {
    const { record } = await send(await fromPhone(800, 600), query({ keepPlace: 'yes' }));
    expect(record.placeKept).toBe(true);
    const full = await sharp((await stored(record.ref))?.data).metadata();
    expect(full.exif?.includes('Phone of ours')).toBe(true);
    // upright now, so that no reader turns it a second time
    expect(full.orientation ?? 1).toBe(1);
    expect((await sharp((await stored(record.ref, 'thumbnail'))?.data).metadata()).exif).toBeUndefined();
  });

  it('is stored once however often it is sent, and an identifier carries one photo', async () => {
    const what = query();
    const bytes = await fromPhone(600, 400);
    expect((await send(bytes, what)).made).toBe(true);
    expect((await send(bytes, what)).made).toBe(false);
    const both = query();
    const sent = await Promise.all([send(bytes, both), send(bytes, both)]);
    expect(sent.filter((s) => s.made)).toHaveLength(1);
    const listed = await asActor(technician, (tx) => attachmentsOfSite(tx, fleet.site(HALL).id));
    expect(listed).toHaveLength(2);
    expect((await failure(send(await fromPhone(500, 400), what))).kind).toBe('conflict');
    expect((await failure(send(bytes, what, manager))).kind).toBe('conflict');
  });

  it.each([
    ['PNG', () => picture(40, 30).png().toBuffer()],
    ['WebP', () => picture(40, 30).webp().toBuffer()],
    [
      'PNG with see-through parts',
      () =>
        sharp({ create: { width: 9, height: 9, channels: 4, background: '#0000' } })
          .png()
          .toBuffer(),
    ],
  ])('may come as %s', async (_, make) => {
    const { record } = await send(await make());
    expect(record.mediaType).toBe('image/jpeg');
  });

  const box = (brand: string) =>
    Buffer.concat([Buffer.from([0, 0, 0, 24]), Buffer.from(`ftyp${brand}0000mif1${brand}`)]);
  it.each([
    ['a web page', Buffer.from('\ufeff <!DOCTYPE html><script>alert(1)</script>'), 'web page'],
    ['a drawing with a script', Buffer.from('<?xml version="1.0"?><svg onload="x()"/>'), 'SVG'],
    ['HEIC', box('heic'), 'HEIC picture, which this server can’t read'],
    ['AVIF', box('avif'), 'AVIF'],
    ['a video', box('isom'), 'video'],
    ['a GIF', Buffer.from('GIF89a....'), 'GIF'],
    ['TIFF', Buffer.from([0x49, 0x49, 0x2a, 0, 8, 0, 0, 0]), 'TIFF'],
    ['an archive', Buffer.from([0x50, 0x4b, 3, 4, 0, 0]), 'archive'],
    ['nothing', Buffer.alloc(0), 'empty'],
    ['noise', Buffer.from([1, 2, 3, 4, 5]), 'no picture'],
    ['a PDF where no evidence is sent', Buffer.from('%PDF-1.7 …'), 'PDF'],
  ])('named .jpg that is %s is refused with what to do', async (_, bytes, word) => {
    const refused = await failure(
      send(bytes.length === 0 ? new ReadableStream({ start: (c) => c.close() }) : bytes),
    );
    expect(refused.kind).toBe('invalid');
    expect(refused.message).toContain(word);
    expect(refused.message).toMatch(/JPEG|photo instead/);
    expect(refused.detail.fields?.[0]?.field).toBe('body');
  });

  it('that is damaged, cut off or a bomb is refused, and the server lives on', async () => {
    const whole = await fromPhone(1200, 900);
    expect((await failure(send(whole.subarray(0, whole.length / 2)))).message).toContain('can’t be read');
    expect(
      (await failure(send(Buffer.concat([whole.subarray(0, 4), Buffer.alloc(5000, 7)])))).message,
    ).toContain('can’t be read');
    // a few bytes that claim 256 million pixels
    const bomb = await picture(8, 8).png().toBuffer();
    bomb.writeUInt32BE(16_000, 16);
    bomb.writeUInt32BE(16_000, 20);
    bomb.writeUInt32BE(crc32(bomb.subarray(12, 29)), 29);
    expect((await failure(send(bomb))).message).toContain('16000 × 16000 pixels');
    expect((await send(whole)).made).toBe(true);
  });

  it('of 200 MB is cut off long before it is here, whatever its length header says', async () => {
    let pulled = 0;
    const endless = () =>
      new ReadableStream<Uint8Array>({
        pull(controller) {
          pulled++;
          if (pulled === 1) controller.enqueue(new Uint8Array([0xff, 0xd8, 0xff, 0xe0]));
          else if (pulled > 3200) controller.close();
          else controller.enqueue(new Uint8Array(64 * 1024));
        },
      });
    const refused = await failure(send(endless()));
    expect(refused.kind).toBe('too_large');
    expect(refused.message).toContain('25 MB');
    expect(pulled * 64 * 1024).toBeLessThan(PHOTO_MAX_BYTES + 4 * 1024 * 1024);
    pulled = 0;
    const announced = await failure(send(endless(), query(), technician, { 'content-length': '209715200' }));
    expect(announced.kind).toBe('too_large');
    expect(pulled).toBeLessThan(5);
  });

  it('leaves nothing behind on the disk', async () => {
    const before = await folders();
    await send(await fromPhone(300, 200));
    await failure(send(Buffer.from('<html>')));
    expect(await folders()).toBe(before);
  });
});

describe('a document', () => {
  const pdf = Buffer.from('%PDF-1.4\n% a declaration of both makers');
  it('is taken from a manager as evidence for a connector pair', async () => {
    const what = query({ subject: 'connector_pair', name: 'Declaration 12.pdf' });
    const { record } = await send(pdf, what, manager);
    expect(record).toMatchObject({ mediaType: 'application/pdf', width: null });
    expect((await stored(record.ref, 'thumbnail'))?.data.equals(pdf)).toBe(true);
    expect((await failure(send(pdf, query({ subject: 'connector_pair' })))).kind).toBe('forbidden');
  });

  it('is served as what it is, runs nothing, and is kept by the reader only', async () => {
    const file = { name: '../"ev\r\nil.html', mediaType: 'application/pdf', data: pdf };
    const reply = fileReply(request('x'), file, '"t"');
    expect(Object.fromEntries(reply.headers)).toMatchObject({
      'content-type': 'application/pdf',
      'x-content-type-options': 'nosniff',
      'content-disposition': 'attachment; filename="ev-il.pdf"',
      'content-security-policy': expect.stringContaining('sandbox') as string,
      'cache-control': expect.stringContaining('private') as string,
    });
    expect(fileReply(request('x', { 'if-none-match': '"t"' }), file, '"t"').status).toBe(304);
  });
});

describe('the wall round files', () => {
  it('hides them from other organisations and from customers of other sites', async () => {
    const { record } = await send(await fromPhone(300, 200));
    expect(await stored(record.ref)).toBeDefined();
    for (const actor of [stranger, { ...customer, sites: [fleet.site('Netloft Terrace').id] }]) {
      expect(await stored(record.ref, 'full', actor)).toBeUndefined();
      expect(await asActor(actor, (tx) => attachmentByRef(tx, record.ref))).toBeUndefined();
      const listed = await asActor(actor, (tx) => attachmentsOfSite(tx, fleet.site(HALL).id));
      expect(listed).toEqual([]);
      // row-level security says the same, past every query
      const { rows } = await asActor(actor, (tx) =>
        tx.raw<{ rows: unknown[] }>('select 1 from attachment_data'),
      );
      expect(rows).toEqual([]);
    }
    const what = query();
    const file = await receiveFile(technician, fleet.site(HALL).ref, request(await fromPhone(30, 20)), what);
    const read = receiveFile(stranger, fleet.site(HALL).ref, request(await fromPhone(30, 20)), what);
    expect((await failure(read)).kind).toBe('not_found');
    const theirs = failure(
      asActor(stranger, (tx) => storeAttachment(tx, stranger, fleet.site(HALL).ref, what, file, now)),
    );
    expect((await theirs).kind).toBe('not_found');
    // an identifier that is taken behind the wall
    const { rows } = await db.owner.query<{ ref: string }>(
      'select ref from site where organisation_id = $1',
      [stranger.organisationId],
    );
    if (rows[0]) {
      const taken = { ...what, ref: record.ref };
      const site = rows[0].ref;
      const refused = await failure(
        asActor(stranger, (tx) => storeAttachment(tx, stranger, site, taken, file, now)),
      );
      expect(refused.kind).toBe('conflict');
    }
  });
});
