import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startSimulator, type Simulator } from '../../simulator/engine';
import { fault as faultSchema, type Fault } from '../../simulator/faults/kinds';
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
import { INTERVAL_S, rightFor, truthFleet } from '../support/truth';

/**
 * What is true of the simulated plant against what Wakeline concludes of it, unit by unit, after each fault. What can't
 * be seen must read unconfirmed, silent, dark or unheard, and never `ok` while shutdown is commanded.
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

beforeAll(async () => {
  db = await testDatabase();
  plan = truthFleet(Math.floor(Date.now() / 1000) - 5 * 3600);
  const knex = knexFactory({ client: 'pg', connection: db.url, pool: { min: 0, max: 1 } });
  seeded = await knex.transaction((tx) => seedPlant(tx, plan, { secret: SECRET }));
  await knex.raw(`select ensure_days((now() - interval '1 day')::date, (now() + interval '1 day')::date)`);
  await knex.destroy();
  await startIngest();
  sockets = await openSockets();
  simulator = await startSimulator({
    plan,
    ingestUrl: `${sockets.url}${paths.ingest()}`,
    secret: SECRET,
    now: plan.since,
    speed: 0,
  });
  await pass(4 * INTERVAL_S);
});
afterAll(async () => {
  await simulator.stop();
  await stopIngest();
  await sockets.close();
  await db.drop();
});

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
/** Asks for a sweep of every site now, as another process's notice of new frames would. */
async function judge(): Promise<void> {
  for (const site of seeded.sites.values())
    await db.owner.query('select pg_notify($1, $2)', [
      CHANNELS.written,
      JSON.stringify({ site: site.id, by: '00000000-0000-4000-8000-000000000000' }),
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

interface Case {
  site: string;
  faults: Fault[];
  /** Initiators opened after the faults are in; without them the site stays released. */
  open?: string[];
  /** Units that can't be heard. */
  silent?: (u: UnitTruth) => boolean;
  /** Units that the fault must have put in a state of their own, so that the case is one. */
  differs?: (u: UnitTruth) => boolean;
}
const at = (string: string, position: number) => (u: UnitTruth) =>
  u.string === string && u.position === position;
const place = { string: 'A1', position: 4 } as const;
const f = (value: unknown): Fault => faultSchema.parse(value);
const onGateway = (number: number) => (u: UnitTruth) => u.string.startsWith('AB'[number - 1] ?? '-');

const CASES: [string, Case][] = [
  ['nothing wrong, released', { site: 'Monitored', faults: [] }],
  ['nothing wrong, shut down', { site: 'Monitored', faults: [], open: ['Initiator'] }],
  ['optimizing units shut down', { site: 'Optimizing', faults: [], open: ['Initiator'] }],
  [
    'a stuck unit',
    { site: 'Monitored', faults: [f({ kind: 'stuck', ...place, at: 'now' })], differs: at('A1', 4) },
  ],
  [
    'a stuck unit that optimizes',
    { site: 'Optimizing', faults: [f({ kind: 'stuck', ...place, at: 'now' })], differs: at('A1', 4) },
  ],
  [
    'a unit that goes on passing and says so',
    {
      site: 'Monitored',
      faults: [f({ kind: 'not_shutting_down', ...place })],
      open: ['Initiator'],
      differs: at('A1', 4),
    },
  ],
  [
    'a unit that goes on passing and claims shutdown',
    {
      site: 'Monitored',
      faults: [f({ kind: 'not_shutting_down', ...place, claims: 'shutdown' })],
      open: ['Initiator'],
      differs: at('A1', 4),
    },
  ],
  [
    'a mute unit while released',
    { site: 'Monitored', faults: [f({ kind: 'unit_mute', ...place })], silent: at('A1', 4) },
  ],
  [
    'a mute unit while shut down',
    {
      site: 'Monitored',
      faults: [f({ kind: 'unit_mute', ...place })],
      open: ['Initiator'],
      silent: at('A1', 4),
    },
  ],
  ['a failed bypass diode', { site: 'Monitored', faults: [f({ kind: 'bypass_diode', ...place })] }],
  [
    'two units in each other’s string',
    {
      site: 'Monitored',
      faults: [f({ kind: 'wrong_string', ...place, otherString: 'A2', otherPosition: 4 })],
    },
  ],
  ['a bad connector', { site: 'Monitored', faults: [f({ kind: 'connector', string: 'A1', ohm: 3 })] }],
  ['dirt', { site: 'Monitored', faults: [f({ kind: 'soiling', string: 'A1', share: 0.3 })] }],
  [
    'shade',
    {
      site: 'Monitored',
      faults: [f({ kind: 'shade', string: 'A1', positions: [2, 3], fromHour: 0, toHour: 24, share: 0.9 })],
    },
  ],
  ['grid lost', { site: 'Monitored', faults: [f({ kind: 'grid_lost', inverter: 'Inverter 1' })] }],
  [
    'curtailment',
    { site: 'Monitored', faults: [f({ kind: 'curtailed', inverter: 'Inverter 1', share: 0.2 })] },
  ],
  ['an earth fault', { site: 'Monitored', faults: [f({ kind: 'earth_fault', inverter: 'Inverter 1' })] }],
  ['keep-alive lost in a zone', { site: 'Monitored', faults: [f({ kind: 'command_lost', zone: 'Roof' })] }],
  [
    'power lost in a zone',
    { site: 'Keep-alive', faults: [f({ kind: 'command_lost', zone: 'Roof', how: 'power_lost' })] },
  ],
  [
    'a transmitter stopped',
    { site: 'Keep-alive', faults: [f({ kind: 'transmitter_off', transmitter: 'T2' })] },
  ],
  [
    'a transmitter that a string does not hear',
    {
      site: 'Keep-alive',
      faults: [f({ kind: 'transmitter_unheard', transmitter: 'T1', strings: ['A2'] })],
      differs: (u) => u.string === 'A2',
    },
  ],
  [
    'cross-talk from a neighbour’s transmitter',
    {
      site: 'Keep-alive',
      faults: [f({ kind: 'cross_talk', transmitter: 'T2', strings: ['A1'] })],
      open: ['Initiator'],
      differs: (u) => u.string === 'A1',
    },
  ],
  [
    'a dead gateway whose units hold, released',
    { site: 'Holding', faults: [f({ kind: 'gateway_out', logger: '', gateway: 2 })], silent: onGateway(2) },
  ],
  [
    'a dead gateway whose units hold, shut down',
    {
      site: 'Holding',
      faults: [f({ kind: 'gateway_out', logger: '', gateway: 2 })],
      open: ['Initiator'],
      silent: onGateway(2),
    },
  ],
  [
    'a gateway that keeps what it hears',
    {
      site: 'Monitored',
      faults: [f({ kind: 'gateway_out', logger: '', gateway: 2, keeps: true })],
      silent: onGateway(2),
    },
  ],
  ['shutdown-only units shut down', { site: 'Shutdown-only', faults: [], open: ['Initiator'] }],
  ['units that nobody has heard', { site: 'Commissioning', faults: [], open: ['Initiator'] }],
];

describe(
  'after each fault, what Wakeline says is true or says that it can’t tell',
  { timeout: 150_000 },
  () => {
    it.each(CASES)('%s', async (_name, { site, faults, open = [], silent = () => false, differs }) => {
      const ids = faults.map((fault) =>
        simulator.inject(site, 'logger' in fault ? { ...fault, logger: logger(site) } : fault),
      );
      await pass(2 * INTERVAL_S);
      for (const name of open) simulator.setInitiator(site, name, true);
      await pass(JUDGED_AFTER_S);
      const during = simulator.truth(site);
      if (differs) {
        const usual = open.length > 0 ? 'shutdown' : 'passing';
        expect(during.units.filter(differs).every((u) => u.mode !== usual)).toBe(true);
      }
      expect(await settledDisagreements(site, silent)).toEqual([]);

      for (const name of open) simulator.setInitiator(site, name, false);
      for (const id of ids) simulator.clear(site, id);
      await pass(JUDGED_AFTER_S);
      let left = await settledDisagreements(site, () => false);
      // units that changed often, by this case and the ones before it, are said to flap as long as the window reaches
      if (left.length > 0 && left.every((one) => one.endsWith('said passing/flapping, right passing/ok'))) {
        await pass(FLAP_WINDOW_S);
        left = await settledDisagreements(site, () => false);
      }
      expect(left).toEqual([]);
    });

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
      const id = simulator.inject(
        'Shutdown-only',
        f({ kind: 'not_shutting_down', string: 'A1', position: 3 }),
      );
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
  },
);
