import type { Frame } from '../../src/schemas/ingest';
import { arrayField, instant } from './copy';

export const QUARTER_S = 900;

/** A string's quarter of an hour while it fills. Voltages cV, energy dW·min. */
export interface Quarter {
  atS: number;
  frames: number;
  voltageSum: number;
  voltageMin: number;
  voltageMax: number;
  energy: number;
  units: UnitSums | null;
}
interface UnitSums {
  reports: Float64Array;
  voltage: Float64Array;
  current: Float64Array;
  energy: Float64Array;
  hottest: Int16Array;
}

const empty = (atS: number, units: number): Quarter => ({
  atS,
  frames: 0,
  voltageSum: 0,
  voltageMin: Infinity,
  voltageMax: -Infinity,
  energy: 0,
  units:
    units === 0
      ? null
      : {
          reports: new Float64Array(units),
          voltage: new Float64Array(units),
          current: new Float64Array(units),
          energy: new Float64Array(units),
          hottest: new Int16Array(units).fill(-600),
        },
});

/** What a site's local days come to, string by string; figures as in `string_day`. */
export interface DayTotals {
  frames: number;
  energy: number; // Wh
  voltageSum: number;
  voltageQuarters: number;
  voltageMax: number;
  units: Float64Array | null; // Wh
}

/** Gathers frames of one string into quarters and days. */
export class StringRollUp {
  private quarter: Quarter | null = null;
  readonly days = new Map<string, DayTotals>();

  constructor(
    private readonly stringId: number,
    private readonly units: number,
    private readonly localDay: (atS: number) => string,
    private readonly write: (line: string) => void,
  ) {}

  add(atS: number, minutes: number, voltage: number, power: number, frame: Frame | null): void {
    const start = Math.floor(atS / QUARTER_S) * QUARTER_S;
    if (this.quarter?.atS !== start) {
      this.close();
      this.quarter = empty(start, frame ? this.units : 0);
    }
    const q = this.quarter;
    if (!q) return;
    q.frames += minutes;
    q.voltageSum += voltage * minutes;
    q.voltageMin = Math.min(q.voltageMin, voltage);
    q.voltageMax = Math.max(q.voltageMax, voltage);
    q.energy += power * minutes;
    if (!frame || !q.units) return;
    const side = frame.voltageOut ?? frame.voltageIn;
    const u = q.units;
    for (let i = 0; i < this.units; i++) {
      const volts = side?.[i];
      const amps = frame.current[i];
      if (volts === null || volts === undefined || amps === null || amps === undefined) continue;
      u.reports[i]! += 1;
      u.voltage[i]! += volts;
      u.current[i]! += amps;
      u.energy[i]! += (frame.powerOut?.[i] ?? (volts * amps) / 10_000) * minutes;
      u.hottest[i] = Math.max(u.hottest[i]!, frame.temperature[i] ?? -600);
    }
  }

  close(): void {
    const q = this.quarter;
    this.quarter = null;
    if (!q || q.frames === 0) return;
    const average = Math.round(q.voltageSum / q.frames);
    const of = (sums: Float64Array) => {
      const { reports } = q.units!;
      return Array.from(sums, (s, i) => (reports[i]! > 0 ? Math.round(s / reports[i]!) : null));
    };
    const arrays = q.units
      ? [
          arrayField(of(q.units.voltage)),
          arrayField(of(q.units.current)),
          arrayField(Array.from(q.units.energy, Math.round)),
          arrayField(Array.from(q.units.hottest, (t) => (t === -600 ? null : t))),
        ].join('\t')
      : '\\N\t\\N\t\\N\t\\N';
    this.write(
      `${instant(q.atS)}\t${this.stringId}\t${q.frames}\t${average}\t${q.voltageMin}\t${q.voltageMax}\t${Math.round(q.energy)}\t${arrays}`,
    );
    this.addToDay(q, average);
  }

  private addToDay(q: Quarter, average: number): void {
    const day = this.localDay(q.atS);
    const total = this.days.get(day) ?? {
      frames: 0,
      energy: 0,
      voltageSum: 0,
      voltageQuarters: 0,
      voltageMax: 0,
      units: null,
    };
    this.days.set(day, total);
    total.frames += q.frames;
    total.energy += q.energy / 600;
    if (q.energy > 0) {
      total.voltageSum += average;
      total.voltageQuarters += 1;
    }
    total.voltageMax = Math.max(total.voltageMax, q.voltageMax);
    if (!q.units) return;
    total.units ??= new Float64Array(this.units);
    for (let i = 0; i < this.units; i++) total.units[i]! += q.units.energy[i]! / 600;
  }
}

export const QUARTER_COLUMNS = [
  'at',
  'string_id',
  'frames',
  'voltage_avg',
  'voltage_min',
  'voltage_max',
  'energy',
  'unit_voltage',
  'unit_current',
  'unit_energy',
  'unit_temperature_max',
];

/** Local dates of a time zone; a day's answer is kept, since callers ask in order of time. */
export function localDays(timeZone: string): (atS: number) => string {
  const format = new Intl.DateTimeFormat('en-CA', {
    timeZone,
    year: 'numeric',
    month: '2-digit',
    day: '2-digit',
  });
  let from = NaN;
  let day = '';
  return (atS) => {
    const quarter = Math.floor(atS / QUARTER_S);
    if (quarter !== from) [from, day] = [quarter, format.format(atS * 1000)];
    return day;
  };
}
