import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startSimulator, type Simulator } from '../../simulator/engine';
import type { FleetPlan, SitePlan } from '../../simulator/plant/plan';
import type { UnitTruth } from '../../simulator/truth';
import { seedPlant } from '../../seeds/plant/seed-plant';
import type { SeededPlant } from '../../seeds/plant/seeded';
import { UNIT_STATES, VERDICTS } from '../../src/domain/verdicts/codes';
import { paths } from '../../src/schemas/paths';
import { startIngest, stopIngest } from '../../src/server/ingest/service';
import { CHANNELS } from '../../src/server/queries/live-notices';
import knexFactory from 'knex';
import { testDatabase, type TestDatabase } from '../support/database';
import { openSockets, type Sockets } from '../support/ingest';
import { INTERVAL_S, rightFor, truthFleet, type TruthSite } from '../support/truth';
import { CASES, f } from '../support/truth-cases';

/**
 * What is true of the simulated plant against what Wakeline concludes of it, unit by unit, after each fault. What can't
 * be seen must read unconfirmed, silent, dark or unheard, and never `ok` while shutdown is commanded. Each fault has a
 * site of its own, and all of them are put in at once: a plant's hours cost the same whether one fault is in it or many.
 */

const SECRET = 'truth will out';
/** Seconds of the plant's time that a judgement may take: the time limit and three reports. */
const JUDGED_AFTER_S = 30 + 5 * INTERVAL_S;
/** How long changes without a command are remembered (domain/verdicts/context.ts). */
const FLAP_WINDOW_S = 3600;
let db: TestDatabase;
let sockets: Sockets;
let plan: FleetPlan;
let seeded: SeededPlant;
let simulator: Simulator;

/** Sites of the scenarios that take longer, each by itself. */
const LONGER: readonly TruthSite[] = (['Monitored', 'Optimizing', 'Shutdown-only'] as const).map((kind) => ({
  name: kind,
  kind,
}));

beforeAll(async () => {
  db = await testDatabase();
  plan = truthFleet(Math.floor(Date.now() / 1000) - 5 * 3600, [
    ...LONGER,
    ...CASES.map(([name, { kind }]) => ({ name, kind })),
  ]);
  const knex = knexFactory({ client: 'pg', connection: db.url, pool: { min: 0, max: 1 } });
  seeded = await knex.transaction((tx) => seedPlant(tx, plan, { secret: SECRET }));
  await knex.raw(`select ensure_days((now() - interval '1 day')::date, (now() + interval '1 day')::date)`);
  await knex.destroy();
  await startIngest();
  sockets = await openSockets();
});
afterAll(async () => {
  await stopIngest();
  await sockets.close();
  await db.drop();
});

/** The plants of some of the sites begin to report, until `afterAll`. */
function plantsOf(isOne: (site: SitePlan) => boolean): void {
  beforeAll(async () => {
    simulator = await startSimulator({
      plan: {
        ...plan,
        organisations: plan.organisations.map((o) => ({ ...o, sites: o.sites.filter(isOne) })),
      },
      ingestUrl: `${sockets.url}${paths.ingest()}`,
      secret: SECRET,
      now: plan.since,
      speed: 0,
    });
    await pass(4 * INTERVAL_S);
  });
  afterAll(() => simulator.stop());
}
const isLonger = (site: SitePlan): boolean => LONGER.some((s) => s.name === site.name);

const siteOf = (name: string): SitePlan => plan.organisations[0]!.sites.find((s) => s.name === name)!;
const logger = (name: string) => siteOf(name).loggers[0]?.serial ?? '';
const idOf = (name: string): number => seeded.sites.get(name)?.id ?? 0;

/** Lets the plant's time pass; every report is durable and judged up to its end. */
async function pass(seconds: number, cutOff = false): Promise<void> {
  for (let left = seconds; left > 0; left -= 2 * INTERVAL_S) {
    await simulator.advance(Math.min(left, 2 * INTERVAL_S));
    if (!cutOff) expect(await simulator.settled()).toBe(true);
    await judge();
  }
}
/** Asks for a sweep of every site that reports now, as another process's notice of new frames would. */
async function judge(): Promise<void> {
  for (const run of simulator.runs)
    await db.owner.query('select pg_notify($1, $2)', [
      CHANNELS.written,
      JSON.stringify({ site: idOf(run.plan.name), by: '00000000-0000-4000-8000-000000000000' }),
    ]);
  await new Promise((done) => setTimeout(done, 150));
}

interface Concluded {
  state: (string | null)[];
  verdict: (string | null)[];
  finding: string | null;
}
async function concludedOf(name: string): Promise<Map<string, Concluded>> {
  const { rows } = await db.owner.query<{
    name: string;
    state: (number | null)[];
    verdict: (number | null)[];
    finding: string | null;
  }>(
    `select s.name, j.state, j.verdict, j.finding from string s left join string_judgement j on j.string_id = s.id
     where s.site_id = $1`,
    [idOf(name)],
  );
  const words = (list: readonly string[], codes: (number | null)[] | null) =>
    (codes ?? []).map((c) => (c === null || c < 0 ? null : (list[c] ?? null)));
  return new Map(
    rows.map((r) => [
      r.name,
      { state: words(UNIT_STATES, r.state), verdict: words(VERDICTS, r.verdict), finding: r.finding },
    ]),
  );
}

/** Units of which Wakeline says something else than it ought to; empty when it is right. */
async function disagreements(name: string, silent: (u: UnitTruth) => boolean): Promise<string[]> {
  const truth = simulator.truth(name);
  const concluded = await concludedOf(name);
  return truth.units.flatMap((u) => {
    const right = rightFor(siteOf(name), truth, u, silent(u));
    const c = concluded.get(u.string);
    const state = c?.state[u.position - 1] ?? null;
    const verdict = c?.verdict[u.position - 1] ?? null;
    return right.states.some((s) => s === state) && right.verdicts.some((v) => v === verdict)
      ? []
      : [
          `${u.string}-${u.position} is ${u.mode}: said ${state}/${verdict}, right ${right.states.join('|')}/${right.verdicts.join('|')}`,
        ];
  });
}
/** Judgement runs beside us: looks until it agrees, and gives what is left of disagreement. */
async function settledDisagreements(name: string, silent: (u: UnitTruth) => boolean): Promise<string[]> {
  let found: string[] = [];
  for (let tries = 0; tries < 12; tries++) {
    found = await disagreements(name, silent);
    if (found.length === 0) return [];
    await judge();
  }
  return found;
}

/** What was found at a case's site. */
interface Found {
  /** Units of which nothing else was true than usual, though the case is about them. */
  asUsual: string[];
  /** Wrong while the faults were in. */
  during: string[];
  /** Wrong once they were gone. */
  after: string[];
}
const found = new Map<string, Found>();

/** Every case at once: its faults go in, its initiators open, all is looked at; then they are gone, and again. */
async function goThrough(): Promise<void> {
  const ids = CASES.map(([name, { faults }]) =>
    faults.map((fault) =>
      simulator.inject(name, 'logger' in fault ? { ...fault, logger: logger(name) } : fault),
    ),
  );
  const setAll = (isOpen: boolean): void => {
    for (const [name, { open = [] }] of CASES)
      for (const initiator of open) simulator.setInitiator(name, initiator, isOpen);
  };
  await pass(2 * INTERVAL_S);
  setAll(true);
  await pass(JUDGED_AFTER_S);
  for (const [name, { open = [], silent = () => false, differs = () => false }] of CASES) {
    const usual = open.length > 0 ? 'shutdown' : 'passing';
    const asUsual = simulator.truth(name).units.filter((u) => differs(u) && u.mode === usual);
    found.set(name, {
      asUsual: asUsual.map((u) => `${u.string}-${u.position}`),
      during: await settledDisagreements(name, silent),
      after: [],
    });
  }
  setAll(false);
  CASES.forEach(([name], i) => ids[i]?.forEach((id) => simulator.clear(name, id)));
  await pass(JUDGED_AFTER_S);
  const left = async (): Promise<string[]> => {
    const all: string[] = [];
    for (const [name, what] of found) {
      what.after = await settledDisagreements(name, () => false);
      all.push(...what.after);
    }
    return all;
  };
  // units that changed often are said to flap as long as the window reaches
  const flapping = (one: string): boolean => one.endsWith('said passing/flapping, right passing/ok');
  if ((await left()).some(flapping)) {
    await pass(FLAP_WINDOW_S);
    await left();
  }
}

describe('after each fault, what Wakeline says is true or says that it can’t tell', () => {
  plantsOf((site) => !isLonger(site));
  beforeAll(goThrough);

  it.each(CASES)('%s', (name) => {
    expect(found.get(name)).toEqual({ asUsual: [], during: [], after: [] } satisfies Found);
  });
});

describe('what takes longer to show', { timeout: 150_000 }, () => {
  plantsOf(isLonger);

  it('snow: units without light are dark or silent, never stuck, and unconfirmed when shutdown is commanded', async () => {
    const id = simulator.inject('Optimizing', { kind: 'snow' });
    simulator.setInitiator('Optimizing', 'Initiator', true);
    await pass(JUDGED_AFTER_S);
    expect(simulator.truth('Optimizing').units.every((u) => u.mode === 'unpowered')).toBe(true);
    expect(await settledDisagreements('Optimizing', () => false)).toEqual([]);
    simulator.setInitiator('Optimizing', 'Initiator', false);
    simulator.clear('Optimizing', id);
    await pass(JUDGED_AFTER_S + 60);
    expect(await settledDisagreements('Optimizing', () => false)).toEqual([]);
  });

  it('a logger cut off in the midst of a shutdown: judged from what it replays, as if it had never been away', async () => {
    const id = simulator.inject('Monitored', { kind: 'uplink_out', logger: logger('Monitored') });
    const stuck = simulator.inject('Monitored', f({ kind: 'stuck', string: 'B2', position: 8 }));
    await pass(60, true);
    simulator.setInitiator('Monitored', 'Initiator', true);
    await pass(120, true);
    simulator.setInitiator('Monitored', 'Initiator', false);
    await pass(JUDGED_AFTER_S, true);
    simulator.clear('Monitored', id);
    await pass(JUDGED_AFTER_S);
    expect(
      simulator
        .truth('Monitored')
        .units.filter((u) => u.mode === 'shutdown')
        .map((u) => `${u.string}-${u.position}`),
    ).toEqual(['B2-8']);
    expect(await settledDisagreements('Monitored', () => false)).toEqual([]);
    simulator.clear('Monitored', stuck);
    await pass(JUDGED_AFTER_S);
    expect(await settledDisagreements('Monitored', () => false)).toEqual([]);
  });

  it('shutdown-only strings: the input shows what their units can’t say', async () => {
    const id = simulator.inject('Shutdown-only', f({ kind: 'not_shutting_down', string: 'A1', position: 3 }));
    simulator.setInitiator('Shutdown-only', 'Initiator', true);
    await pass(30 + 120 + 6 * INTERVAL_S);
    const findings = async () =>
      [...(await concludedOf('Shutdown-only'))]
        .filter(([, c]) => c.finding !== null)
        .map(([n, c]) => [n, c.finding]);
    const truth = simulator.truth('Shutdown-only');
    const live = truth.strings.filter((s) => s.homeRun > 30 && s.name.startsWith('A')).map((s) => s.name);
    expect(live).toEqual(['A1']);
    expect(await findings()).toEqual([['A1', 'not_shutting_down']]);
    simulator.setInitiator('Shutdown-only', 'Initiator', false);
    simulator.clear('Shutdown-only', id);
    await pass(JUDGED_AFTER_S + 4 * INTERVAL_S);
    expect(await findings()).toEqual([]);
  });
});
