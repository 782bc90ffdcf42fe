import type { Roster } from '../../src/schemas/ingest';
import { keyOf, mix, uniform } from '../chance';
import { Connection } from '../logger/connection';
import { loggerToken } from '../scenarios/tokens';
import type { LoadFigures } from './figures';
import { frameText, lightAt, loadString, shutdownSince, type LoadShape, type LoadString } from './frames';
import type { Ledger } from './ledger';
import type { LoadOptions } from './options';
import { LoadOutbox, type LoadMessage } from './outbox';

/** Seconds that a slow logger reads, and that it does not. */
const READS_S = 1;
const DEAF_S = 4;
/** A logger that vanishes does so about every so many seconds. */
const VANISH_EVERY_S = 20;
/** Seconds by which a clock jumps, and for how many reports: the last is further ahead than Wakeline takes. */
const JUMPS_S = [-1800, 120, 3600] as const;
const JUMP_REPORTS = 3;

/** Indices of the draws that say what becomes of a logger. */
const FATES = { slow: 11, dead: 12, outage: 13, jump: 14 } as const;

/** One logger that is only there to make load. Everything it does is drawn from the seed and its serial. */
export class LoadLogger {
  readonly connection: Connection<LoadOutbox>;
  private readonly key: number;
  private roster: Roster | null = null;
  private strings: { index: number; string: LoadString; units: number }[] = [];
  /** Messages that are due, in order; of one report at a time. */
  private due: LoadMessage[] = [];
  private late: LoadMessage[] = [];
  private cursorS: number;
  private told: string | null = null;
  private ended = false;
  private readonly slow: boolean;
  private readonly dead: boolean;
  private readonly outageAtS: number;
  private readonly jumpAtS: number;
  private readonly jumpS: number;
  private away = false;
  private deafNow = false;
  private vanishAtS: number;
  private jumped = false;

  constructor(
    readonly serial: string,
    private readonly shape: LoadShape,
    private readonly options: LoadOptions,
    private readonly figures: LoadFigures,
    private readonly ledger: Ledger,
    /** Epoch s of the loggers' time. */
    private readonly clock: () => number,
  ) {
    this.key = mix(shape.seed, keyOf(serial));
    const share = (what: keyof typeof FATES) => uniform(this.key, FATES[what]);
    this.slow = share('slow') < options.slow;
    this.dead = share('dead') < options.dead;
    const middle = (index: number) => options.duration * (0.1 + 0.6 * uniform(this.key, index));
    this.outageAtS = share('outage') < options.outages ? middle(15) : Infinity;
    this.jumpAtS = share('jump') < options.clockJumps ? clock() + options.speed * middle(16) : Infinity;
    this.jumpS = JUMPS_S[mix(this.key, 17) % JUMPS_S.length] ?? 0;
    this.vanishAtS = VANISH_EVERY_S * (0.5 + uniform(this.key, 18));
    // loggers of a fleet don't speak in one instant
    const phase = Math.floor(uniform(this.key, 19) * options.interval);
    this.cursorS = Math.ceil((clock() - options.backlog) / options.interval) * options.interval + phase;
    this.connection = new Connection(
      {
        url: options.url,
        token: loggerToken(options.secret, serial),
        serial,
        firmware: 'load',
        clock: () => Math.floor(clock() + this.jumpNow()),
        onRoster: (roster) => this.takeRoster(roster),
        onListen: () => undefined,
        onWait: () => {
          figures.waits += 1;
        },
      },
      new LoadOutbox(options.window, {
        next: () => this.next(),
        sent: (message, again) => {
          figures.sentMessages += 1;
          figures.sentReadings += message.readings;
          if (again) figures.repeated += 1;
        },
        acknowledged: (message, seq, tookMs) => this.acknowledged(message, seq, tookMs),
        refused: (_message, field, reason) => {
          figures.refused += 1;
          const name = field.replaceAll(/\d+/g, '');
          const known = figures.refusals.get(name);
          if (known) known.count += 1;
          else figures.refusals.set(name, { count: 1, reason });
        },
      }),
    );
  }

  /** Called many times a second. @param elapsedS of the run, in this machine's time */
  tick(elapsedS: number): void {
    this.outage(elapsedS);
    if (this.away) return;
    if (this.slow) {
      const deaf = (elapsedS + (this.key % (READS_S + DEAF_S))) % (READS_S + DEAF_S) > READS_S;
      if (deaf !== this.deafNow) this.connection.deaf(deaf);
      this.deafNow = deaf;
    }
    if (this.dead && elapsedS > this.vanishAtS && this.connection.connected && !this.ended) {
      this.vanishAtS = elapsedS + VANISH_EVERY_S;
      this.figures.vanished += 1;
      this.connection.vanish('{"type":"frames","seq":1,"roster":1,"at":[');
      return;
    }
    if (this.due.length > 0 || this.cursorS <= this.clock()) this.connection.flush();
  }

  /** Nothing new from here on; what is on the way may still be answered. */
  end(): void {
    if (this.ended) return;
    this.ended = true;
    if (this.away) this.connection.cut(false);
    this.connection.deaf(false);
  }

  get unanswered(): number {
    return this.connection.outbox.unanswered;
  }

  private outage(elapsedS: number): void {
    const away =
      !this.ended && elapsedS >= this.outageAtS && elapsedS < this.outageAtS + this.options.outageS;
    if (away === this.away) return;
    this.away = away;
    if (away) this.figures.outages += 1;
    this.connection.cut(away);
  }

  private jumpNow(): number {
    const at = this.cursorS;
    return at >= this.jumpAtS && at < this.jumpAtS + JUMP_REPORTS * this.options.interval ? this.jumpS : 0;
  }

  private takeRoster(roster: Roster): void {
    this.roster = roster;
    this.strings = roster.strings
      .filter((s) => s.kind !== 'shutdown_only')
      .map((s) => ({
        index: s.index,
        units: s.serials.filter((x) => x !== null).length,
        string: loadString(
          this.shape,
          this.serial,
          s.index,
          s.serials.map((x) => x !== null),
        ),
      }));
  }

  private next(): LoadMessage | null {
    if (this.ended) return null;
    if (this.due.length === 0) {
      if (this.cursorS > this.clock() || !this.roster) return null;
      const jump = this.jumpNow();
      if (jump !== 0 && !this.jumped) {
        this.jumped = true;
        this.figures.clockJumps += 1;
      }
      const report = this.report(this.cursorS + jump, this.roster);
      const index = Math.floor(this.cursorS / this.options.interval);
      this.cursorS += this.options.interval;
      if (uniform(this.key ^ 0x5bd1e995, index) < this.options.disorder && this.late.length === 0)
        this.late = report;
      else {
        this.due = [...report, ...this.late];
        this.late = [];
      }
      if (uniform(this.key ^ 0x2545f491, index) < this.options.duplicates) {
        this.figures.duplicates += this.due.length;
        this.due = this.due.flatMap((m) => [m, m]);
      }
    }
    return this.due.shift() ?? null;
  }

  /** Everything that the logger says of one instant. */
  private report(atS: number, roster: Roster): LoadMessage[] {
    const since = shutdownSince(this.shape, this.serial, atS);
    const down = since !== null;
    const messages: LoadMessage[] = this.commands(since, atS, roster);
    const texts: string[] = [];
    const indices: number[] = [];
    let readings = 0;
    for (const { index, string, units } of this.strings) {
      const text = frameText(this.shape, string, atS, down);
      if (text === null) continue;
      texts.push(text);
      indices.push(index);
      readings += units;
    }
    if (texts.length > 0)
      messages.push({
        type: 'frames',
        atS,
        readings,
        strings: indices,
        text: (seq) =>
          `{"type":"frames","seq":${seq},"roster":${roster.version},"at":[${indices.map(() => atS).join(',')}],"string":[${indices.join(',')}],"frames":[${texts.join(',')}]}`,
      });
    if (this.options.reports === 'all') messages.push(...this.others(atS, down, roster));
    return messages;
  }

  private commands(since: number | null, atS: number, roster: Roster): LoadMessage[] {
    const now = since === null ? 'released' : `initiator ${since}`;
    if (now === this.told || (this.told === null && since === null)) return [];
    this.told = now;
    return roster.zones.map((zone) => ({
      type: 'command',
      atS,
      readings: 0,
      text: (seq) =>
        JSON.stringify({
          type: 'command',
          seq,
          zone,
          inForce: since === null ? 'released' : 'initiator',
          since: since ?? atS,
          by: 'load',
        }),
    }));
  }

  private others(atS: number, down: boolean, roster: Roster): LoadMessage[] {
    const light = lightAt(this.shape, atS);
    const message = (type: LoadMessage['type'], rows: unknown[]): LoadMessage[] =>
      rows.length === 0
        ? []
        : [{ type, atS, readings: 0, text: (seq) => JSON.stringify({ type, seq, rows }) }];
    const noise = mix(this.key, atS) & 63;
    return [
      ...message(
        'inputs',
        roster.inverters.flatMap((v) =>
          v.inputs.map((input) => ({
            at: atS,
            inverter: v.name,
            input,
            voltage: down ? 120 : 6300 + noise,
            current: down ? 0 : Math.round(900 * light) + (noise & 7),
          })),
        ),
      ),
      ...message(
        'inverters',
        roster.inverters.map((v) => ({
          at: atS,
          inverter: v.name,
          acPower: down ? 0 : Math.round(28_000 * light * v.inputs.length * 0.2),
          energy: Math.floor(atS / 60) * 400,
          status: light > 0 && !down ? 'running' : 'standby',
          powerLimit: null,
          insulation: 900 + noise,
          arcFlag: false,
          earthFaultFlag: false,
        })),
      ),
      ...message(
        'weather',
        roster.sensors.map(({ number, kind }) => ({
          at: atS,
          sensor: number,
          irradiance: kind === 'ambient' ? null : Math.round(930 * light) + (noise & 15),
          temperatureAir: 180 + (noise & 7),
          temperatureModule: 200 + Math.round(250 * light),
          windSpeed: 20 + (noise & 15),
        })),
      ),
    ];
  }

  private acknowledged(message: LoadMessage, seq: number, tookMs: number): void {
    const { figures, serial } = this;
    figures.acknowledgedMessages += 1;
    figures.acknowledgedReadings += message.readings;
    if (!this.slow) figures.latency(tookMs);
    this.ledger.add({
      logger: serial,
      seq,
      type: message.type,
      at: message.atS,
      ...(message.strings ? { strings: message.strings } : {}),
    });
  }
}
