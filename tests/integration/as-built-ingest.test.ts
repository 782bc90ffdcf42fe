import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { PART_DEFAULTS } from '../../src/domain/commissioning/as-built/parts';
import { asActor } from '../../src/server/db/transaction';
import { startIngest, stopIngest } from '../../src/server/ingest/service';
import { asBuiltParts } from '../../src/server/queries/as-built';
import { stringsNow } from '../../src/server/queries/now';
import { addFromForm } from '../../src/server/services/as-built-requests';
import { createSite } from '../../src/server/services/create-site';
import { changePart, removePart } from '../../src/server/services/edit-as-built';
import { setSlotCounts } from '../../src/server/services/edit-as-built-strings';
import { placeUnits } from '../../src/server/services/place-units';
import type { PartValues } from '../../src/schemas/api/as-built';
import type { Frame } from '../../src/schemas/ingest';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet } from '../support/fleet';
import { frameOf, nowS, openSockets, TestLogger, until, type Sockets } from '../support/ingest';

/** A site that is made, wired up and changed while the ingest runs, with a logger of its own that speaks to it. */

let db: TestDatabase;
let sockets: Sockets;
let actor: Actor;
let siteId: number;
let siteRef: string;
let token: string;
let logger: TestLogger;
const SERIAL = 'LG-NEW-0001';
const how = { reason: 'as found on the roof', source: 'forms' };
const strings: Record<string, string> = {};

beforeAll(async () => {
  db = await testDatabase();
  const fleet = await testFleet(db, ['Old Tannery Market Hall']);
  actor = await fleet.actor('technician@lowfield.example');
  await startIngest();
  sockets = await openSockets();
});
afterAll(async () => {
  await logger?.end();
  await stopIngest();
  await sockets.close();
  await db.drop();
});

const parts = async () => {
  const built = await asActor(actor, (tx) => asBuiltParts(tx, siteId));
  if (!built) throw new Error('the site is gone');
  return built;
};
const add = (kind: 'plane' | 'inverter' | 'logger' | 'string', values: PartValues) =>
  asActor(actor, (tx) =>
    addFromForm(
      tx,
      actor,
      siteRef,
      { kind, values: { ...PART_DEFAULTS[kind], ...values }, alike: 1, inTurn: false, reason: '' },
      null,
    ),
  );
const place = (string: string, serials: Record<number, string | null>) =>
  asActor(actor, (tx) =>
    placeUnits(
      tx,
      actor,
      siteId,
      Object.entries(serials).map(([position, serial]) => ({
        slot: { string: strings[string]!, position: Number(position) },
        serial,
      })),
      { at: new Date(), reason: how.reason, source: 'forms' },
    ),
  );
const nextRoster = async () => {
  const before = logger.roster?.version ?? 0;
  logger.roster = await logger.inbox.next('roster', (r) => r.version > before);
  return logger.roster;
};
const frames = (claims: number | (number | null)[], n: number, more: Partial<Frame> = {}) => {
  const string = logger.roster.strings[0]!;
  return logger.frames([{ at: nowS(), string: string.index, frame: frameOf(n, 'both', claims, more) }]);
};
const slots = async (name: string) => {
  const now = await asActor(actor, (tx) => stringsNow(tx, new Date(), { siteId }));
  return now.find((s) => s.name === name)?.slots ?? [];
};
const nextSecond = () => new Promise((resolve) => setTimeout(resolve, 1100 - (Date.now() % 1000)));

describe('an as-built that is made while readings come in', () => {
  it('a new site and its logger: the token that was made lets it in, its roster is empty', async () => {
    const made = await asActor(actor, (tx) =>
      createSite(
        tx,
        actor,
        {
          ...PART_DEFAULTS.site,
          name: 'Ferry Sheds',
          latitude: 0,
          longitude: noonLongitude(),
          timeZone: 'UTC',
          reportIntervalS: 10,
        },
        null,
      ),
    );
    siteId = made.siteId;
    siteRef = made.id;
    const added = await add('logger', { serial: SERIAL.toLowerCase() });
    token = added.token ?? '';
    expect(token).toMatch(/^wl_[\w-]{43}$/);
    logger = await TestLogger.arrive(sockets, token, SERIAL);
    expect(logger.roster).toMatchObject({
      version: 1,
      strings: [],
      zones: ['Whole site'],
      reportIntervalS: 10,
    });
    const { rows } = await db.owner.query('select hash from ingest_token where hash = $1::bytea', [
      Buffer.from(token),
    ]);
    expect(rows).toEqual([]); // only the hash is kept
  });

  it('a string is added: the logger is told at once, and what it reports is kept', async () => {
    await add('plane', { name: 'South roof', surfaceTilt: 10, surfaceAzimuth: 180 });
    await add('inverter', { name: 'W1', acPowerMax: 5000, inputs: 2 });
    const built = await parts();
    const type = (name: string) => built.catalogue.unitTypes.find((t) => t.name === name)?.id ?? null;
    const added = await add('string', {
      name: 'A1',
      slots: 3,
      unitType: type('Reporting unit, both sides'),
      moduleType: built.catalogue.moduleTypes[0]!.id,
      plane: built.planes[0]!.id,
      input: built.inverters[0]!.inputs[0]!.id,
      zone: built.zones[0]!.id,
      logger: built.loggers[0]!.id,
    });
    strings.A1 = added.ids[0]!;
    await until(async () => (await nextRoster()).strings.length === 1, 'a roster with the string');
    expect(logger.roster.strings[0]).toMatchObject({
      name: 'A1',
      serials: [null, null, null],
      inverter: 'W1',
      input: 1,
    });
    await place('A1', { 1: 'NEW-A1-01', 2: 'NEW-A1-02', 3: 'NEW-A1-03' });
    const roster = await nextRoster();
    expect(roster.strings[0]?.serials).toEqual(['NEW-A1-01', 'NEW-A1-02', 'NEW-A1-03']);
    await nextSecond();
    await logger.durable(frames(1, 3));
    // the site is new to the judgement too: it is taken with the next sweep
    await until(async () => (await slots('A1')).every((s) => s.state === 'passing'), 'judged', 20_000);
  });

  it('a unit is replaced: a new version, and the slot begins anew while the others go on', async () => {
    await place('A1', { 2: 'NEW-A1-2B' });
    expect((await nextRoster()).strings[0]?.serials[1]).toBe('NEW-A1-2B');
    await until(async () => (await slots('A1'))[1]?.state === 'unheard', 'unheard');
    const [first, second] = await slots('A1');
    expect(first).toMatchObject({ state: 'passing', voltage: 38 });
    expect(second).toMatchObject({ serial: 'NEW-A1-2B', voltage: null, seen: null, signal: null });
    // others of its string reporting does not make it heard
    await nextSecond();
    await logger.durable(frames([2, null, 1], 3));
    await until(async () => (await slots('A1'))[0]?.state === 'shutdown', 'the frame judged');
    expect((await slots('A1'))[1]).toMatchObject({ state: 'unheard', seen: null });
    const heard = await db.owner.query(`select serial from heard where site_id = $1 order by 1`, [siteId]);
    expect(heard.rows.map((r: { serial: string }) => r.serial)).toEqual([
      'NEW-A1-01',
      'NEW-A1-02',
      'NEW-A1-03',
    ]);
  });

  it('what the logger still has of the unit before is kept under its roster, and said of nobody else', async () => {
    const earlier = logger.roster.version - 1;
    const at = nowS() - 30;
    await logger.durable(
      logger.frames([{ at, string: logger.roster.strings[0]!.index, frame: frameOf(3, 'both', 1) }], earlier),
    );
    const { rows } = await db.owner.query<{ state: number[] }>(
      `select f.state from string_frame f join string s on s.id = f.string_id where s.site_id = $1 and f.at = to_timestamp($2::int4)`,
      [siteId, at],
    );
    expect(rows[0]?.state).toEqual([1, 1, 1]);
    expect((await slots('A1'))[1]).toMatchObject({ serial: 'NEW-A1-2B', state: 'unheard', voltage: null });
  });

  it('the count changes: the string grows and shrinks, and what is known of the slots that stay, stays', async () => {
    const moduleType = (await parts()).catalogue.moduleTypes[0]!.id;
    const count = (slots: number) =>
      asActor(actor, (tx) =>
        setSlotCounts(tx, actor, siteId, [{ string: strings.A1!, slots, moduleType }], how),
      );
    await count(5);
    expect((await nextRoster()).strings[0]?.serials).toHaveLength(5);
    await until(async () => (await slots('A1')).length === 5, 'five slots');
    expect((await slots('A1'))[0]).toMatchObject({ state: 'shutdown' });
    await place('A1', { 4: 'NEW-A1-04' });
    await nextRoster();
    await nextSecond();
    await logger.durable(frames([1, 1, 1, 1, null], 5));
    await until(async () => (await slots('A1'))[3]?.state === 'passing', 'the new slot judged');
    await expect(count(3)).rejects.toMatchObject({
      kind: 'invalid',
      message: expect.stringContaining('A1-4') as string,
    });
    await count(4);
    expect((await nextRoster()).strings[0]?.serials).toHaveLength(4);
    await nextSecond();
    await logger.durable(frames([1, 2, 1, 1], 4));
    await until(async () => (await slots('A1'))[1]?.state === 'shutdown', 'judged after the cut');
    // a report under the roster before the cut comes late: it is kept and harms nothing
    await logger.durable(
      logger.frames(
        [
          {
            at: nowS() - 20,
            string: logger.roster.strings[0]!.index,
            frame: frameOf(5, 'both', [1, 1, 1, 1, null]),
          },
        ],
        logger.roster.version - 1,
      ),
    );
    expect((await slots('A1')).map((s) => s.state)).toEqual(['passing', 'shutdown', 'passing', 'passing']);
  });

  it('a string that has reported stays; one that was a mistake goes, and what a logger says of it is refused', async () => {
    const remove = (id: string) =>
      asActor(actor, (tx) => removePart(tx, actor, siteId, { kind: 'string', id }, how));
    await expect(remove(strings.A1!)).rejects.toMatchObject({
      kind: 'conflict',
      message: expect.stringContaining('reported reading') as string,
    });
    const a1 = (await parts()).strings[0]!;
    const added = await asActor(actor, (tx) =>
      addFromForm(
        tx,
        actor,
        siteRef,
        {
          kind: 'string',
          values: {
            name: 'A2',
            slots: 3,
            unitType: a1.unitType,
            moduleType: a1.slots[0]!.moduleType,
            plane: a1.plane,
            input: a1.input,
            zone: a1.zone,
            logger: a1.logger,
            transmitters: [],
            cableResistance: 0.3,
            homeRunLeavesArray: true,
          },
          alike: 1,
          inTurn: false,
          reason: '',
        },
        null,
      ),
    );
    strings.A2 = added.ids[0]!;
    await place('A2', { 1: 'NEW-A2-01' });
    await until(
      async () => (await nextRoster()).strings[1]?.serials[0] === 'NEW-A2-01',
      'both in the roster',
    );
    const { version } = logger.roster;
    const index = logger.roster.strings[1]!.index;
    await remove(strings.A2);
    expect((await nextRoster()).strings.map((s) => s.name)).toEqual(['A1']);
    const refused = await logger.refused(
      logger.frames([{ at: nowS(), string: index, frame: frameOf(3, 'both', [1, null, null]) }], version),
    );
    expect(refused.again).toBe(false);
    await logger.durable(frames(1, 4)); // the connection lives
  });

  it('its report interval and its name in the roster follow an edit', async () => {
    await asActor(actor, (tx) =>
      changePart(
        tx,
        actor,
        siteId,
        { kind: 'string', id: strings.A1!, before: { name: 'A1' }, after: { name: 'Ridge 1' } },
        how,
      ),
    );
    expect((await nextRoster()).strings[0]?.name).toBe('Ridge 1');
    await asActor(actor, (tx) =>
      changePart(
        tx,
        actor,
        siteId,
        { kind: 'site', id: siteRef, before: { reportIntervalS: 10 }, after: { reportIntervalS: 30 } },
        how,
      ),
    );
    expect((await nextRoster()).reportIntervalS).toBe(30);
  });

  it('a new token ends the one before', async () => {
    const { makeLoggerToken, newToken } = await import('../../src/server/services/logger-token');
    const fresh = newToken();
    const id = (await parts()).loggers[0]!.id;
    await asActor(actor, (tx) => makeLoggerToken(tx, actor, siteId, id, how, { token: fresh }));
    await expect(TestLogger.connect(sockets, token)).rejects.toThrow('HTTP 401');
    const again = await TestLogger.arrive(sockets, fresh, SERIAL);
    expect(again.roster.strings).toHaveLength(1);
    logger = again;
  });
});

/** Where the sun stands high at this moment. */
function noonLongitude(): number {
  const now = new Date();
  return 15 * (12 - (now.getUTCHours() + now.getUTCMinutes() / 60));
}
