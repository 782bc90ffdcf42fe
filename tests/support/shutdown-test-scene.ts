import type { Act } from '../../src/domain/commissioning/shutdown-test-record';
import { asActor } from '../../src/server/db/transaction';
import { AppError } from '../../src/server/errors';
import { shutdownTestPage } from '../../src/server/services/shutdown-test-page';
import { shutdownTestReport } from '../../src/server/services/shutdown-test-report';
import { signShutdownTest } from '../../src/server/services/shutdown-test-sign';
import { addActs, startShutdownTest } from '../../src/server/services/shutdown-test-write';
import { testDatabase } from './database';
import { PASSWORD, testFleet } from './fleet';
import { planOf, sent } from './shutdown-test';

export const CLINIC = 'Weirside Clinic';
export const SCHOOL = 'Kestrel Row School';

/** A fleet, its people, and what they do in shutdown tests without a plant that reports. */
export async function testScene() {
  const db = await testDatabase();
  const fleet = await testFleet(db, [CLINIC, SCHOOL, 'Netloft Terrace']);
  const technician = await fleet.actor('technician@lowfield.example');
  const manager = await fleet.actor('manager@lowfield.example');
  const analyst = await fleet.actor('analyst@lowfield.example');
  const stranger = await fleet.actor('manager@harbourline.example');
  const customer = await fleet.actor('customer@lowfield.example');
  /** Some minutes ago, so that a whole test lies in the past. */
  let start = new Date();

  /** Empties what was written; what is signed can't be removed: an owner may switch the guard off, the web may not. */
  async function clear(): Promise<void> {
    await db.owner.query(
      `truncate shutdown_test, shutdown_test_draft, shutdown_test_act, shutdown_test_string cascade`,
    );
    await db.owner.query('delete from rate_limit; delete from command; delete from string_frame');
    start = new Date(Math.floor(Date.now() / 1000) * 1000 - 600_000);
  }
  const startLater = (s: number) => (start = after(s));

  const after = (s: number) => new Date(start.getTime() + s * 1000);
  async function zoneRef(site: string, name?: string): Promise<string> {
    const { rows } = await db.owner.query<{ ref: string }>(
      'select ref from zone where site_id = $1 and ($2::text is null or name = $2) order by name',
      [fleet.site(site).id, name ?? null],
    );
    return rows[0]!.ref;
  }
  const startTest = async (actor = technician, site = CLINIC, zone?: string, follows?: string) =>
    (
      await asActor(actor, async (tx) =>
        startShutdownTest(
          tx,
          actor,
          fleet.site(site).ref,
          { zone: await zoneRef(site, zone), ...(follows ? { follows } : {}) },
          null,
        ),
      )
    ).id;
  const add = (ref: string, act: Act, at: Date, actor = technician) =>
    asActor(actor, (tx) => addActs(tx, actor, ref, [sent(act, at)], new Date()));
  const page = (ref: string, actor = technician) =>
    asActor(actor, (tx) => shutdownTestPage(tx, ref, new Date(), 'nobody'));
  const sign = async (ref: string, password = PASSWORD, actor = technician) => {
    const { fingerprint } = await page(ref, actor);
    return asActor(actor, (tx) =>
      signShutdownTest(
        tx,
        actor,
        { name: 'Bram Ottersley', address: null },
        ref,
        { password, fingerprint },
        new Date(),
      ),
    );
  };
  const report = (ref: string, actor = technician) => asActor(actor, (tx) => shutdownTestReport(tx, ref));
  const refOf = (name: string, site = CLINIC) => fleet.site(site).strings.get(name)!.ref;

  /** A whole test of some strings by instrument; `volts` stand at 20 s. */
  async function runTest(ref: string, strings: Record<string, number>, site = CLINIC): Promise<void> {
    const refs = Object.keys(strings).map((n) => refOf(n, site));
    await add(ref, { kind: 'planned', plan: planOf(refs) }, after(0));
    await add(ref, { kind: 'caution_accepted', name: 'Bram Ottersley' }, after(5));
    await add(ref, { kind: 'watch_started', round: 0 }, after(10));
    for (const string of refs) await add(ref, reading(string, 'before', 480, null), after(20));
    await add(ref, { kind: 'operated', round: 0 }, after(60));
    for (const [name, volts] of Object.entries(strings))
      await add(ref, reading(refOf(name, site), 'after', volts, volts > 30 ? 40 : 20), after(80));
    await add(ref, { kind: 'released', round: 0 }, after(120));
    await add(ref, { kind: 'round_ended', round: 0 }, after(240));
    await add(ref, { kind: 'proved_after', proved: true }, after(250));
  }
  const strings = (site = CLINIC) => [...fleet.site(site).strings.keys()];
  const all = (volts: number, more: Record<string, number> = {}) => ({
    ...Object.fromEntries(strings().map((n) => [n, volts])),
    ...more,
  });

  return {
    db,
    fleet,
    technician,
    manager,
    analyst,
    stranger,
    customer,
    clear,
    startLater,
    after,
    zoneRef,
    startTest,
    add,
    page,
    sign,
    report,
    refOf,
    runTest,
    strings,
    all,
  };
}
export type TestScene = Awaited<ReturnType<typeof testScene>>;

export async function failure(work: Promise<unknown>): Promise<AppError> {
  const error = await work.then(
    () => undefined,
    (e: unknown) => e,
  );
  if (error instanceof AppError) return error;
  throw new Error('it should have been refused', { cause: error });
}

/** Three voltages of one string, `volts` between its poles. */
export const reading = (
  string: string,
  moment: 'before' | 'after',
  volts: number,
  afterS: number | null,
  round = 0,
): Act => ({
  kind: 'reading',
  round,
  string,
  moment,
  afterS,
  secondsFrom: 'clock',
  atInverterEnd: true,
  voltages: { positiveToNegativeV: volts, positiveToEarthV: volts / 2, negativeToEarthV: -volts / 2 },
  note: '',
});
