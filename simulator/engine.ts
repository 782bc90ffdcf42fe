import type { Fault } from './faults/kinds';
import { readState, writeState } from './kept-state';
import { startPage, type Page } from './page/server';
import { unitsOf, type FleetPlan } from './plant/plan';
import { SiteRun } from './site-run';
import { truthOf, type SiteTruth } from './truth';

export interface SimulatorOptions {
  plan: FleetPlan;
  /** ws://…/ingest/v1 */
  ingestUrl: string;
  /** From which the loggers' tokens are made; the seed's. */
  secret: string;
  /** Tokens by logger serial, for loggers that were given theirs in Wakeline. */
  tokens?: Readonly<Record<string, string>>;
  /** Port of the plant's own page on 127.0.0.1; 0 takes a free one, absent: no page. */
  port?: number;
  /** Epoch seconds at which the plant's time starts; the clock's own where absent. */
  now?: number;
  /** Seconds of the plant in one of the clock; 0: only `advance` moves it. */
  speed?: number;
  /** How many times faster than in life units answer a roll call. */
  pace?: number;
  /** File in which switches, faults and heard units outlive the program. */
  stateFile?: string;
  /** Where Wakeline is, for a link on the page. */
  wakelineUrl?: string;
}

const TICK_MS = 250;
/** A computer that slept: no more than this is caught up second by second. */
const CATCH_UP_S = 300;
const SAVE_EVERY_S = 60;

/** Sites that run against Wakeline's ingest, their page, and the means to move and to ask them. */
export class Simulator {
  readonly runs: SiteRun[];
  private readonly startedMs = Date.now();
  private readonly originS: number;
  private readonly speed: number;
  private atS: number;
  private timer: NodeJS.Timeout | null = null;
  private page: Page | null = null;
  private savedS: number;

  constructor(readonly options: SimulatorOptions) {
    const { plan, stateFile } = options;
    this.originS = options.now ?? Math.floor(Date.now() / 1000);
    this.speed = options.speed ?? 1;
    this.atS = this.originS;
    this.savedS = this.atS;
    const kept = stateFile ? readState(stateFile, plan.since, plan.seed) : null;
    this.runs = plan.organisations.flatMap((o) =>
      o.sites.map(
        (site) =>
          new SiteRun(
            site,
            { modules: o.moduleTypes, units: o.unitTypes },
            {
              seed: plan.seed,
              since: plan.since,
              fromS: this.originS,
              url: options.ingestUrl,
              secret: options.secret,
              tokens: options.tokens ?? {},
              pace: options.pace ?? 1,
              clock: () => this.clock(),
              kept,
            },
          ),
      ),
    );
  }

  /** The plant's time, epoch seconds. */
  clock(): number {
    if (this.speed === 0) return this.atS;
    return Math.floor(this.originS + ((Date.now() - this.startedMs) / 1000) * this.speed);
  }

  get pageUrl(): string | null {
    return this.page?.url ?? null;
  }

  async start(): Promise<void> {
    for (const run of this.runs) for (const l of run.loggers) l.connection.start();
    if (this.options.port !== undefined) this.page = await startPage(this, this.options.port);
    if (this.speed > 0) this.timer = setInterval(() => this.catchUp(), TICK_MS);
  }

  private catchUp(): void {
    const now = this.clock();
    if (now - this.atS > CATCH_UP_S) this.atS = now - CATCH_UP_S;
    while (this.atS < now) this.second();
  }

  private second(): void {
    this.atS += 1;
    for (const run of this.runs) run.second(this.atS);
    if (this.atS - this.savedS >= SAVE_EVERY_S) this.save();
  }

  private save(): void {
    this.savedS = this.atS;
    const { stateFile, plan } = this.options;
    if (stateFile) writeState(stateFile, plan.since, plan.seed, this.runs);
  }

  /** Moves the plant on by whole seconds, letting messages go out between them. */
  async advance(seconds: number): Promise<void> {
    for (let i = 0; i < seconds; i++) {
      this.second();
      if (i % 10 === 9) await new Promise((done) => setImmediate(done));
    }
  }

  /** Resolves when every connected logger's messages are acknowledged and the rest are connected; false after `withinMs`. */
  async settled(withinMs = 25_000): Promise<boolean> {
    const untilMs = Date.now() + withinMs;
    const quiet = () =>
      this.runs.every((r) =>
        r.loggers.every((l) => l.connection.connected && l.connection.outbox.size === 0),
      );
    while (!quiet()) {
      if (Date.now() > untilMs) return false;
      await new Promise((done) => setTimeout(done, 10));
    }
    return true;
  }

  /** By key or name. */
  site(name: string): SiteRun | undefined {
    return this.runs.find((r) => r.plan.key === name || r.plan.name === name);
  }

  private known(name: string): SiteRun {
    const run = this.site(name);
    if (!run) throw new Error(`The simulator has no site "${name}".`);
    return run;
  }

  truth(name: string): SiteTruth {
    const run = this.known(name);
    return truthOf(
      run.plant,
      run.loggers.map((l) => ({
        serial: l.plan.serial,
        connected: l.connection.connected,
        waiting: l.connection.outbox.size,
        listening: l.rollCall.listening,
        fault: l.connection.fault,
      })),
    );
  }

  /** Opens or closes an initiator; false when the site has none of that name. */
  setInitiator(site: string, name: string, open: boolean): boolean {
    const done = this.known(site).plant.commands.setInitiator(name, open, this.clock());
    this.save();
    return done;
  }

  /** Puts a fault into the plant; returns its id. */
  inject(site: string, fault: Fault): string {
    const { id } = this.known(site).plant.faults.add(fault, this.clock());
    this.save();
    return id;
  }

  /** False when no such fault is in force. */
  clear(site: string, id: string): boolean {
    const done = this.known(site).plant.faults.clear(id, this.clock());
    this.save();
    return done;
  }

  get units(): number {
    return this.runs.reduce((n, r) => n + unitsOf(r.plan), 0);
  }

  async stop(): Promise<void> {
    if (this.timer) clearInterval(this.timer);
    this.save();
    for (const run of this.runs) for (const l of run.loggers) l.connection.stop();
    await this.page?.close();
  }
}

/** Builds the plants of a plan, connects their loggers and, where a port is given, serves the plant's page. */
export async function startSimulator(options: SimulatorOptions): Promise<Simulator> {
  const simulator = new Simulator(options);
  await simulator.start();
  return simulator;
}
