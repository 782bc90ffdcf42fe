import { keyOf, mix, uniform } from '../chance';
import type { SitePlant } from '../plant/site-plant';
import { UNPOWERED } from '../plant/string-plant';
import { fadeOf, gatewayOf, radioOf, signalOf } from './readings';
import type { Unnumbered } from './outbox';

type HeardRows = Extract<Unnumbered, { type: 'heard' }>['rows'];

/** Of a hundred units, how many take very long. */
const STRAGGLERS = 0.08;

/**
 * A logger listening for units that it has not heard. Each answers after a time of its own: most within some
 * minutes, the weak ones later, a few much later.
 */
export class RollCall {
  private startedS = NaN;
  private readonly expected = new Map<string, number>();

  /** @param pace how many times faster than in life units answer */
  constructor(
    private readonly site: SitePlant,
    private readonly logger: string,
    private readonly pace: number,
  ) {}

  get listening(): boolean {
    return !Number.isNaN(this.startedS);
  }

  listen(on: boolean, atS: number): void {
    if (on === this.listening) return;
    this.startedS = on ? atS : NaN;
    this.expected.clear();
    if (!on) return;
    for (const s of this.site.plan.strings) {
      if (s.logger !== this.logger || s.kind === 'shutdown_only') continue;
      for (const { serial } of s.slots)
        if (serial !== null && !this.site.heard.has(serial))
          this.expected.set(serial, atS + this.delay(serial));
    }
    for (const stranger of this.site.plan.strangers)
      if (stranger.logger === this.logger && !this.site.heard.has(stranger.serial))
        this.expected.set(stranger.serial, atS + (60 + 240 * this.draw(stranger.serial, 3)) / this.pace);
  }

  private draw(serial: string, index: number): number {
    return uniform(mix(keyOf(serial), this.site.seed), index);
  }

  private delay(serial: string): number {
    const seat = this.site.seatOf(serial);
    const signal = seat?.string.signal[seat.index] ?? -70;
    const weak = 1 + Math.max(0, -signal - 65) / 12;
    const seconds =
      this.draw(serial, 0) < STRAGGLERS
        ? 900 + 2700 * this.draw(serial, 1)
        : 8 - 170 * weak * Math.log(1 - 0.97 * this.draw(serial, 2));
    return seconds / this.pace;
  }

  /** Those that answer by `atS`; from now on they follow the command in force. */
  answers(atS: number): HeardRows {
    if (!this.listening) return [];
    const rows: HeardRows = [];
    const radio = radioOf(this.site, this.logger);
    for (const [serial, dueS] of this.expected) {
      if (dueS > atS) continue;
      const seat = this.site.seatOf(serial);
      if (!seat) {
        // a serial of the drawing that sits nowhere never answers
        if (this.site.plan.strangers.some((s) => s.serial === serial)) rows.push(this.stranger(serial, atS));
        this.expected.delete(serial);
        continue;
      }
      const gateway = gatewayOf(this.site, seat);
      const { string: s, index } = seat;
      if (s.mode[index] === UNPOWERED || radio.mute.has(serial) || radio.deadGateways.has(gateway)) continue;
      this.expected.delete(serial);
      this.site.hear(serial);
      rows.push({
        at: atS,
        serial,
        gateway,
        signal: signalOf(seat, fadeOf(s, atS), mix(s.key, atS)),
        voltage: Math.round((s.voltageOut[index] ?? 0) * 100),
        current: Math.round(s.current * 1000),
      });
    }
    return rows;
  }

  private stranger(serial: string, atS: number): HeardRows[number] {
    const gateway = this.site.plan.strangers.find((s) => s.serial === serial)?.gateway ?? 1;
    return {
      at: atS,
      serial,
      gateway,
      signal: Math.round(-56 - 12 * this.draw(serial, 4)),
      voltage: Math.round(4050 + 200 * this.draw(serial, 5)),
      current: 0,
    };
  }
}
