import type { ModuleType } from '../src/domain/equipment/module-type';
import type { UnitType } from '../src/domain/equipment/unit-type';
import { restore, type KeptState } from './kept-state';
import { Logger } from './logger/logger';
import type { SitePlan } from './plant/plan';
import type { CommandNow } from './plant/commands';
import { SitePlant } from './plant/site-plant';
import { loggerToken } from './scenarios/tokens';

/** Seconds in which inputs are told again while something is on the move. */
const BUSY_INPUTS_S = 5;

/** A site that runs: its plant in step with the clock, and its loggers. */
export class SiteRun {
  readonly plant: SitePlant;
  readonly loggers: Logger[];
  private readonly commandsSeen = new Map<string, CommandNow>();
  private lastS: number;

  constructor(
    readonly plan: SitePlan,
    types: { modules: readonly ModuleType[]; units: readonly UnitType[] },
    options: {
      seed: number;
      since: number;
      fromS: number;
      url: string;
      secret: string;
      tokens?: Readonly<Record<string, string>>;
      pace: number;
      clock: () => number;
      kept: KeptState | null;
    },
  ) {
    this.plant = new SitePlant(plan, types, options.seed, options.since, options.fromS);
    if (options.kept) restore(this, options.kept);
    this.plant.step(options.fromS);
    this.concernedStrings();
    this.lastS = options.fromS;
    this.loggers = plan.loggers.map(
      (l) =>
        new Logger(l, this.plant, {
          url: options.url,
          token: options.tokens?.[l.serial] ?? loggerToken(options.secret, l.serial),
          clock: options.clock,
          pace: options.pace,
        }),
    );
  }

  /** One second of the plant's time. Cheap while nothing moves and no report is due. */
  second(atS: number): void {
    if (atS <= this.lastS) return;
    this.lastS = atS;
    const { plant } = this;
    const faultsMoved = plant.refreshCommands(atS);
    const concerned = this.concernedStrings();
    const commanded = concerned.size > 0;
    const watching = this.loggers.some((l) => l.traces.active);
    const due = this.loggers.filter((l) => l.due(atS));
    if (commanded)
      for (const l of this.loggers) {
        l.tellCommands();
        l.watch(concerned, atS);
      }
    if (due.length > 0 || commanded || faultsMoved || watching || plant.moving) {
      const changed = plant.step(atS);
      for (const l of this.loggers) {
        if (due.includes(l)) l.report(atS);
        else {
          if (changed.length > 0) l.reportStrings(changed);
          if ((watching || plant.moving) && atS % BUSY_INPUTS_S === 0) l.reportInputs();
        }
      }
    }
    for (const l of this.loggers) l.second(atS);
  }

  /** Strings for which something else is in force than when this was asked before. */
  private concernedStrings(): Set<string> {
    const { zones, transmitters } = this.plant.commands;
    const others = new Set<string>();
    for (const [kind, map] of [
      ['zone', zones],
      ['transmitter', transmitters],
    ] as const)
      for (const [name, command] of map) {
        const key = `${kind} ${name}`;
        if (this.commandsSeen.get(key) !== command) others.add(key);
        this.commandsSeen.set(key, command);
      }
    return new Set(
      this.plan.strings
        .filter(
          (s) => others.has(`zone ${s.zone}`) || s.transmitters.some((t) => others.has(`transmitter ${t}`)),
        )
        .map((s) => s.name),
    );
  }
}
