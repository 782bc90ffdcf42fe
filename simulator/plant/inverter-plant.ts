import type { InverterStatus } from '../../src/domain/verdicts/codes';
import { uniform } from '../chance';
import { ofKind } from '../faults/book';
import type { Fault } from '../faults/kinds';
import { openVoltage } from './curve';
import type { InputPlant } from './input-plant';
import type { InverterPlan } from './plan';

/** V that an input needs before its tracker starts, and below which it lets go. */
const START_VOLTAGE = 150;
const STOP_VOLTAGE = 100;
/** Seconds of watching the grid before an inverter feeds in. */
const GRID_WATCH_S = 60;
/** After a longer step the watching is over. */
const LONG_STEP_S = 600;
/** Seconds in which the input's capacitors lose two thirds of their voltage. */
const DISCHARGE_S = 7;
/** Share of the rating below which it does not pay to run. */
const LEAST_SHARE = 0.004;

export class InverterPlant {
  status: InverterStatus = 'standby';
  /** W */
  acPower = 0;
  /** Wh, since it was put up. */
  energy: number;
  powerLimit: number | null = null;
  /** kohm */
  insulation = 2400;
  earthFault = false;
  /** V at each input's terminals, capacitors included. */
  readonly held: Float64Array;
  private readyAtS = NaN;
  private lastS = NaN;

  constructor(
    readonly plan: InverterPlan,
    readonly inputs: InputPlant[],
    private readonly key: number,
  ) {
    this.held = new Float64Array(inputs.length);
    this.energy = Math.round(plan.acPowerMax * (900 + 1400 * uniform(key, 0)));
  }

  /** Whether it is about to start: worth looking at second by second. */
  get starting(): boolean {
    return !Number.isNaN(this.readyAtS) && this.status !== 'running';
  }

  /** Solves the inputs for this moment; the units' modes and the light are set. */
  step(atS: number, faults: readonly Fault[], temperatureAir: number): void {
    const { acPowerMax, name } = this.plan;
    const elapsed = Number.isNaN(this.lastS) ? 0 : atS - this.lastS;
    this.energy += (this.acPower * elapsed) / 3600;
    this.lastS = atS;
    const gridLost = ofKind(faults, 'grid_lost').some((f) => f.inverter === name);
    const curtailed = ofKind(faults, 'curtailed').find((f) => f.inverter === name);
    this.earthFault = ofKind(faults, 'earth_fault').some((f) => f.inverter === name);
    this.insulation = this.earthFault
      ? 18
      : Math.round(2400 - 900 * uniform(this.key, Math.floor(atS / 7200)));
    const limit = Math.min(
      acPowerMax * (temperatureAir > 38 ? 1 - 0.02 * (temperatureAir - 38) : 1),
      acPowerMax * (curtailed?.share ?? 1),
    );
    this.powerLimit = curtailed ? Math.round(acPowerMax * curtailed.share) : null;

    const wasRunning = this.status === 'running' || this.status === 'curtailed' || this.status === 'derated';
    const able = !gridLost && !this.earthFault && this.mayRun(wasRunning);
    if (!able) {
      this.readyAtS = NaN;
      for (const input of this.inputs) input.openCircuit();
      this.acPower = 0;
      this.status = gridLost ? 'grid_lost' : this.earthFault ? 'fault' : 'standby';
    } else if (!wasRunning && elapsed > 0 && elapsed < LONG_STEP_S && !(atS >= this.readyAtS)) {
      if (Number.isNaN(this.readyAtS)) this.readyAtS = atS + GRID_WATCH_S;
      for (const input of this.inputs) input.openCircuit();
      this.acPower = 0;
      this.status = 'standby';
    } else {
      this.run(atS, limit, curtailed !== undefined, temperatureAir);
    }
    this.inputs.forEach((input, k) => {
      this.held[k] = Math.max(input.voltage, (this.held[k] ?? 0) * Math.exp(-elapsed / DISCHARGE_S));
    });
  }

  private mayRun(wasRunning: boolean): boolean {
    let available = 0;
    for (const input of this.inputs) {
      let highest = 0;
      let watts = 0;
      for (const s of input.connected) {
        const volts = openVoltage(s);
        highest = Math.max(highest, volts);
        watts += 0.75 * volts * (s.photocurrent[0] ?? 0);
      }
      input.voltage = highest;
      if (highest >= (wasRunning ? STOP_VOLTAGE : START_VOLTAGE)) available += watts;
    }
    return available > this.plan.acPowerMax * LEAST_SHARE * (wasRunning ? 0.7 : 1.3);
  }

  private run(atS: number, limit: number, curtailed: boolean, temperatureAir: number): void {
    this.readyAtS = NaN;
    const power = this.trackAll(atS, () => Infinity);
    let ac = this.toAc(power);
    this.status = 'running';
    if (ac > limit) {
      const share = limit / ac;
      ac = this.toAc(this.trackAll(atS, (k) => this.inputs[k]!.power * share));
      if (curtailed) this.status = 'curtailed';
      else if (temperatureAir > 38) this.status = 'derated';
    }
    this.acPower = Math.round(Math.min(ac, limit));
  }

  private trackAll(atS: number, limitOf: (k: number) => number): number {
    let power = 0;
    this.inputs.forEach((input, k) => {
      const limit = limitOf(k);
      // What it stands at from the step before: open circuit, or a tracked point below that.
      if (input.voltage < STOP_VOLTAGE) input.openCircuit();
      else input.track(limit, 0.004 * (uniform(this.key + k + 1, Math.floor(atS / 5)) - 0.5));
      power += input.power;
    });
    return power;
  }

  private toAc(dc: number): number {
    const { acPowerMax } = this.plan;
    return Math.max(0, 0.983 * dc - 0.0022 * acPowerMax - (0.007 * dc * dc) / acPowerMax);
  }
}
