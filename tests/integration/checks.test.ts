import { randomUUID } from 'node:crypto';
import { gzipSync } from 'node:zlib';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { CHECK_KEYS, type CheckKey } from '../../src/domain/commissioning/checks/definition';
import { checkInput, checkRecord, type CheckInput } from '../../src/schemas/api/checks';
import { captureSnapshot as snapshotSchema } from '../../src/schemas/api/capture';
import { asActor } from '../../src/server/db/transaction';
import { captureSnapshot, snapshotTag } from '../../src/server/services/capture-snapshot';
import { recordCheck } from '../../src/server/services/record-check';
import { signOffString } from '../../src/server/services/sign-off';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { failure } from '../support/refusal';

const HALL = 'Old Tannery Market Hall';
let db: TestDatabase;
let fleet: TestFleet;
let technician: Actor;
let manager: Actor;
let stranger: Actor;
let site: string;
let b1: string;
const now = new Date();

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [HALL, 'Netloft Terrace']);
  technician = await fleet.actor('technician@lowfield.example');
  manager = await fleet.actor('manager@lowfield.example');
  stranger = await fleet.actor('manager@harbourline.example');
  site = fleet.site(HALL).ref;
  b1 = await stringRef(HALL, 'B1');
});
afterAll(() => db.drop());
beforeEach(async () => {
  await db.owner.query('delete from string_sign_off; delete from install_check; delete from connector_pair');
});

async function stringRef(siteName: string, name: string): Promise<string> {
  const { rows } = await db.owner.query<{ ref: string }>(
    'select ref from string where site_id = $1 and name = $2',
    [fleet.site(siteName).id, name],
  );
  if (!rows[0]) throw new Error(`no string ${name}`);
  return rows[0].ref;
}
const input = (more: Partial<CheckInput> = {}): CheckInput =>
  checkInput.parse({
    ref: randomUUID(),
    stringId: b1,
    check: 'strain_relief',
    result: 'pass',
    at: now.toISOString(),
    ...more,
  });
const record = (what: CheckInput, actor = technician, at = now, where = site) =>
  asActor(actor, (tx) => recordCheck(tx, actor, where, what, at));
const snapshot = (actor = technician) =>
  asActor(actor, (tx) => captureSnapshot(tx, site, { id: randomUUID(), name: 'x', role: actor.role }, now));
const count = async (table: string): Promise<number> =>
  Number((await db.owner.query<{ n: string }>(`select count(*) as n from ${table}`)).rows[0]?.n);
async function connector(name: string, family: string, organisation = technician.organisationId) {
  const { rows } = await db.owner.query<{ id: number; ref: string }>(
    `insert into connector_type (organisation_id, name, maker, family, voltage_max, current_max)
     values ($1, $2, 'Tidewell', $3, 1500, 40) returning id, ref`,
    [organisation, `${name} ${randomUUID().slice(0, 8)}`, family],
  );
  if (!rows[0]) throw new Error('not written');
  return rows[0];
}
/** Records everything that a signature asks for; figures as a sound string has them. */
async function allChecks(connectorRef: string, but: Partial<Record<CheckKey, Partial<CheckInput>>> = {}) {
  const figures: Partial<Record<CheckKey, CheckInput['figures']>> = {
    connectors: { moduleLead: connectorRef, unitInput: connectorRef },
    earth_continuity: { resistance: 0.3 },
    voltage_to_earth: { between: 560, positive: 12, negative: -9 },
  };
  for (const check of CHECK_KEYS.filter((k) => k !== 'string_current'))
    await record(
      input({
        check,
        ...(check === 'insulation'
          ? { result: 'not_applicable', reason: 'The maker of the units allows none.' }
          : {}),
        figures: figures[check] ?? {},
        ...but[check],
      }),
    );
}

describe('an install check', () => {
  it('is stored once however often it is sent, with the phone’s time and the server’s', async () => {
    const one = input({ note: 'clips renewed', at: new Date(now.getTime() - 3_600_000).toISOString() });
    const first = await record(one);
    const again = await record(one);
    expect(first.made).toBe(true);
    expect(again).toEqual({ made: false, record: first.record });
    expect(checkRecord.parse(first.record).at).toBe(one.at);
    expect(new Date(first.record.recordedAt).getTime() - new Date(one.at).getTime()).toBeGreaterThan(
      3_500_000,
    );
    expect(await count('install_check')).toBe(1);
    // also when it is sent twice at the same moment
    const twice = input({ check: 'mounting' });
    const both = await Promise.all([record(twice), record(twice)]);
    expect(both.filter((r) => r.made)).toHaveLength(1);
  });

  it('refuses an identifier that carries something else, or is another person’s', async () => {
    const one = input();
    await record(one);
    for (const other of [
      { ...one, note: 'other' },
      { ...one, result: 'fail' as const },
    ]) {
      const refused = await failure(record(other));
      expect(refused.kind).toBe('conflict');
      expect(refused.detail.current).toBeUndefined();
    }
    expect((await failure(record(one, manager))).kind).toBe('conflict');
    expect(await count('install_check')).toBe(1);
  });

  it('tells the second of two people what the first recorded, and takes the merge', async () => {
    const theirs = await record(input({ result: 'fail', note: 'lead on the roof' }), manager);
    const mine = input({ note: 'looks fine' });
    const refused = await failure(record(mine));
    expect(refused.kind).toBe('conflict');
    expect(checkRecord.parse(refused.detail.current)).toEqual(theirs.record);
    expect(refused.message).toContain('Nothing is lost');
    // the same record again, in place of theirs
    const merged = await record({ ...mine, supersedes: theirs.record.ref });
    expect(merged).toMatchObject({
      made: true,
      record: { supersedes: theirs.record.ref, note: 'looks fine' },
    });
    const [standing] = (await snapshot()).strings.find((s) => s.id === b1)?.checks ?? [];
    expect(standing?.ref).toBe(mine.ref);
    // theirs is kept, and nobody can take its place a second time
    expect(await count('install_check')).toBe(2);
    expect((await failure(record(input({ supersedes: theirs.record.ref })))).detail.current).toMatchObject({
      ref: mine.ref,
    });
  });

  it('lets only one of two in the same moment take the place of what both saw', async () => {
    const seen = await record(input());
    const outcomes = await Promise.allSettled([
      record(input({ supersedes: seen.record.ref, note: 'a' })),
      record(input({ supersedes: seen.record.ref, note: 'b' }), manager),
    ]);
    expect(outcomes.filter((o) => o.status === 'fulfilled')).toHaveLength(1);
    const lost = outcomes.find((o) => o.status === 'rejected');
    expect(lost?.reason).toMatchObject({ kind: 'conflict', detail: { current: { check: 'strain_relief' } } });
  });

  it('refuses future times and clocks that were never set, naming the clock', async () => {
    const ahead = (minutes: number) => new Date(now.getTime() + minutes * 60_000).toISOString();
    expect((await record(input({ at: ahead(4) }))).made).toBe(true);
    const future = await failure(record(input({ check: 'face', at: ahead(6) })));
    expect(future.detail.fields).toMatchObject([{ field: 'body.at' }]);
    expect(future.message).toMatch(/server’s clock .* Set the clock/);
    expect((await failure(record(input({ at: '1970-01-01T00:00:00Z' })))).message).toContain('Set the clock');
  });

  it('names figures that are wrong, missing or unknown, and what would do', async () => {
    const fields = async (more: Partial<CheckInput>) =>
      ((await failure(record(input(more)))).detail.fields ?? []).map((f) => f.field);
    expect(await fields({ check: 'earth_continuity' })).toEqual(['body.figures.resistance']);
    expect(await fields({ check: 'earth_continuity', figures: { resistance: -1 } })).toEqual([
      'body.figures.resistance',
    ]);
    expect(await fields({ check: 'insulation', figures: { testVoltage: '750', resistance: 2 } })).toEqual([
      'body.figures.testVoltage',
      'body.figures.unitsState',
    ]);
    expect(await fields({ figures: { colour: 'red' } })).toEqual(['body.figures.colour']);
    expect(await fields({ result: 'not_applicable' })).toEqual(['body.reason']);
    const foreign = await connector('theirs', 'T9', stranger.organisationId);
    expect(
      await fields({ check: 'connectors', figures: { moduleLead: foreign.ref, unitInput: foreign.ref } }),
    ).toEqual(['body.figures.moduleLead', 'body.figures.unitInput']);
    // a fail is taken with what is known
    expect((await record(input({ check: 'earth_continuity', result: 'fail' }))).made).toBe(true);
  });

  it('is nobody’s business at another organisation, and a string belongs to its site', async () => {
    const one = input();
    await record(one);
    expect((await failure(record(input(), stranger))).kind).toBe('not_found');
    expect((await failure(record(input({ stringId: await stringRef('Netloft Terrace', 'A1') })))).kind).toBe(
      'not_found',
    );
    // an identifier that is taken behind the wall tells nothing about what it is
    const own = await db.owner.query<{ site: string; string: string }>(
      `select site.ref as site, s.ref as string from string s join site on site.id = s.site_id where site.organisation_id = $1 limit 1`,
      [stranger.organisationId],
    );
    const theirs = own.rows[0];
    if (theirs) {
      const refused = await failure(
        record(input({ ref: one.ref, stringId: theirs.string }), stranger, now, theirs.site),
      );
      expect(refused.kind).toBe('conflict');
      expect(refused.detail.current).toBeUndefined();
    }
  });
});

describe('a sign-off', () => {
  const sign = (fingerprint: string, ref = randomUUID(), actor = technician) =>
    asActor(actor, (tx) => signOffString(tx, actor, b1, { ref, fingerprint }, { address: null, now }));
  const standing = async () => {
    const found = (await snapshot()).strings.find((s) => s.id === b1);
    if (!found) throw new Error('B1 is not in the snapshot');
    return found;
  };

  it('is refused while something is missing, and says what', async () => {
    await record(input());
    const refused = await failure(sign((await standing()).fingerprint));
    expect(refused.kind).toBe('conflict');
    expect(refused.message).toContain('Polarity is not recorded');
  });

  it('signs what was looked at, once, and goes stale with a later record', async () => {
    const { ref } = await connector('H4 set', 'H4');
    await allChecks(ref);
    const ready = await standing();
    const mark = randomUUID();
    const signed = await sign(ready.fingerprint, mark);
    expect(signed).toMatchObject({ made: true, record: { stale: false, fingerprint: ready.fingerprint } });
    expect((await sign(ready.fingerprint, mark)).made).toBe(false);
    expect(await count('string_sign_off')).toBe(1);
    expect((await standing()).signOff).toMatchObject({ stale: false, fingerprint: ready.fingerprint });
    const { rows } = await db.owner.query(`select 1 from audit_entry where action = 'checks.sign_off'`);
    expect(rows).toHaveLength(1);

    const before = ready.checks.find((c) => c.check === 'labels');
    await record(input({ check: 'labels', supersedes: before?.ref ?? null, note: 'renewed' }), manager);
    expect((await standing()).signOff?.stale).toBe(true);
    // what was seen is not what is there any more
    expect((await failure(sign(ready.fingerprint))).message).toContain('recorded since you looked');
    expect((await sign((await standing()).fingerprint)).made).toBe(true);
  });

  it('is blocked by a connector pair without a document until a manager records one', async () => {
    const one = await connector('H4 set', 'H4');
    const other = await connector('K6 set', 'K6');
    await allChecks(one.ref, {
      connectors: { figures: { moduleLead: one.ref, unitInput: other.ref } },
    });
    const refused = await failure(sign((await standing()).fingerprint));
    expect(refused.message).toContain('fire risk');
    await db.owner.query(
      `insert into connector_pair (organisation_id, first_id, second_id, evidence, recorded_by)
       values ($1, $2, $3, 'Declaration 12 of both makers, 2026, page 3', $4)`,
      [technician.organisationId, one.id, other.id, manager.personId],
    );
    expect((await sign((await standing()).fingerprint)).made).toBe(true);
  });

  it('is another organisation’s business nowhere', async () => {
    expect((await failure(sign('0'.repeat(64), randomUUID(), stranger))).kind).toBe('not_found');
  });
});

describe('the snapshot', () => {
  it('holds what a phone needs, keeps its version while nothing changes', async () => {
    const first = await snapshot();
    expect(snapshotSchema.parse(first)).toEqual(first);
    expect(first.strings.map((s) => s.name).slice(0, 3)).toEqual(['A1', 'A2', 'A3']);
    expect(first.strings.flatMap((s) => s.serials)).toHaveLength(184);
    const tag = (s: typeof first) => snapshotTag({ ...s, person: first.person });
    expect(tag({ ...(await snapshot()), at: new Date(0).toISOString() })).toBe(tag(first));
    await record(input());
    expect(tag(await snapshot())).not.toBe(tag(first));
  });

  it('stays a few hundred kilobytes for 5,000 units with every check recorded', async () => {
    const { ref } = await connector('H4 set', 'H4');
    await allChecks(ref);
    const real = await snapshot();
    const one = real.strings.find((s) => s.id === b1);
    if (!one) throw new Error('B1 is not in the snapshot');
    // 357 strings of 14: each with identifiers of its own, so that packing finds nothing in them
    const strings = Array.from({ length: 357 }, (_, i) => ({
      ...one,
      id: randomUUID(),
      name: `S${i}`,
      serials: one.serials.map(() => randomUUID().slice(0, 13).toUpperCase()),
      checks: one.checks.map((c) => ({ ...c, ref: randomUUID() })),
    }));
    const text = JSON.stringify({ ...real, strings });
    expect(gzipSync(text).length).toBeLessThan(400_000);
  });
});
