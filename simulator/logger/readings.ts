import type { UnitType } from '../../src/domain/equipment/unit-type';
import type { Frame, LoggerMessage } from '../../src/schemas/ingest';
import { mix, smoothNoise, uniform } from '../chance';
import { ofKind } from '../faults/book';
import type { Fault } from '../faults/kinds';
import type { SitePlant, Seat } from '../plant/site-plant';
import { PASSING, SHUTDOWN, STARTING, UNPOWERED, type StringPlant } from '../plant/string-plant';

/** What a logger can know of the plant: true values with meter errors, and nothing of units that it can't hear. */

type RowsOf<T extends LoggerMessage['type']> = Extract<LoggerMessage, { type: T; rows: unknown }>['rows'];

/** Below this many volts an inverter's own measurement reads nothing. */
const INPUT_FLOOR = 12;
/** Of 256 reports. */
const LOST_REPORTS = 1;

/** How the radio of one site stands, made once for a step. */
export interface Radio {
  deadGateways: Set<number>;
  /** Of them, those that hand over later what they heard. */
  keepingGateways: Set<number>;
  mute: Set<string>;
}

export function radioOf(site: SitePlant, logger: string): Radio {
  const faults: readonly Fault[] = site.faults.at(site.atS);
  const out = ofKind(faults, 'gateway_out').filter((f) => f.logger === logger);
  return {
    deadGateways: new Set(out.map((f) => f.gateway)),
    keepingGateways: new Set(out.filter((f) => f.keeps).map((f) => f.gateway)),
    mute: new Set(
      ofKind(faults, 'unit_mute').map(
        (f) => site.byName.get(f.string)?.plan.slots[f.position - 1]?.serial ?? '',
      ),
    ),
  };
}

/** The gateway that hears a unit now: its own, or a neighbour's for the few that sit between two. */
export function gatewayOf(site: SitePlant, { string, index }: Seat): number {
  const own = string.plan.slots[index]?.gateway ?? 0;
  // The last gateway of a site stands by itself.
  if (own >= site.gateways - 1 || uniform(string.key + 31, index) > 0.05) return own;
  return uniform(mix(string.key, Math.floor(site.atS / 1800)), index) < 0.3 ? own + 1 : own;
}

/** dBm as a gateway measures it; `noise` is a whole number, of which a few bits serve. */
export const signalOf = ({ string, index }: Seat, fade: number, noise: number): number =>
  Math.round(string.signal[index]! + fade + ((noise >>> 28) & 3) - 1.5);

/** Slow rise and fall of a string's signals, dB. */
export const fadeOf = (s: StringPlant, atS: number): number => 2.5 * smoothNoise(s.key, atS / 900);

const CLAIM = { [PASSING]: 1, [SHUTDOWN]: 2, [STARTING]: 3 } as Record<number, number>;

/** Whether a unit's report reaches the logger, or (`kept`) a gateway that will hand it over later. */
export function hears(site: SitePlant, radio: Radio, seat: Seat, kept = false): boolean {
  const { string: s, index } = seat;
  if (s.mode[index] === UNPOWERED || s.heard[index] !== 1) return false;
  if (radio.mute.size > 0 && radio.mute.has(s.serials[index] ?? '')) return false;
  if (radio.deadGateways.size === 0) return !kept;
  const gateway = gatewayOf(site, seat);
  return kept ? radio.keepingGateways.has(gateway) : !radio.deadGateways.has(gateway);
}

/**
 * One string of the roster, measured now; null when none of its units was heard.
 *
 * @param serials in slot order, as the roster has them
 * @param kept only what a gateway that is cut off keeps for later
 */
export function frameOf(
  site: SitePlant,
  radio: Radio,
  serials: readonly (string | null)[],
  kept = false,
): Frame | null {
  const n = serials.length;
  let frame: Required<Frame> | null = null;
  let type: UnitType | null = null;
  let fading: StringPlant | null = null;
  let fade = 0;
  const seats = site.seatsOf(serials);
  for (let k = 0; k < n; k++) {
    const seat = seats[k];
    if (!seat || !hears(site, radio, seat, kept)) continue;
    const { string: s, index: i } = seat;
    if (s.unitType.kind === 'shutdown_only') continue;
    // One draw a report: its bits are the errors of the single readings.
    const noise = mix(s.key + i, site.atS);
    if ((noise & 0xff) < LOST_REPORTS) continue;
    frame ??= emptyFrame(n);
    type ??= s.unitType;
    if (fading !== s) [fading, fade] = [s, fadeOf(s, site.atS)];
    const gain = s.voltageGain[i]!;
    const out = s.voltageOut[i]!;
    frame.voltageOut[k] = Math.round(out * gain * 100 + ((noise >>> 8) & 3) - 1.5);
    frame.voltageIn[k] = Math.round(s.voltageIn[i]! * gain * 100 + ((noise >>> 10) & 3) - 1.5);
    frame.current[k] = Math.round(s.current * 1000 * s.currentGain[i]! + ((noise >>> 12) & 7) - 3.5);
    frame.powerOut[k] = Math.max(0, Math.round(out * s.current * gain * 10));
    frame.temperature[k] = Math.round((s.temperature[i]! - 2) * 10 + ((noise >>> 16) & 3) - 1.5);
    frame.signal[k] = signalOf(seat, fade, noise);
    frame.via[k] = gatewayOf(site, seat);
    frame.state[k] = site.claimOf(s, i) ?? CLAIM[s.mode[i]!] ?? 0;
  }
  if (!frame || !type) return null;
  const { voltageOut, voltageIn, powerOut, ...always } = frame;
  return {
    ...(type.measures !== 'input' ? { voltageOut } : {}),
    ...(type.measures !== 'output' ? { voltageIn } : {}),
    ...(type.kind === 'optimizing' ? { powerOut } : {}),
    ...always,
  };
}

const column = (n: number): (number | null)[] => new Array<number | null>(n).fill(null);

function emptyFrame(n: number): Required<Frame> {
  return {
    voltageOut: column(n),
    voltageIn: column(n),
    current: column(n),
    powerOut: column(n),
    temperature: column(n),
    signal: column(n),
    via: column(n),
    state: column(n),
  };
}

/** The error that one reading of an input carries, −0.5 … 0.5. */
const jitter = (key: number, atS: number, index: number) => uniform(mix(key, atS), index) - 0.5;

export function inputRows(site: SitePlant, logger: string): RowsOf<'inputs'> {
  const rows: RowsOf<'inputs'> = [];
  for (const inverter of site.inverters)
    inverter.inputs.forEach((input, k) => {
      if (!input.strings.some((s) => s.plan.logger === logger)) return;
      const key = mix(input.strings[0]?.key ?? 0, 9);
      const volts =
        (inverter.held[k] ?? 0) * (1 + 0.006 * (uniform(key, 0) - 0.5)) + jitter(key, site.atS, 1) * 0.4;
      const amps = input.current * (1 + 0.012 * (uniform(key, 2) - 0.5)) + jitter(key, site.atS, 3) * 0.02;
      rows.push({
        at: site.atS,
        inverter: inverter.plan.name,
        input: input.number,
        voltage: volts < INPUT_FLOOR ? 0 : Math.round(volts * 10),
        current: input.current === 0 ? 0 : Math.round(amps * 100),
      });
    });
  return rows;
}

export function inverterRows(site: SitePlant, logger: string): RowsOf<'inverters'> {
  return site.inverters
    .filter((i) => i.inputs.some((input) => input.strings.some((s) => s.plan.logger === logger)))
    .map((i) => ({
      at: site.atS,
      inverter: i.plan.name,
      acPower: i.acPower,
      energy: Math.round(i.energy),
      status: i.status,
      powerLimit: i.powerLimit,
      insulation: i.insulation,
      arcFlag: false,
      earthFaultFlag: i.earthFault,
    }));
}

export function weatherRows(site: SitePlant, logger: string): RowsOf<'weather'> {
  const sensors = site.plan.loggers.find((l) => l.serial === logger)?.sensors ?? [];
  return sensors.map((sensor) => {
    const irradiance = site.poaGlobal.get(sensor.plane ?? site.plan.planes[0]?.name ?? '') ?? 0;
    const string = site.strings.find((s) => s.plan.plane === sensor.plane) ?? site.strings[0];
    return {
      at: site.atS,
      sensor: sensor.number,
      irradiance: sensor.kind === 'ambient' ? null : Math.round(irradiance * 1.01),
      temperatureAir: Math.round(site.now.temperatureAir * 10),
      temperatureModule: string ? Math.round((site.cells.get(string) ?? 0) * 10 - 15) : null,
      windSpeed: Math.round(site.now.windSpeed * 10),
    };
  });
}
