import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { GET as causesCsvRoute } from '../../src/pages/api/causes.csv';
import { judgeAllCauses, judgeSiteCauses } from '../../src/server/jobs/judge-causes';
import { testDatabase, type TestDatabase } from '../support/database';
import { ask } from '../support/endpoint';
import { testFleet, type TestFleet } from '../support/fleet';
import { command, stand, type Standing } from '../support/standing';

const KESTREL = 'Kestrel Row School';
const QUAYSIDE = 'Quayside Cold Store';
const START = new Date(Math.floor(Date.now() / 60_000) * 60_000 - 6 * 3_600_000);
const at = (minutes: number): Date => new Date(START.getTime() + minutes * 60_000);

let db: TestDatabase;
let fleet: TestFleet;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, [KESTREL, QUAYSIDE]);
  await db.owner.query(`update site set stage = 'operating'`);
});
afterAll(() => db.drop());

const scene = (
  name: string,
  minutes: number,
  of: (string: string, position: number) => Standing | null = () => null,
): Promise<void> => stand(db.owner, fleet.site(name), at(minutes), of);
const judge = (name: string, minutes: number): Promise<number> =>
  judgeSiteCauses(fleet.site(name).id, at(minutes));
const told = async (name: string): Promise<string[]> =>
  (
    await db.owner.query<{ line: string }>(
      `select concat_ws(' ', replace(e.kind, 'cause_', ''), e.detail ->> 'kind', e.detail ->> 'units') as line from event e
       where e.site_id = $1 and e.kind like 'cause%' order by e.id`,
      [fleet.site(name).id],
    )
  ).rows.map((r) => r.line);
const rows = async (name: string) =>
  (
    await db.owner.query<{
      kind: string;
      key: string;
      headline: string;
      units: number;
      open: boolean;
      reopened: number;
      loss: number;
      perDay: number | null;
      hazard: boolean;
    }>(
      `select kind, key, headline, jsonb_array_length(units) as units, closed_at is null as open, reopened, loss_wh as loss,
              loss_wh_day as "perDay", hazard
       from cause where site_id = $1 order by id`,
      [fleet.site(name).id],
    )
  ).rows;
const STUCK: Standing = { state: 'shutdown', verdict: 'stuck' };

describe('causes are written down', () => {
  const stuckIn =
    (...strings: string[]) =>
    (string: string) =>
      strings.includes(string) ? STUCK : null;

  it('a transmitter that two strings no longer hear opens one cause with one event', async () => {
    await scene(QUAYSIDE, 0, stuckIn('D1', 'D2'));
    await judge(QUAYSIDE, 0);
    expect(await rows(QUAYSIDE)).toMatchObject([{ kind: 'stuck', units: 20, open: true, hazard: false }]);
    expect(await told(QUAYSIDE)).toEqual(['opened stuck 20']);
  });

  it('judged again, also by several workers at once, nothing is told twice', async () => {
    await Promise.all([judge(QUAYSIDE, 1), judge(QUAYSIDE, 1), judgeAllCauses(() => at(1))]);
    expect(await told(QUAYSIDE)).toEqual(['opened stuck 20']);
  });

  it('in the dark it lasts; a string that passes again leaves it; all of it passing ends it', async () => {
    await scene(QUAYSIDE, 30, () => ({ state: 'dark' }));
    await judge(QUAYSIDE, 30);
    await scene(QUAYSIDE, 60, stuckIn('D1'));
    await judge(QUAYSIDE, 60);
    expect(await told(QUAYSIDE)).toEqual(['opened stuck 20', 'changed stuck 10']);
    await scene(QUAYSIDE, 90);
    await judge(QUAYSIDE, 90);
    await judge(QUAYSIDE, 91);
    expect((await rows(QUAYSIDE))[0]?.open).toBe(true);
    await judge(QUAYSIDE, 94);
    expect((await told(QUAYSIDE)).at(-1)).toBe('closed stuck 10');
    await scene(QUAYSIDE, 120, stuckIn('D1'));
    await judge(QUAYSIDE, 125);
    expect((await told(QUAYSIDE)).slice(3)).toEqual(['reopened stuck 10']);
    expect(await rows(QUAYSIDE)).toMatchObject([{ open: true, reopened: 1 }]);
  });

  it('its loss adds up by the light of the time, once', async () => {
    const site = fleet.site(QUAYSIDE);
    await db.owner.query(
      `insert into string_day (day, string_id, site_id, frames, voltage_avg, voltage_max, energy)
       select current_date - 1, id, site_id, 600, 40000, 45000, slots * 1000 from string where site_id = $1`,
      [site.id],
    );
    await judge(QUAYSIDE, 146);
    const before = (await rows(QUAYSIDE)).at(-1)!;
    expect(before.perDay).toBeCloseTo(10_000);
    await Promise.all([judge(QUAYSIDE, 146 + 1440), judge(QUAYSIDE, 146 + 1440)]);
    const after = (await rows(QUAYSIDE)).at(-1)!;
    // a whole day, whatever its hours, and the minutes before
    expect(after.loss - before.loss).toBeGreaterThan(9_900);
    expect(after.loss - before.loss).toBeLessThan(10_600);
    await judge(QUAYSIDE, 146 + 1440);
    expect((await rows(QUAYSIDE)).at(-1)!.loss).toBe(after.loss);
  });

  it('a site under construction has hazards only, and what was open there ends', async () => {
    const site = fleet.site(QUAYSIDE);
    await db.owner.query(`update site set stage = 'commissioning' where id = $1`, [site.id]);
    for (const m of [1600, 1605]) await judge(QUAYSIDE, m);
    expect((await rows(QUAYSIDE)).filter((r) => r.open)).toEqual([]);
    await scene(QUAYSIDE, 1610, (string, position) =>
      string === 'D1' && position === 3 ? { verdict: 'not_shutting_down' } : STUCK,
    );
    await judge(QUAYSIDE, 1610);
    expect((await rows(QUAYSIDE)).filter((r) => r.open)).toMatchObject([
      { kind: 'not_shutting_down', hazard: true },
    ]);
  });
});

describe('what is no alarm', () => {
  it('planned works: nothing opens but a hazard, and what still holds afterwards is told then', async () => {
    const site = fleet.site(KESTREL);
    const name = [...site.strings.keys()][0]!;
    await db.owner.query(
      `insert into planned_work (site_id, starts_at, ends_at, reason, created_by)
       select $1, $2, $3, 'New home run', (select min(id) from person)`,
      [site.id, at(-60), at(60)],
    );
    await command(db.owner, site, [...site.zones.keys()][0]!, 'released', at(-600));
    await scene(KESTREL, 0, (string, position) =>
      string !== name
        ? null
        : position === 2
          ? { verdict: 'not_shutting_down' }
          : position === 5
            ? STUCK
            : null,
    );
    await judge(KESTREL, 30);
    expect(await told(KESTREL)).toEqual(['opened not_shutting_down 1']);
    await judge(KESTREL, 61);
    expect(await told(KESTREL)).toEqual(['opened not_shutting_down 1', 'opened stuck 1']);
  });
  it('night while shutdown is commanded: the units are unconfirmed by nature, no cause', async () => {
    const site = fleet.site(KESTREL);
    await db.owner.query('delete from cause where site_id = $1', [site.id]);
    await scene(KESTREL, 70, () => ({ state: 'dark', verdict: 'unconfirmed' }));
    await judge(KESTREL, 75);
    expect((await rows(KESTREL)).filter((r) => r.open)).toEqual([]);
  });
  it('a gateway that falls silent is told once, says what follows, and is told when it is back', async () => {
    const site = fleet.site(KESTREL);
    const silent = (string: string, position: number): Standing | null =>
      gatewayOf(string, position) === 1 ? { state: 'silent' } : null;
    const gatewayOf = (string: string, position: number): number =>
      site.plan.strings.find((s) => s.name === string)!.slots[position - 1]!.gateway ?? 0;
    await scene(KESTREL, 200, silent);
    await db.owner.query(`update gateway set last_heard_at = $2 where site_id = $1 and number = 1`, [
      site.id,
      at(180),
    ]);
    await judge(KESTREL, 200);
    await judge(KESTREL, 201);
    const kinds = async () =>
      (
        await db.owner.query<{ kind: string; follows: string | null }>(
          `select kind, detail ->> 'follows' as follows from event where site_id = $1 and kind like 'gateway%' order by id`,
          [site.id],
        )
      ).rows;
    expect(await kinds()).toMatchObject([{ kind: 'gateway_silent' }]);
    expect((await kinds())[0]?.follows).toContain('can not be confirmed');
    expect((await rows(KESTREL)).filter((r) => r.open)).toMatchObject([{ kind: 'silent' }]);
    await scene(KESTREL, 210);
    for (const m of [210, 211, 214]) await judge(KESTREL, m);
    expect((await kinds()).map((e) => e.kind)).toEqual(['gateway_silent', 'gateway_back']);
    expect((await rows(KESTREL)).filter((r) => r.open)).toEqual([]);
  });

  it('all of them are in the table to download, in the order of the list', async () => {
    const MANY = 1200; // more than a page of it
    await db.owner.query(
      `insert into cause (site_id, key, kind, headline, evidence, confidence, since, opened_at, changed_at, loss_wh)
       select $1, 'made:' || n, 'weak_unit', 'Cause ' || n, '', 0.5, $2, $2, $2, n * 1000 from generate_series(1, $3::int) n`,
      [fleet.site(QUAYSIDE).id, at(300), MANY],
    );
    const table = await ask(causesCsvRoute, {
      actor: await fleet.actor('analyst@lowfield.example'),
      path: '/api/causes.csv?kind=weak_unit&sort=loss',
    });
    const lines = (await table.text()).trim().split('\r\n');
    expect(lines[0]).toContain('site,kind,what,strings,units');
    expect(lines.slice(1).map((line) => line.split(',')[2])).toEqual(
      Array.from({ length: MANY }, (_, i) => `Cause ${MANY - i}`),
    );
  });
});
