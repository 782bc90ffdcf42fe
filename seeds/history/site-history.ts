import { SitePlant } from '../../simulator/plant/site-plant';
import type { FleetPlan, OrganisationPlan } from '../../simulator/plant/plan';
import { frameOf, inputRows, inverterRows, radioOf, weatherRows } from '../../simulator/logger/readings';
import type { Frame } from '../../src/schemas/ingest';
import { known } from '../plant/rows';
import type { SeededSite } from '../plant/seeded';
import { arrayField, field, instant, type CopyInto, type WaitingRows } from './copy';
import { SiteRollUp } from './site-roll-up';
import { localDays, StringRollUp } from './quarters';

export const MINUTES_S = 2 * 86_400;
export const QUARTERS_S = 31 * 86_400;
const COARSE_STEP_S = 3600;
/** Degrees of the sun's elevation below which the seed writes a night's sparse rows. */
const NIGHT = -3;

/** The newest frame of a string, and when each unit last spoke. */
export interface Newest {
  atS: number;
  frame: Frame;
  seen: number[];
}

/** Lines for COPY that wait in memory while the frames stream. */
export interface Lines {
  quarters: WaitingRows;
  inputs: WaitingRows;
  inverters: WaitingRows;
  weather: WaitingRows;
  siteQuarters: WaitingRows;
  stringDays: WaitingRows;
  siteDays: WaitingRows;
}

/** One site's past by running its simulated plant: quarters of a month, minutes of two days. */
export class SiteHistory {
  readonly plant: SitePlant;
  readonly rollUps: Map<string, StringRollUp>;
  readonly siteRollUp: SiteRollUp;
  readonly newest = new Map<string, Newest>();
  private readonly hasMonths: boolean;

  constructor(
    fleet: FleetPlan,
    organisation: OrganisationPlan,
    readonly site: SeededSite,
    private readonly lines: Lines,
  ) {
    const { plan } = site;
    this.hasMonths = plan.stage === 'operating';
    const fromS = Math.floor((fleet.since - (this.hasMonths ? QUARTERS_S : 86_400)) / 3600) * 3600;
    this.plant = new SitePlant(
      plan,
      { modules: organisation.moduleTypes, units: organisation.unitTypes },
      fleet.seed,
      fleet.since,
      fromS,
    );
    const localDay = localDays(plan.timeZone);
    this.rollUps = new Map(
      plan.strings.map((s) => [
        s.name,
        new StringRollUp(this.stringId(s.name), s.slots.length, localDay, (line) =>
          lines.quarters.push(line),
        ),
      ]),
    );
    this.siteRollUp = new SiteRollUp(site.id, localDay, lines.siteQuarters);
  }

  stringId(name: string): number {
    return known(this.site.strings, name, 'the string').id;
  }

  /** The month before the minutes: a sample each hour, quarters between them by straight lines. */
  runMonth(untilS: number): void {
    if (!this.hasMonths) return;
    const { plant } = this;
    let before: { volts: Float64Array; watts: Float64Array; ac: number; poa: number; grid: boolean } | null =
      null;
    for (let atS = plant.atS; atS <= untilS; atS += COARSE_STEP_S) {
      plant.step(atS);
      const now = {
        volts: Float64Array.from(plant.strings, (s) => s.voltage * 100),
        watts: Float64Array.from(plant.strings, (s) => s.voltage * s.current * 10),
        ac: plant.inverters.reduce((sum, i) => sum + i.acPower, 0),
        poa: this.mainPoa(),
        grid: plant.inverters.some((i) => i.status === 'grid_lost'),
      };
      if (before)
        for (const share of [0.125, 0.375, 0.625, 0.875]) {
          const quarterS = atS - COARSE_STEP_S + (share - 0.125) * COARSE_STEP_S;
          const between = (a: number, b: number) => a + (b - a) * share;
          const last = before;
          plant.strings.forEach((s, k) => {
            const volts = Math.round(between(last.volts[k]!, now.volts[k]!));
            const watts = Math.round(between(last.watts[k]!, now.watts[k]!));
            if (volts > 0) this.rollUps.get(s.plan.name)?.add(quarterS, 15, volts, watts, null);
          });
          this.siteRollUp.add(quarterS, 15, {
            ac: between(last.ac, now.ac),
            poa: between(last.poa, now.poa),
            gridLost: now.grid,
          });
        }
      before = now;
    }
  }

  private mainPoa(): number {
    return this.plant.poaGlobal.get(this.site.plan.planes[0]?.name ?? '') ?? 0;
  }

  /** The last two days, minute by minute, as the loggers would have sent them. */
  async runMinutes(fromS: number, untilS: number, frames: CopyInto): Promise<void> {
    const { plant, site } = this;
    const logger = site.plan.loggers[0]?.serial ?? '';
    const rosters = site.plan.strings.map((s) => s.slots.map((slot) => slot.serial));
    const energies = plant.inverters.map((i) => i.energy);
    const inverterLines: { at: number; row: ReturnType<typeof inverterRows>[number] }[] = [];
    for (let atS = Math.max(fromS, Math.ceil(plant.atS / 60) * 60); atS <= untilS; atS += 60) {
      plant.step(atS);
      const night = plant.now.elevation < NIGHT;
      if (!night) this.minuteOfStrings(atS, logger, rosters, frames);
      if (!night || atS % 300 === 0) {
        for (const row of inverterRows(plant, logger)) inverterLines.push({ at: atS, row });
        for (const w of weatherRows(plant, logger))
          this.lines.weather.push(
            `${instant(atS)}\t${known(site.sensors, `${logger}/${w.sensor}`, 'the sensor')}\t${field(w.irradiance)}\t${field(w.temperatureAir)}\t${field(w.temperatureModule)}\t${field(w.windSpeed)}`,
          );
      }
      if (!night)
        for (const i of inputRows(plant, logger))
          this.lines.inputs.push(
            `${instant(atS)}\t${known(site.inputs, `${i.inverter}/${i.input}`, 'the input')}\t${field(i.voltage)}\t${field(i.current)}`,
          );
      this.siteRollUp.add(atS, 1, {
        ac: plant.inverters.reduce((sum, i) => sum + i.acPower, 0),
        poa: this.mainPoa(),
        gridLost: plant.inverters.some((i) => i.status === 'grid_lost'),
      });
      await frames.breathe();
    }
    for (const r of this.rollUps.values()) r.close();
    // The counters end where the running simulator begins.
    plant.inverters.forEach((inverter, k) => {
      const id = known(site.inverters, inverter.plan.name, 'the inverter');
      const shift = inverter.energy - energies[k]!;
      for (const { at, row } of inverterLines)
        if (row.inverter === inverter.plan.name)
          this.lines.inverters.push(
            `${instant(at)}\t${id}\t${field(row.acPower)}\t${Math.round((row.energy ?? 0) - shift)}\t${row.status}\t${field(row.powerLimit)}\t${field(row.insulation)}\t${row.arcFlag ? 't' : 'f'}\t${row.earthFaultFlag ? 't' : 'f'}`,
          );
      inverter.energy = energies[k]!;
    });
  }

  private minuteOfStrings(atS: number, logger: string, rosters: (string | null)[][], frames: CopyInto): void {
    const { plant } = this;
    const radio = radioOf(plant, logger);
    plant.strings.forEach((s, k) => {
      const name = s.plan.name;
      const frame = frameOf(plant, radio, rosters[k]!);
      if (!frame) {
        // A string that tells nothing itself has its day by what the input says of it.
        if (s.unitType.kind === 'shutdown_only' && s.voltage > 0)
          this.rollUps
            .get(name)
            ?.add(atS, 1, Math.round(s.voltage * 100), Math.round(s.voltage * s.current * 10), null);
        return;
      }
      const sums = sumsOf(frame);
      const id = this.stringId(name);
      frames.write(
        `${instant(atS)}\t${maskOf(frame)}\t${id}\t${sums.voltage}\t${sums.power}\t${arrayField(frame.voltageOut)}\t${arrayField(frame.voltageIn)}\t${arrayField(frame.current)}\t${arrayField(frame.powerOut)}\t${arrayField(frame.temperature)}\t${arrayField(frame.signal)}\t${arrayField(frame.via)}\t${arrayField(frame.state)}`,
      );
      this.rollUps.get(name)?.add(atS, 1, sums.voltage, sums.power, frame);
      this.remember(name, atS, frame);
    });
  }

  private remember(name: string, atS: number, frame: Frame): void {
    const before = this.newest.get(name);
    if (!before) {
      this.newest.set(name, { atS, frame, seen: frame.state.map((s) => (s === null ? 0 : atS)) });
      return;
    }
    const fields = Object.keys(frame) as (keyof Frame)[];
    frame.state.forEach((s, i) => {
      if (s !== null) before.seen[i] = atS;
      else for (const f of fields) frame[f]![i] = before.frame[f]?.[i] ?? null;
    });
    before.atS = atS;
    before.frame = frame;
  }
}

/** cV and dW over the string, as the database makes them of a frame. */
export function sumsOf(frame: Frame): { voltage: number; power: number } {
  let voltage = 0;
  let power = 0;
  const n = frame.state.length;
  for (let i = 0; i < n; i++) {
    const out = frame.voltageOut?.[i] ?? null;
    const side = out ?? frame.voltageIn?.[i] ?? null;
    if (side === null) continue;
    voltage += side;
    const reported = frame.powerOut?.[i] ?? null;
    const amps = frame.current[i] ?? 0;
    if (reported !== null) power += reported * 10_000;
    else if (out !== null || frame.state[i] === 1) power += side * amps;
  }
  return { voltage, power: Math.round(power / 10_000) };
}

/** The mask of the units that reported, as a decimal number (up to 63 bits). */
export function maskOf(frame: Frame): string {
  const n = frame.state.length;
  if (n <= 52 && !frame.state.includes(null)) return String(2 ** n - 1);
  let mask = 0n;
  for (let i = 0; i < n; i++) if (frame.state[i] !== null) mask |= 1n << BigInt(i);
  return mask.toString();
}

export const FRAME_COLUMNS = [
  'at',
  'mask',
  'string_id',
  'voltage_sum',
  'power_sum',
  'voltage',
  'voltage_in',
  'current',
  'power',
  'temperature',
  'signal',
  'via',
  'state',
];
