import type { InForce } from '../src/domain/verdicts/codes';
import type { FaultEntry } from './faults/book';
import type { SitePlant } from './plant/site-plant';
import { MODES, type Mode } from './plant/string-plant';

/** What is true of a plant, for people and tests who want to compare it with what Wakeline concludes. SI units. */
export interface UnitTruth {
  /** As the drawing has it. */
  string: string;
  position: number;
  serial: string;
  /** Where it really sits; differs from the drawing when two were swapped. */
  seat: { string: string; position: number };
  mode: Mode;
  heard: boolean;
  /** V, over the unit's output and over its module. */
  voltageOut: number;
  voltageIn: number;
  /** A, through the string in which it sits. */
  current: number;
  /** W/m², on its module. */
  irradiance: number;
}
export interface StringTruth {
  name: string;
  /** V, sum over the units. */
  voltage: number;
  /** V, at the inverter's end: what a meter there would read; capacitors may hold it up. */
  homeRun: number;
  current: number;
}
export interface SiteTruth {
  site: string;
  key: string;
  /** Epoch seconds. */
  at: number;
  /** Degrees. */
  sunElevation: number;
  initiators: { name: string; open: boolean; since: number; by: string }[];
  zones: { name: string; inForce: InForce; since: number }[];
  transmitters: { name: string; inForce: InForce; since: number }[];
  faults: FaultEntry[];
  strings: StringTruth[];
  units: UnitTruth[];
  inverters: { name: string; status: string; acPower: number }[];
  loggers: {
    serial: string;
    connected: boolean;
    waiting: number;
    listening: boolean;
    fault: string | null;
  }[];
}

const volts = (n: number) => Math.round(n * 1000) / 1000;

export function truthOf(plant: SitePlant, loggers: SiteTruth['loggers']): SiteTruth {
  const { commands, plan } = plant;
  return {
    site: plan.name,
    key: plan.key,
    at: plant.atS,
    sunElevation: volts(plant.now.elevation),
    initiators: [...commands.initiators].map(([name, i]) => ({ name, ...i })),
    zones: [...commands.zones].map(([name, { inForce, since }]) => ({ name, inForce, since })),
    transmitters: [...commands.transmitters].map(([name, { inForce, since }]) => ({ name, inForce, since })),
    faults: plant.faults.inForce(plant.atS),
    strings: plant.strings.map((s) => {
      const inverter = plant.inverters.find((i) => i.plan.name === s.plan.inverter);
      const k = inverter?.inputs.findIndex((input) => input.number === s.plan.input) ?? -1;
      return {
        name: s.plan.name,
        voltage: volts(s.voltage),
        homeRun: volts(inverter?.held[k] ?? s.voltage),
        current: volts(s.current),
      };
    }),
    units: plan.strings.flatMap((drawn) =>
      drawn.slots.flatMap((slot, i) => {
        const there = plan.strangers.find((x) => x.seat?.string === drawn.name && x.seat.position === i + 1);
        const serial = there?.serial ?? slot.serial;
        const seat = serial === null ? undefined : plant.seatOf(serial);
        if (serial === null || !seat) return [];
        const { string: s, index } = seat;
        return [
          {
            string: drawn.name,
            position: i + 1,
            serial,
            seat: { string: s.plan.name, position: index + 1 },
            mode: MODES[s.mode[index] ?? 0] ?? 'unpowered',
            heard: s.heard[index] === 1,
            voltageOut: volts(s.voltageOut[index] ?? 0),
            voltageIn: volts(s.voltageIn[index] ?? 0),
            current: volts(s.current),
            irradiance: volts(s.irradiance[index] ?? 0),
          },
        ];
      }),
    ),
    inverters: plant.inverters.map((i) => ({ name: i.plan.name, status: i.status, acPower: i.acPower })),
    loggers,
  };
}
