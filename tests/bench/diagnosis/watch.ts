import { expectedModule } from '../../../src/domain/output/expected';
import { clearSkyInPlane } from '../../../src/domain/photovoltaics/irradiance/clear-sky-plane';
import { solarPositionQuick } from '../../../src/domain/photovoltaics/sun/position-quick';
import type { SiteCondition } from '../../../src/domain/causes/site';
import { UNIT_STATES, VERDICTS } from '../../../src/domain/verdicts/codes';
import { judgeInput, seenPassing, type InputReading } from '../../../src/domain/verdicts/conductors';
import {
  commandedSpans,
  judgementTimes,
  lightSpans,
  snowMayLie,
  timeLimitOf,
  type CommandPoint,
  type LightSpan,
  type StringContext,
} from '../../../src/domain/verdicts/context';
import type { JudgeOutcome } from '../../../src/domain/verdicts/evidence';
import { judgeFrame, sweepString } from '../../../src/domain/verdicts/judge';
import { newMemory, type StringMemory } from '../../../src/domain/verdicts/memory';
import { frameOf, inputRows, radioOf, weatherRows } from '../../../simulator/logger/readings';
import type { SitePlant } from '../../../simulator/plant/site-plant';
import type { StringPlant } from '../../../simulator/plant/string-plant';
import type { StringPlan } from '../../../simulator/plant/plan';
import type { Frame } from '../../../src/schemas/ingest';
import type { ConductDay } from './conduct-scenarios';
import { Draw, moduleTypeOf, unitTypeOf } from './plants';

/** What a string's judgement holds in memory, and what was seen of its units last. */
export interface Watched {
  plan: StringPlan;
  serials: (string | null)[];
  context: StringContext;
  memory: StringMemory;
  via: (number | null)[];
  /** Slots of which the newest regular report brought something. */
  heardNow: Uint8Array;
}

export interface News {
  string: Watched;
  outcome: JudgeOutcome;
}

/**
 * Logger and server of one site in this process: frames as the logger sends them, judged as the server does, with
 * what goes wrong between: reports that get lost, minutes of nothing, a logger whose clock is off.
 */
export class Watch {
  readonly strings: Watched[];
  readonly news: News[] = [];
  private readonly logger: string;
  private readonly points = new Map<string, CommandPoint[]>();
  private readonly gatewayHeard = new Map<number, number>();
  private inputsNow: ReturnType<typeof inputRows> = [];
  /** Frames that the logger keeps while it is cut off. */
  private kept: { string: Watched; frame: Frame; atS: number }[] = [];
  private snow = false;
  private light: LightSpan[] = [];

  constructor(
    private readonly plant: SitePlant,
    private readonly draw: Draw,
    readonly options: {
      /** Share of frames lost. */
      lost: number;
      /** Nothing of the site comes through meanwhile, epoch seconds; `keeps`: its frames come afterwards. */
      cutOff: ConductDay['cutOff'];
      /** Seconds by which the logger's clock is ahead, and by which the inverters' readings lag it. */
      skewS: number;
      inverterLagS: number;
    },
  ) {
    const { plan } = plant;
    this.logger = plan.loggers[0]!.serial;
    this.light = lightSpans(
      (atS) => solarPositionQuick(atS * 1000, plan).apparentElevation,
      plant.atS - 86_400,
      plant.atS + 2 * 86_400,
    );
    this.tellCommands();
    this.strings = plan.strings.map((s) => {
      const context = this.contextOf(s);
      return {
        plan: s,
        serials: s.slots.map((slot) => slot.serial),
        context,
        memory: newMemory(context),
        via: s.slots.map((slot) => slot.gateway), // as yesterday
        heardNow: new Uint8Array(s.slots.length),
      };
    });
  }

  private clock(): number {
    return this.plant.atS + this.options.skewS;
  }

  private get cutOff(): boolean {
    const { cutOff } = this.options;
    return cutOff !== null && this.plant.atS >= cutOff.fromS && this.plant.atS < cutOff.toS;
  }

  /** Takes over what is in force now; true when something is new. */
  private tellCommands(): boolean {
    let fresh = false;
    const { zones, transmitters } = this.plant.commands;
    for (const map of [zones, transmitters])
      for (const [name, c] of map) {
        const points = this.points.get(name) ?? [];
        this.points.set(name, points);
        if (points.at(-1)?.inForce === c.inForce) continue;
        points.push({ sinceS: c.since + this.options.skewS, inForce: c.inForce });
        fresh = true;
      }
    return fresh;
  }

  private contextOf(s: StringPlan): StringContext {
    const { plan } = this.plant;
    const behaviour = unitTypeOf(plan);
    const { timeLimitS, source } = timeLimitOf(plan.ruleSet);
    const transmitters = s.transmitters.map((name) => ({
      own: this.points.get(name) ?? [],
      zone: this.points.get(plan.transmitters.find((t) => t.name === name)!.zone) ?? [],
    }));
    return {
      behaviour,
      times: judgementTimes(plan.reportIntervalS, timeLimitS),
      timeLimitSource: source,
      slots: s.slots.map((slot) => slot.serial !== null),
      // heard on the day the site was put up
      heardAtS: s.slots.map(() => this.plant.atS - 30 * 86_400),
      commands: commandedSpans(behaviour, plan.stage, this.points.get(s.zone) ?? [], transmitters),
      light: this.light,
      snowLikely: this.snow,
    };
  }

  /** After each step of the plant: commands that changed are known at once. */
  command(): void {
    if (this.cutOff || !this.tellCommands()) return;
    for (const s of this.strings) s.context = this.contextOf(s.plan);
  }

  /** A regular report of everything, and the sweep that follows. */
  report(): void {
    for (const s of this.strings) s.heardNow.fill(0);
    if (this.cutOff) {
      if (this.options.cutOff?.keeps) this.keep();
      return;
    }
    this.handOver();
    this.air();
    this.frames(this.strings, true);
    this.inputs();
    const nowS = this.clock();
    for (const s of this.strings) this.take(s, sweepString(s.memory, s.context, nowS));
  }

  private keep(): void {
    const radio = radioOf(this.plant, this.logger);
    for (const string of this.strings) {
      const frame = frameOf(this.plant, radio, string.serials);
      if (frame !== null) this.kept.push({ string, frame, atS: this.clock() });
    }
  }

  /** What was kept comes in, oldest first, before anything new. */
  private handOver(): void {
    for (const { string, frame, atS } of this.kept.splice(0)) this.judge(string, frame, atS);
  }

  /** Frost and thaw, as the server takes them from the air. */
  private air(): void {
    const air = weatherRows(this.plant, this.logger)[0]?.temperatureAir ?? null;
    const snow = snowMayLie(this.snow, air === null ? null : air / 10);
    if (snow === this.snow) return;
    this.snow = snow;
    for (const s of this.strings) s.context = this.contextOf(s.plan);
  }

  /** At once: strings of which a unit changed. */
  changed(strings: readonly StringPlant[]): void {
    if (this.cutOff || strings.length === 0) return;
    this.frames(
      this.strings.filter((s) => strings.some((c) => c.plan.name === s.plan.name)),
      false,
    );
  }

  private frames(strings: readonly Watched[], regular: boolean): void {
    const { plant } = this;
    const radio = radioOf(plant, this.logger);
    const atS = this.clock();
    for (const s of strings) {
      const frame = frameOf(plant, radio, s.serials);
      if (frame === null || this.draw.next() < this.options.lost) continue;
      frame.via.forEach((gateway, i) => {
        if (gateway === null) return;
        s.via[i] = gateway;
        this.gatewayHeard.set(gateway, atS);
        if (regular) s.heardNow[i] = 1;
      });
      this.judge(s, frame, atS);
    }
  }

  private judge(s: Watched, { state, voltageOut, voltageIn }: Frame, atS: number): void {
    if (atS < s.memory.atS) return;
    this.take(s, judgeFrame(s.memory, s.context, { atS, state, voltageOut, voltageIn }));
  }

  private inputs(): void {
    const atS = this.clock() - this.options.inverterLagS;
    this.inputsNow = inputRows(this.plant, this.logger);
    for (const row of this.inputsNow) {
      const sharing = this.strings.filter(
        (s) => s.plan.inverter === row.inverter && s.plan.input === row.input,
      );
      const passing = sharing.map((s) => seenPassing(s.memory, s.context, atS));
      const all = passing.reduce((a, b) => a + b, 0);
      sharing.forEach((s, k) =>
        this.take(
          s,
          judgeInput(s.memory, s.context, {
            atS,
            voltageV: row.voltage === null ? null : row.voltage / 10,
            currentA: row.current === null ? null : row.current / 100,
            strings: sharing.length,
            othersPassing: all - passing[k]!,
            module: s.plan.kind === 'shutdown_only' ? this.expectation(s) : null,
          }),
        ),
      );
    }
  }

  /** What one passing module of a silent string should give: as the server works it out. */
  private expectation(own: Watched): InputReading['module'] {
    const { plan } = this.plant;
    const measured = (s: Watched) => {
      const row = this.inputsNow.find((r) => r.inverter === s.plan.inverter && r.input === s.plan.input);
      const units = s.plan.slots.length;
      const v = (row?.voltage ?? 0) / 10;
      return {
        typical: v > 10 * units && s.memory.finding === null ? v / units : null,
        underLoad: (row?.current ?? 0) / 100 > 0.2,
      };
    };
    const mine = measured(own);
    const weather = weatherRows(this.plant, this.logger)[0];
    const plane = plan.planes[0]!;
    const otherStrings = this.strings.flatMap((s) => {
      if (s === own || s.plan.inverter !== own.plan.inverter) return [];
      const m = measured(s);
      return m.underLoad === mine.underLoad && m.typical !== null ? [m.typical] : [];
    });
    const expected = expectedModule({
      module: moduleTypeOf(plan),
      underLoad: mine.underLoad,
      otherStrings,
      ownUnits: [],
      poaMeasured: weather?.irradiance ?? null,
      poaClear: clearSkyInPlane(this.plant.atS * 1000, { ...plan, ...plane }).poaGlobal,
      temperatureCellMeasured: weather?.temperatureModule == null ? null : weather.temperatureModule / 10,
      temperatureAir: weather?.temperatureAir == null ? null : weather.temperatureAir / 10,
    });
    return (
      expected && {
        expectedV: expected.voltage,
        relativeSd: expected.relativeSd,
        siblings: expected.strings,
      }
    );
  }

  private take(string: Watched, outcome: JudgeOutcome): void {
    if (outcome.changes.length > 0 || outcome.finding !== null) this.news.push({ string, outcome });
  }

  /** The site as the search for causes sees it now. */
  condition(): SiteCondition {
    const { plan } = this.plant;
    const names = new Map(plan.loggers[0]!.gateways.map((g) => [g.number, g.name]));
    return {
      name: plan.name,
      atS: this.clock(),
      reportIntervalS: plan.reportIntervalS,
      strings: this.strings.map((s) => ({
        id: s.plan.name,
        name: s.plan.name,
        kind: s.plan.kind,
        releasedBy: unitTypeOf(plan).releasedBy,
        zone: s.plan.zone,
        transmitters: s.plan.transmitters,
        logger: this.logger,
        inverter: s.plan.inverter,
        input: s.plan.input,
        slots: s.plan.slots.map((slot, i) => ({
          position: i + 1,
          serial: slot.serial,
          state: UNIT_STATES[s.memory.state[i]!] ?? null,
          verdict: VERDICTS[s.memory.verdict[i]!] ?? 'ok',
          sinceS: s.memory.since[i]!,
          seenS: s.memory.seen[i] || null,
          gateway: s.via[i] == null ? null : (names.get(s.via[i]) ?? null),
        })),
        finding: s.memory.finding,
      })),
      zones: plan.zones.map((z) => ({
        name: z.name,
        inForce: this.points.get(z.name)?.at(-1)?.inForce ?? null,
      })),
      transmitters: plan.transmitters.map((t) => ({
        ...t,
        inForce: this.points.get(t.name)?.at(-1)?.inForce ?? null,
      })),
      gateways: [...names].map(([number, name]) => ({
        name,
        lastHeardS: this.gatewayHeard.get(number) ?? null,
      })),
      loggers: [{ name: this.logger, connected: true }],
      inputs: this.inputsNow.map((r) => ({
        inverter: r.inverter,
        number: r.input,
        currentA: r.current === null ? null : r.current / 100,
      })),
    };
  }
}
