import type { Frame, Roster } from '../../src/schemas/ingest';
import { ofKind } from '../faults/book';
import type { CommandNow } from '../plant/commands';
import type { LoggerPlan } from '../plant/plan';
import type { SitePlant } from '../plant/site-plant';
import type { StringPlant } from '../plant/string-plant';
import { Connection, type ConnectionOptions } from './connection';
import { Outbox } from './outbox';
import { frameOf, inputRows, inverterRows, radioOf, weatherRows } from './readings';
import { RollCall } from './roll-call';
import { Traces } from './traces';

/** Frames in one message: a logger sends whole strings, and not too many of them at once. */
const FRAMES_AT_ONCE = 400;

interface Kept {
  at: number;
  string: number;
  frame: Frame;
}

/** A site's logger: what it hears on the roof, it tells Wakeline. */
export class Logger {
  readonly connection: Connection;
  readonly rollCall: RollCall;
  readonly traces: Traces;
  private roster: Roster | null = null;
  /** Roster strings by their places on the drawing, so that seats are looked up once. */
  private readonly told = new Map<string, string>();
  private kept: Kept[] = [];
  private reportedS = NaN;

  constructor(
    readonly plan: LoggerPlan,
    private readonly site: SitePlant,
    options: Pick<ConnectionOptions, 'url' | 'token' | 'clock'> & { pace: number },
  ) {
    this.rollCall = new RollCall(site, plan.serial, options.pace);
    this.traces = new Traces(site, plan.serial);
    this.connection = new Connection(
      {
        url: options.url,
        token: options.token,
        clock: options.clock,
        serial: plan.serial,
        firmware: plan.firmware,
        onRoster: (roster) => {
          const first = this.roster === null;
          this.roster = roster;
          this.told.clear();
          this.tellCommands();
          if (first) this.report(this.site.atS);
        },
        onListen: (on) => this.rollCall.listen(on, options.clock()),
      },
      new Outbox(),
    );
  }

  /** Seconds between reports, as Wakeline asks or the plan says. */
  get intervalS(): number {
    return this.roster?.reportIntervalS ?? this.site.plan.reportIntervalS;
  }

  get rosterVersion(): number | null {
    return this.roster?.version ?? null;
  }

  due(atS: number): boolean {
    const interval = this.intervalS;
    return Number.isNaN(this.reportedS) || Math.floor(atS / interval) > Math.floor(this.reportedS / interval);
  }

  /** Everything, as each report interval asks for. */
  report(atS: number): void {
    this.reportedS = atS;
    this.reportFrames(this.roster?.strings.map((_, i) => i) ?? []);
    this.reportInputs();
    const rows = inverterRows(this.site, this.plan.serial);
    if (rows.length > 0) this.connection.outbox.push({ type: 'inverters', rows });
    const weather = weatherRows(this.site, this.plan.serial);
    if (weather.length > 0) this.connection.outbox.push({ type: 'weather', rows: weather });
    this.keepForLater();
    this.connection.flush();
  }

  /** At once: strings of which a unit has just changed. */
  reportStrings(changed: readonly StringPlant[]): void {
    const names = new Set(changed.map((s) => s.plan.name));
    // A unit that sits in another string than the drawing says reports for the string on the drawing.
    const indices = (this.roster?.strings ?? []).flatMap((entry, i) =>
      names.has(entry.name) ||
      this.site.seatsOf(entry.serials).some((seat) => seat && changed.includes(seat.string))
        ? [i]
        : [],
    );
    this.reportFrames(indices);
    this.connection.flush();
  }

  reportInputs(): void {
    const rows = inputRows(this.site, this.plan.serial);
    if (rows.length > 0) this.connection.outbox.push({ type: 'inputs', rows });
  }

  private reportFrames(indices: number[]): void {
    const { roster, site } = this;
    if (!roster) return;
    const radio = radioOf(site, this.plan.serial);
    const frames: Kept[] = [];
    for (const i of indices) {
      const entry = roster.strings[i];
      if (!entry || entry.kind === 'shutdown_only') continue;
      const frame = frameOf(site, radio, entry.serials);
      if (frame) frames.push({ at: site.atS, string: entry.index, frame });
    }
    this.pushFrames(frames, roster.version);
  }

  private pushFrames(frames: readonly Kept[], version: number): void {
    for (let from = 0; from < frames.length; from += FRAMES_AT_ONCE) {
      const part = frames.slice(from, from + FRAMES_AT_ONCE);
      this.connection.outbox.push({
        type: 'frames',
        roster: version,
        at: part.map((f) => f.at),
        string: part.map((f) => f.string),
        frames: part.map((f) => f.frame),
      });
    }
  }

  /** A gateway that is cut off keeps what it hears; when it is back, all of it comes, in order of time. */
  private keepForLater(): void {
    const { roster, site } = this;
    if (!roster) return;
    const radio = radioOf(site, this.plan.serial);
    if (radio.keepingGateways.size > 0) {
      for (const entry of roster.strings) {
        const frame = frameOf(site, radio, entry.serials, true);
        if (frame) this.kept.push({ at: site.atS, string: entry.index, frame });
      }
    } else if (this.kept.length > 0) {
      this.pushFrames(this.kept, roster.version);
      this.kept = [];
    }
  }

  /** What is in force where; said again at each connection and when it changes. */
  tellCommands(): void {
    const tell = (where: { zone: string } | { transmitter: string }, c: CommandNow) => {
      const of = 'zone' in where ? where.zone : `transmitter ${where.transmitter}`;
      const now = `${c.inForce} ${c.since}`;
      if (this.told.get(of) === now) return;
      this.told.set(of, now);
      this.connection.outbox.push({
        type: 'command',
        ...where,
        inForce: c.inForce,
        since: c.since,
        by: c.by,
      });
    };
    if (!this.roster) return;
    for (const [zone, c] of this.site.commands.zones) if (this.roster.zones.includes(zone)) tell({ zone }, c);
    for (const [transmitter, c] of this.site.commands.transmitters)
      if (this.roster.transmitters.includes(transmitter)) tell({ transmitter }, c);
  }

  /** The units of these strings are watched second by second from now on. */
  watch(names: ReadonlySet<string>, atS: number): void {
    if (this.roster) this.traces.begin(this.roster, names, atS);
  }

  /** Once a second of the plant's time. */
  second(atS: number): void {
    const cut = ofKind(this.site.faults.at(atS), 'uplink_out').some((f) => f.logger === this.plan.serial);
    this.connection.cut(cut);
    const rows = this.rollCall.answers(atS);
    if (rows.length > 0) this.connection.outbox.push({ type: 'heard', rows });
    if (this.traces.active) {
      this.traces.sample(atS);
      for (const message of this.traces.messages(atS)) this.connection.outbox.push(message);
    }
    this.connection.flush();
  }
}
