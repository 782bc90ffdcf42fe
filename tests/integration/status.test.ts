import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/domain/access/permissions';
import { installationStatus } from '../../src/schemas/api/status';
import { asActor } from '../../src/server/db/transaction';
import { readStatus } from '../../src/server/services/status';
import { testDatabase, type TestDatabase } from '../support/database';
import { testFleet, type TestFleet } from '../support/fleet';
import { stand } from '../support/standing';

const CLINIC = 'Weirside Clinic';
const LIBRARY = 'Slate Lane Library';
const NETLOFT = 'Netloft Terrace';
const NOW = new Date();
let db: TestDatabase;
let fleet: TestFleet;
let manager: Actor;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [CLINIC, LIBRARY, NETLOFT]);
  manager = await fleet.actor('manager@lowfield.example');
  await stand(db.owner, fleet.site(CLINIC), NOW);
  await stand(db.owner, fleet.site(NETLOFT), NOW);
});
afterAll(() => db.drop());

const read = async (actor: Actor) =>
  installationStatus.parse(await asActor(actor, (tx) => readStatus(tx, new Date())));

describe('the state of the installation', () => {
  it('lists the loggers of the organisation alone, with what was refused last on top', async () => {
    await db.owner.query(
      `update logger set refused_count = 7, last_refusal = $1, leased_by = 'p-1', leased_until = now() + interval '1 min'
       where site_id = $2`,
      [
        JSON.stringify({
          at: NOW.toISOString(),
          field: 'rows.3.voltageOut',
          reason: '14 values, 12 expected',
        }),
        fleet.site(CLINIC).id,
      ],
    );
    await db.owner.query(
      `update logger set refused_count = 9, leased_by = 'p-2', leased_until = now() + interval '1 min' where site_id = $1`,
      [fleet.site(NETLOFT).id],
    );
    const status = await read(manager);
    expect(status.loggers.map((l) => l.siteName)).toEqual([CLINIC, LIBRARY]);
    expect(status.loggers[0]).toMatchObject({
      connected: true,
      refused: 7,
      lastRefusal: { field: 'rows.3.voltageOut', reason: '14 values, 12 expected' },
    });
    expect(status.loggers[1]).toMatchObject({ connected: false, refused: 0, lastRefusal: null });
    expect(status.processes).toMatchObject([{ name: 'p-1', loggers: 1 }]);
  });

  it('says how far judgement and roll-ups are, and for which days frames have a place', async () => {
    const strings = fleet.site(CLINIC).strings.size;
    expect((await read(manager)).work).toMatchObject({
      unjudgedStrings: 0,
      unjudgedSince: null,
      rolledUpTo: null,
    });
    await db.owner.query(
      `update string_judgement set frame_at = frame_at - interval '5 min' where site_id = $1`,
      [fleet.site(CLINIC).id],
    );
    await db.owner.query(`insert into rollup_watermark (quarter) values (date_trunc('hour', now()))`);
    const { work } = await read(manager);
    expect(work.unjudgedStrings).toBe(strings);
    expect(work.unjudgedSince).toBe(NOW.toISOString());
    expect(work.newestFrameAt).toBe(NOW.toISOString());
    expect(work.rolledUpTo).not.toBeNull();
    expect(work.preparedTo).toBe(new Date(NOW.getTime() + 86_400_000).toISOString().slice(0, 10));
  });

  it('tells whether the database keeps organisations apart', async () => {
    const { rows } = await db.owner.query<{ roles_made: boolean }>('select roles_made from installation');
    expect((await read(manager)).database.rowSecurity).toBe(rows[0]?.roles_made);
  });
});
