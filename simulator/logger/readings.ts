import { FRAME_RANGES, type Frame, type FrameField, type LoggerMessage } from '../../src/schemas/ingest';
import { mix, smoothNoise, uniform } from '../chance';
import { ofKind } from '../faults/book';
import type { Fault } from '../faults/kinds';
import type { SitePlant, Seat } from '../plant/site-plant';
import { PASSING, SHUTDOWN, STARTING, UNPOWERED } from '../plant/string-plant';

/** What a logger can know of the plant: true values with meter errors, and nothing of units that it can't hear. */

type RowsOf<T extends LoggerMessage['type']> = Extract<LoggerMessage, { type: T; rows: unknown }>['rows'];
type Column = (number | null)[];

/** Below this many volts an inverter's own measurement reads nothing. */
const INPUT_FLOOR = 12;
const LOST_REPORTS = 0.004;

const whole = (field: FrameField, value: number): number => {
  const [low, high] = FRAME_RANGES[field];
  return Math.max(low, Math.min(high, Math.round(value)));
};

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
  const gateways = site.plan.loggers.find((l) => l.serial === string.plan.logger)?.gateways.length ?? 1;
  // The last gateway of a site with several stands by itself.
  if (gateways < 3 || own === gateways || uniform(mix(string.key, 31), index) > 0.05) return own;
  const other = own === 1 ? 2 : own - 1;
  return uniform(mix(string.key, Math.floor(site.atS / 1800)), index) < 0.3 ? other : own;
}

export const signalOf = ({ string, index }: Seat, atS: number): number =>
  whole('signal', (string.signal[index] ?? -70) + 2.5 * smoothNoise(mix(string.key, index), atS / 900));

const CLAIM = { [PASSING]: 1, [SHUTDOWN]: 2, [STARTING]: 3 } as Record<number, number>;

/** The errors that one report of one unit carries, −0.5 … 0.5 each. */
const jitter = (key: number, atS: number, index: number) => uniform(mix(key, atS), index) - 0.5;

/** A unit as its report gives it; null when nothing was heard. */
export function hears(site: SitePlant, radio: Radio, seat: Seat, serial: string, kept = false): boolean {
  const { string, index } = seat;
  if (string.mode[index] === UNPOWERED || !site.heard.has(serial) || radio.mute.has(serial)) return false;
  const gateway = gatewayOf(site, seat);
  if (kept ? !radio.keepingGateways.has(gateway) : radio.deadGateways.has(gateway)) return false;
  return uniform(mix(string.key, site.atS), 500 + index) > LOST_REPORTS;
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
  const column = (): Column => new Array<number | null>(n).fill(null);
  const frame: Required<Frame> = {
    voltageOut: column(),
    voltageIn: column(),
    current: column(),
    powerOut: column(),
    temperature: column(),
    signal: column(),
    via: column(),
    state: column(),
  };
  let measures: 'none' | 'input' | 'output' | 'both' = 'none';
  let power = false;
  let any = false;
  for (let k = 0; k < n; k++) {
    const serial = serials[k];
    const seat = serial ? site.seatOf(serial) : undefined;
    if (!serial || !seat || !hears(site, radio, seat, serial, kept)) continue;
    const { string: s, index: i } = seat;
    const type = s.unitType;
    if (type.kind === 'shutdown_only') continue;
    any = true;
    measures = type.measures;
    power ||= type.kind === 'optimizing';
    const key = mix(s.key, 2000 + i);
    const gain = s.voltageGain[i] ?? 1;
    const out = s.voltageOut[i] ?? 0;
    const amps = s.current;
    const lying = site.claimOf(s, i);
    frame.voltageOut[k] = whole('voltageOut', out * gain * 100 + 4 * jitter(key, site.atS, 0));
    frame.voltageIn[k] = whole(
      'voltageIn',
      (s.voltageIn[i] ?? 0) * gain * 100 + 4 * jitter(key, site.atS, 1),
    );
    frame.current[k] = whole('current', amps * 1000 * (s.currentGain[i] ?? 1) + 8 * jitter(key, site.atS, 2));
    frame.powerOut[k] = whole('powerOut', out * amps * gain * 10);
    frame.temperature[k] = whole(
      'temperature',
      ((s.temperature[i] ?? 20) - 2) * 10 + 4 * jitter(key, site.atS, 3),
    );
    frame.signal[k] = signalOf(seat, site.atS);
    frame.via[k] = gatewayOf(site, seat);
    frame.state[k] = lying ?? CLAIM[s.mode[i] ?? 0] ?? 0;
  }
  if (!any) return null;
  const { voltageOut, voltageIn, powerOut, ...always } = frame;
  return {
    ...(measures === 'output' || measures === 'both' ? { voltageOut } : {}),
    ...(measures === 'input' || measures === 'both' ? { voltageIn } : {}),
    ...(power ? { powerOut } : {}),
    ...always,
  };
}

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
