import type { Roster } from '../../src/schemas/ingest';
import type { SitePlant } from '../plant/site-plant';
import type { StringPlant } from '../plant/string-plant';
import { hears, radioOf } from './readings';
import type { Unnumbered } from './outbox';

type TraceMessage = Extract<Unnumbered, { type: 'trace' }>;

/** Seconds that a logger watches after a command. */
export const TRACE_S = 120;
/** V */
const INPUT_ACCURACY = 3;

interface Running {
  index: number;
  string: StringPlant;
  serials: readonly (string | null)[];
  startedS: number;
  voltages: (number | null)[];
  /** By second and slot; null where units tell nothing. */
  units: (number | null)[][] | null;
}

/** Second-by-second voltages of the strings that a command concerns, from the command on. */
export class Traces {
  private running: Running[] = [];

  constructor(
    private readonly site: SitePlant,
    private readonly logger: string,
  ) {}

  get active(): boolean {
    return this.running.length > 0;
  }

  /** A command came at `atS`: watches these strings of the roster from now on. */
  begin(roster: Roster, names: ReadonlySet<string>, atS: number): void {
    this.running = this.running.filter((r) => !names.has(r.string.plan.name));
    for (const entry of roster.strings) {
      const string = this.site.byName.get(entry.name);
      if (!string || !names.has(entry.name)) continue;
      const watch = { index: entry.index, string, serials: entry.serials, startedS: atS };
      if (string.unitType.kind !== 'shutdown_only') this.running.push({ ...watch, voltages: [], units: [] });
      // An input that several strings share says nothing of one of them.
      if (this.aloneOnInput(string)) this.running.push({ ...watch, voltages: [], units: null });
    }
  }

  /** Takes the value of this second; call once a second after the site's step. */
  sample(atS: number): void {
    const radio = radioOf(this.site, this.logger);
    for (const r of this.running) {
      if (r.voltages.length > atS - r.startedS) continue;
      if (r.units) {
        const seats = this.site.seatsOf(r.serials);
        const row = seats.map((seat) =>
          seat && hears(this.site, radio, seat)
            ? Math.round(
                (seat.string.voltageOut[seat.index] ?? 0) * 100 * (seat.string.voltageGain[seat.index] ?? 1),
              )
            : null,
        );
        r.units.push(row);
        const known = row.filter((v) => v !== null);
        // A sum that leaves units out says nothing about the string.
        const whole = known.length === r.serials.filter((s) => s !== null).length;
        r.voltages.push(whole ? Math.round(known.reduce((a, b) => a + b, 0) / 10) : null);
      } else r.voltages.push(this.inputVoltage(r.string));
    }
  }

  private aloneOnInput(s: StringPlant): boolean {
    return this.site.inputs.some((i) => i.strings.length === 1 && i.strings[0] === s);
  }

  private inputVoltage(s: StringPlant): number {
    const inverter = this.site.inverters.find((i) => i.plan.name === s.plan.inverter);
    const k = inverter?.inputs.findIndex((input) => input.number === s.plan.input) ?? -1;
    return Math.round((inverter?.held[k] ?? 0) * 10);
  }

  /** The traces that are due as far as they go: often while much happens, then less; ended ones are dropped. */
  messages(atS: number): TraceMessage[] {
    const stepS = this.running.length > 40 ? 4 : 2;
    const due = this.running.filter((r) => {
      const elapsed = atS - r.startedS;
      return (
        r.voltages.length > 0 &&
        (elapsed <= 40 ? elapsed % stepS === 0 : elapsed % 20 === 0 || elapsed >= TRACE_S)
      );
    });
    this.running = this.running.filter((r) => atS - r.startedS < TRACE_S);
    return due.map((r) => ({
      type: 'trace',
      string: r.index,
      startedAt: r.startedS,
      measuringPoint: r.units ? 'unit_sum' : 'input',
      accuracy: r.units
        ? Math.round(r.string.size * r.string.moduleType.vocRef * r.string.unitType.voltageAccuracy * 10) / 10
        : INPUT_ACCURACY,
      voltage: r.voltages.slice(0, 300),
      ...(r.units ? { unitVoltage: r.units.slice(0, 300) } : {}),
    }));
  }
}
