import sharp from 'sharp';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { thresholdsBody, type OrganisationBody } from '../../src/schemas/api/settings';
import { asActor } from '../../src/server/db/transaction';
import { judgedSite } from '../../src/server/queries/judgement-contexts';
import { database } from '../../src/server/db/pools';
import {
  logoReply,
  readSettings,
  receiveLogo,
  saveLogo,
  saveOrganisation,
  saveThresholds,
} from '../../src/server/services/settings';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';

const CLINIC = 'Weirside Clinic';
const from = { at: new Date('2026-11-12T15:00:00Z'), address: '127.0.0.1' };
let db: TestDatabase;
let fleet: TestFleet;
let manager: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC]);
  manager = await fleet.actor('manager@lowfield.example');
});
afterAll(() => db.drop());

const now = () => asActor(manager, (tx) => readSettings(tx));
const save = (body: OrganisationBody) => asActor(manager, (tx) => saveOrganisation(tx, manager, body, from));
const upload = (bytes: Uint8Array | string) =>
  receiveLogo(
    new Request('http://127.0.0.1/api/settings/logo', {
      method: 'POST',
      body: bytes as BodyInit,
      duplex: 'half',
    } as RequestInit),
  );

describe('an organisation’s settings', () => {
  it('are kept, are on record with what changed, and touch no other organisation', async () => {
    const before = await now();
    const { name, phone, timeZone, units } = before;
    const others = (await db.owner.query('select count(*) as n from organisation where currency is not null'))
      .rows[0];
    const after = await save({ name, phone, timeZone, units, currency: 'CHF', hideRawAfterDays: 30 });
    expect(after).toMatchObject({ currency: 'CHF', hideRawAfterDays: 30 });
    const { rows } = await db.owner.query(
      `select before, after from audit_entry where action = 'settings.organisation' order by id desc limit 1`,
    );
    expect(rows[0]).toEqual({
      before: { currency: before.currency, hideRawAfterDays: null },
      after: { currency: 'CHF', hideRawAfterDays: 30 },
    });
    const set = (await db.owner.query('select count(*) as n from organisation where currency is not null'))
      .rows[0];
    expect(Number(set.n) - Number(others.n)).toBe(1);
    // nothing changed: nothing on record
    await save({ name, phone, timeZone, units, currency: 'CHF', hideRawAfterDays: 30 });
    expect(
      (await db.owner.query(`select 1 from audit_entry where action = 'settings.organisation'`)).rows,
    ).toHaveLength(1);
  });

  it('hide raw readings that are older than is wanted, from every reader, and give none up', async () => {
    const site = fleet.site(CLINIC);
    const stringId = [...site.strings.values()][0]?.id ?? 0;
    await db.owner.query(`select ensure_days((now() - interval '41 days')::date, current_date + 1)`);
    await db.owner.query(
      `insert into string_frame (string_id, at, mask, voltage_sum, power_sum, voltage, current, temperature, signal, via, state)
       select $1, now() - n * interval '1 day', 1, 100, 100, '{1}', '{1}', '{1}', '{1}', '{1}', '{1}' from generate_series(1, 40) n`,
      [stringId],
    );
    const seen = async () =>
      asActor(manager, async (tx) => {
        const { rows } = await tx.raw<{ rows: { n: number }[] }>(
          'select count(*)::int as n from string_frame where string_id = ?',
          [stringId],
        );
        return rows[0]?.n;
      });
    expect(await seen()).toBe(29); // the thirtieth was written a moment before now
    const { name, phone, timeZone, units } = await now();
    await save({ name, phone, timeZone, units, currency: null, hideRawAfterDays: null });
    expect(await seen()).toBe(40);
  });
});

describe('thresholds', () => {
  const typed = (body: Record<string, string>) => thresholdsBody.safeParse(body);

  it('are read as people type them, within their range, the default kept as none', () => {
    expect(typed({ lowOutputLoss: '8,5 %', lowOutputDays: '3', stuckGraceS: '' }).data).toEqual({
      lowOutputLoss: 0.085,
    });
    const bad = typed({ lowOutputLoss: '90', lowOutputDays: '2.5' });
    expect(bad.error?.issues.map((i) => i.path[0])).toEqual(['lowOutputLoss', 'lowOutputDays']);
    expect(bad.error?.issues[0]?.message).toContain('from 3 to 30');
    expect(typed({ other: '1' }).success).toBe(false);
  });

  it('reach the judgement', async () => {
    const saved = await asActor(manager, (tx) =>
      saveThresholds(tx, manager, { stuckGraceS: 600, lowOutputLoss: 0.08 }, from),
    );
    expect(saved.thresholds).toEqual({ stuckGraceS: 600, lowOutputLoss: 0.08 });
    const site = await judgedSite(database('ingest'), fleet.site(CLINIC).id);
    expect(site?.thresholds).toEqual({ stuckGraceS: 600, lowOutputLoss: 0.08 });
  });
});

describe('a logo', () => {
  it('is made anew from its pixels, served, and taken away', async () => {
    const png = await sharp({
      create: { width: 1600, height: 400, channels: 4, background: { r: 10, g: 90, b: 100, alpha: 0.5 } },
    })
      .withExif({ IFD0: { Copyright: 'somebody at home' } })
      .png()
      .toBuffer();
    const logo = await upload(new Uint8Array(png));
    expect([logo.width, logo.height]).toEqual([640, 160]);
    expect(logo.data.includes('somebody at home')).toBe(false);
    const saved = await asActor(manager, (tx) => saveLogo(tx, manager, logo, from));
    expect(saved.logo).not.toBeNull();
    const reply = await asActor(manager, (tx) => logoReply(tx));
    expect(reply.headers.get('content-type')).toBe('image/png');
    expect(Buffer.from(await reply.arrayBuffer()).equals(logo.data)).toBe(true);
    expect((await asActor(manager, (tx) => saveLogo(tx, manager, null, from))).logo).toBeNull();
    await expect(asActor(manager, (tx) => logoReply(tx))).rejects.toMatchObject({ kind: 'not_found' });
  });

  it('is refused in words when it is a page, a paper, or damaged', async () => {
    await expect(upload('<html><script>alert(1)</script></html>')).rejects.toThrow('web page');
    await expect(upload('%PDF-1.7 …')).rejects.toThrow('This is a PDF');
    const cut = (
      await sharp({ create: { width: 50, height: 50, channels: 3, background: 'red' } })
        .png()
        .toBuffer()
    ).subarray(0, 60);
    await expect(upload(new Uint8Array(cut))).rejects.toThrow('Export it again');
  });
});
