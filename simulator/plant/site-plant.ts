import type { ModuleType } from '../../src/domain/equipment/module-type';
import type { UnitType } from '../../src/domain/equipment/unit-type';
import { keyOf, mix, uniform } from '../chance';
import { FaultBook, ofKind } from '../faults/book';
import type { Fault } from '../faults/kinds';
import { planeLight, type PlaneLight } from '../weather/plane-light';
import { Sky, type SkyNow } from '../weather/sky';
import { Commands } from './commands';
import { setLight } from './curve';
import { InputPlant } from './input-plant';
import { InverterPlant } from './inverter-plant';
import type { SitePlan } from './plan';
import { setShade } from './shade';
import { NO_UNIT, PASSING, StringPlant, UNPOWERED } from './string-plant';
import { moveUnits, moving, unitFaultsOf, type UnitFaults } from './units';

/** Where a serial really sits. */
export interface Seat {
  string: StringPlant;
  index: number;
}

/** Seconds in which a roof's modules take two thirds of a step in temperature. */
const WARM_UP_S = 420;
const WARM_UP_STEP_S = 60;
const DAY_S = 86_400;
/** After a longer step units and inverters have got where they were going. */
const LONG_STEP_S = 600;
/** Degrees of the sun's elevation below which no light of it reaches a module. */
const DEEP_NIGHT = -2.5;

/** A site as it really is. `step` moves it on; everything else reads it. */
export class SitePlant {
  readonly strings: StringPlant[];
  readonly byName = new Map<string, StringPlant>();
  readonly inverters: InverterPlant[];
  readonly inputs: InputPlant[];
  readonly commands: Commands;
  readonly faults = new FaultBook();
  private readonly heardSerials = new Set<string>();
  readonly sky: Sky;
  now: SkyNow;
  /** W/m² in each plane at the middle of the site, as a sensor there sees it. */
  readonly poaGlobal = new Map<string, number>();
  /** °C of the cells of each string. */
  readonly cells = new Map<StringPlant, number>();
  atS: number;
  /** Gateways of the whole site. */
  readonly gateways: number;

  private seats = new Map<string, Seat>();
  private rosterSeats = new WeakMap<readonly (string | null)[], (Seat | undefined)[]>();
  private known: { faults: Fault[]; byString: Map<StringPlant, UnitFaults> } | null = null;
  private readonly resistances: number[];
  private readonly dirt: number[];
  private fresh = true;
  /** Nothing stirs until the sun is near. */
  private asleep = false;

  constructor(
    readonly plan: SitePlan,
    types: { modules: readonly ModuleType[]; units: readonly UnitType[] },
    readonly seed: number,
    since: number,
    /** Epoch seconds from which the site is looked at. */
    fromS: number,
  ) {
    this.strings = plan.strings.map((s) => new StringPlant(s, plan.key, seed, types));
    for (const s of this.strings) this.byName.set(s.plan.name, s);
    this.resistances = this.strings.map((s) => s.resistance);
    this.dirt = this.strings.map((s) => 1 - 0.012 * uniform(s.key, 77));
    this.inputs = plan.inverters.flatMap((inverter) =>
      inverter.inputs.map(
        (number) =>
          new InputPlant(
            inverter.name,
            number,
            this.strings.filter((s) => s.plan.inverter === inverter.name && s.plan.input === number),
          ),
      ),
    );
    this.inverters = plan.inverters.map(
      (i) =>
        new InverterPlant(
          i,
          this.inputs.filter((input) => input.inverter === i.name),
          mix(keyOf(plan.key), keyOf(i.name)),
        ),
    );
    this.sky = new Sky(plan, seed, since);
    this.commands = new Commands(plan, since);
    this.atS = fromS;
    this.gateways = plan.loggers.reduce((n, l) => n + l.gateways.length, 0);
    this.now = this.sky.at(fromS);
    plan.faults.forEach((f, i) => {
      const until = f.untilS === undefined ? null : since - f.untilS;
      this.faults.add(f.fault, since - f.sinceS, until, `P${i + 1}`);
    });
    this.toOpen = plan.openInitiators
      .map((o) => ({ initiator: o.initiator, atS: since - o.sinceS, by: o.by }))
      .sort((a, b) => a.atS - b.atS);
    if (plan.stage === 'operating')
      for (const s of plan.strings)
        for (const slot of s.slots) if (slot.serial !== null) this.heardSerials.add(slot.serial);
  }

  /** Serials that have answered a roll call at some time. */
  get heard(): ReadonlySet<string> {
    return this.heardSerials;
  }

  /** Seats of a roster's serials, in its order; kept until somebody moves. */
  seatsOf(serials: readonly (string | null)[]): (Seat | undefined)[] {
    const found = this.rosterSeats.get(serials);
    if (found) return found;
    const seats = serials.map((serial) => (serial === null ? undefined : this.seats.get(serial)));
    this.rosterSeats.set(serials, seats);
    return seats;
  }

  /** The logger has heard this unit: from now on it follows the command in force. */
  hear(serial: string): void {
    this.heardSerials.add(serial);
    const seat = this.seats.get(serial);
    if (seat) seat.string.heard[seat.index] = 1;
  }

  seatOf(serial: string): Seat | undefined {
    return this.seats.get(serial);
  }

  /** What a unit says of itself when that is not the truth: a claim's code on the wire. */
  claimOf(s: StringPlant, index: number): number | null {
    const claims = this.known?.byString.get(s)?.keepsPassing.get(index);
    if (claims !== 'shutdown' || s.mode[index] !== PASSING) return null;
    return this.commands.released(s.plan.zone) ? null : 2;
  }

  /** Units are on their way somewhere, or an inverter is: worth a look each second. */
  get moving(): boolean {
    return this.strings.some(moving) || this.inverters.some((i) => i.starting);
  }

  /** Initiators that the plan opens, first things first. */
  private toOpen: { initiator: string; atS: number; by: string }[] = [];
  private faultsSeen: Fault[] | null = null;

  /** The plan's own events are past: somebody has gone on from there. */
  forgetPlan(): void {
    this.toOpen = [];
  }

  /** Lets initiators and faults take effect on what is commanded; true when the faults are others than before. */
  refreshCommands(atS: number): boolean {
    while (this.toOpen[0] && this.toOpen[0].atS <= atS) {
      const { initiator, atS: openedS, by } = this.toOpen.shift()!;
      this.commands.setInitiator(initiator, true, openedS, by);
    }
    const faults = this.faults.at(atS);
    const moved = faults !== this.faultsSeen;
    this.faultsSeen = faults;
    this.commands.refresh(faults, atS);
    return moved;
  }

  /** Moves the site on to `atS` (not before the last step). Returns the strings of which a unit changed its mode. */
  step(atS: number): StringPlant[] {
    this.refreshCommands(atS);
    const faults = this.faults.at(atS);
    if (this.known?.faults !== faults) this.learn(faults);
    this.now = this.sky.at(atS);
    if (this.asleep && this.now.elevation < DEEP_NIGHT) {
      this.atS = atS;
      return [];
    }
    const elapsed = this.fresh ? Infinity : atS - this.atS;
    this.atS = atS;
    if (this.fresh) this.warmUp(faults, atS);
    this.shine(faults, this.fresh ? WARM_UP_STEP_S : elapsed);
    const changed: StringPlant[] = [];
    for (const s of this.strings) {
      const mine = this.known?.byString.get(s);
      if (mine && moveUnits(s, atS, this.commands, mine)) changed.push(s);
    }
    if (this.fresh || elapsed > LONG_STEP_S) this.settleUnits(atS);
    this.fresh = false;
    for (const inverter of this.inverters) inverter.step(atS, faults, this.now.temperatureAir);
    this.asleep =
      this.now.elevation < DEEP_NIGHT &&
      this.strings.every((s) => s.mode.every((m) => m === UNPOWERED || m === NO_UNIT));
    return changed;
  }

  /** At the first look everything has long been where it is going. */
  private settleUnits(atS: number): void {
    for (const s of this.strings) {
      const mine = this.known?.byString.get(s);
      if (!mine) continue;
      moveUnits(s, atS, this.commands, mine);
      moveUnits(s, atS + 3600, this.commands, mine);
      s.pendingAtS.fill(NaN);
    }
  }

  /** The roof remembers the last half hour's sun: a site that is looked at for the first time has its warmth too. */
  private warmUp(faults: readonly Fault[], atS: number): void {
    for (let k = 5 * WARM_UP_S; k > 0; k -= WARM_UP_STEP_S) {
      this.now = this.sky.at(atS - k);
      this.shine(faults, this.cells.size === 0 ? Infinity : WARM_UP_STEP_S);
    }
    this.now = this.sky.at(atS);
  }

  private shine(faults: readonly Fault[], elapsed: number): void {
    const { now, plan } = this;
    const snow = ofKind(faults, 'snow');
    const covered = (plane: string) => snow.some((f) => f.plane === undefined || f.plane === plane);
    const kept = 1 - this.sky.soiling(now.atS);
    const light = new Map<string, PlaneLight>();
    const middle = plan.outline[2] ?? [30, 30];
    for (const p of plan.planes) {
      const l = planeLight(now, p);
      light.set(p.name, l);
      const through = this.sky.beamThrough(now, middle[0] / 2, middle[1] / 2);
      this.poaGlobal.set(p.name, covered(p.name) ? 0 : l.beam * through + l.diffuse);
    }
    const solarHour = ((((now.atS + plan.longitude * 240) % DAY_S) + DAY_S) % DAY_S) / 3600;
    // A mounted module runs above the air by what it takes in over what the wind carries off.
    const rise = 0.034 / (1 + 0.09 * Math.max(0, now.windSpeed - 1));
    const share = 1 - Math.exp(-elapsed / WARM_UP_S);
    this.strings.forEach((s, k) => {
      const l = light.get(s.plan.plane);
      if (!l) return;
      const snowed = covered(s.plan.plane);
      const beam = snowed ? 0 : l.beam * this.sky.beamThrough(now, s.centreX, s.centreY);
      const diffuse = snowed ? 0 : l.diffuse;
      const aim = now.temperatureAir + rise * (beam + diffuse) - (now.elevation < 0 ? 2 : 0);
      const before = this.cells.get(s) ?? aim;
      const cell = before + (aim - before) * share;
      this.cells.set(s, cell);
      setShade(s, now, plan.obstacles, faults, beam / Math.max(1, beam + diffuse), solarHour);
      setLight(s, beam, diffuse, kept * (this.dirt[k] ?? 1) * (this.soiled.get(s) ?? 1), cell);
    });
  }

  private readonly soiled = new Map<StringPlant, number>();

  /** What the faults in force change in the plant itself. */
  private learn(faults: Fault[]): void {
    this.known = { faults, byString: new Map(this.strings.map((s) => [s, unitFaultsOf(s, faults)])) };
    this.strings.forEach((s, k) => {
      const name = s.plan.name;
      s.shortedGroups.fill(0);
      for (const f of ofKind(faults, 'bypass_diode'))
        if (f.string === name && f.position <= s.size) s.shortedGroups[f.position - 1] = f.groups;
      s.resistance = this.resistances[k] ?? s.resistance;
      for (const f of ofKind(faults, 'connector')) if (f.string === name) s.resistance += f.ohm;
      s.isolated = ofKind(faults, 'string_isolated').some((f) => f.string === name);
      this.soiled.set(s, 1);
      for (const f of ofKind(faults, 'soiling')) if (f.string === name) this.soiled.set(s, 1 - f.share);
      if (!ofKind(faults, 'shade').some((f) => f.string === name)) {
        s.shadedGroups.fill(0);
        s.shadeLoss.fill(0);
      }
    });
    this.seats = new Map();
    this.rosterSeats = new WeakMap();
    for (const s of this.strings)
      s.plan.slots.forEach((slot, index) => {
        if (slot.serial !== null) this.seats.set(slot.serial, { string: s, index });
      });
    for (const { serial, seat } of this.plan.strangers) {
      if (!seat) continue;
      const string = this.byName.get(seat.string);
      const drawn = string?.plan.slots[seat.position - 1]?.serial;
      if (!string || !drawn) continue;
      this.seats.delete(drawn);
      this.seats.set(serial, { string, index: seat.position - 1 });
    }
    for (const f of ofKind(faults, 'wrong_string')) this.swap(f);
    for (const [serial, { string, index }] of this.seats) {
      string.serials[index] = serial;
      string.heard[index] = this.heardSerials.has(serial) ? 1 : 0;
    }
  }

  private swap(f: Extract<Fault, { kind: 'wrong_string' }>): void {
    const serialAt = (string: string, position: number) =>
      this.byName.get(string)?.plan.slots[position - 1]?.serial ?? '';
    const one = serialAt(f.string, f.position);
    const other = serialAt(f.otherString, f.otherPosition);
    const seat = this.seats.get(one);
    const otherSeat = this.seats.get(other);
    if (!seat || !otherSeat) return;
    this.seats.set(one, otherSeat);
    this.seats.set(other, seat);
  }
}
