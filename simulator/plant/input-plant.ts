import { largestPhotocurrent, moduleVoltage, settle, stringVoltage } from './curve';
import { PASSING, type StringPlant } from './string-plant';

/** Shares of the largest photocurrent at which curves are sampled: close together about the knee. */
const IN_FULL_LIGHT = [0, 0.86, 0.89, 0.91, 0.925, 0.94, 0.955, 0.97, 0.99];
const IN_SHADE = [0, 0.2, 0.4, 0.6, 0.75, 0.84, 0.88, 0.905, 0.925, 0.94, 0.955, 0.97, 0.985, 0.995];
/** What an optimizing unit keeps of its module's power. */
const OPTIMIZING_EFFICIENCY = 0.988;

/** Strings on one input. After a solution: V at the terminals, A in all, W. */
export class InputPlant {
  voltage = 0;
  current = 0;
  power = 0;

  private readonly curves: Float64Array[];
  private readonly shares: Float64Array[];
  /** How many of the samples hold for this moment. */
  private samples = 0;

  constructor(
    readonly inverter: string,
    readonly number: number,
    readonly strings: StringPlant[],
  ) {
    this.curves = strings.map(() => new Float64Array(IN_SHADE.length));
    this.shares = strings.map(() => new Float64Array(IN_SHADE.length));
  }

  /** Strings whose load-break switch is closed. */
  get connected(): StringPlant[] {
    return this.strings.some((s) => s.isolated) ? this.strings.filter((s) => !s.isolated) : this.strings;
  }

  get optimizing(): boolean {
    return this.strings[0]?.unitType.kind === 'optimizing';
  }

  /** No current: strings in parallel take the voltage of the highest, held back by nothing else. */
  openCircuit(): void {
    let highest = 0;
    for (const s of this.strings) {
      settle(s, 0);
      if (!s.isolated) highest = Math.max(highest, s.voltage);
    }
    this.voltage = highest;
    this.current = 0;
    this.power = 0;
  }

  /**
   * Finds the point of most power, as an inverter's tracker would, or the point above it where the input gives
   * no more than `limit` W.
   *
   * @param wobble relative error of the tracker's current
   */
  track(limit = Infinity, wobble = 0): void {
    const connected = this.connected;
    if (connected.length === 0) return this.openCircuit();
    for (const s of this.strings) if (s.isolated) settle(s, 0);
    if (this.optimizing) {
      this.trackOptimizing(limit);
      return;
    }
    this.sample();
    if (connected.length === 1) this.trackAlone(limit, wobble);
    else this.trackTogether(limit, wobble);
  }

  private finish(): void {
    let amps = 0;
    let volts = 0;
    for (const s of this.connected) {
      amps += s.current;
      volts += s.voltage - s.current * s.resistance;
    }
    this.current = amps;
    this.voltage = volts / this.connected.length;
    this.power = this.current * this.voltage;
  }

  private sample(): void {
    const uneven = this.connected.length > 1 || this.connected.some((s) => s.shadedGroups.some((g) => g > 0));
    const samples = uneven ? IN_SHADE : IN_FULL_LIGHT;
    this.samples = samples.length;
    for (let k = 0; k < this.connected.length; k++) {
      const s = this.connected[k]!;
      const amps = this.shares[k]!;
      const volts = this.curves[k]!;
      const most = largestPhotocurrent(s);
      for (let j = 0; j < samples.length; j++) {
        amps[j] = samples[j]! * most;
        volts[j] = stringVoltage(s, amps[j]!);
      }
    }
  }

  private trackAlone(limit: number, wobble: number): void {
    const s = this.connected[0]!;
    const amps = this.shares[0]!;
    const volts = this.curves[0]!;
    let best = 0;
    for (let j = 1; j < this.samples; j++) if (amps[j]! * volts[j]! > amps[best]! * volts[best]!) best = j;
    if (best === 0) return this.openCircuit();
    let current = peak(amps, volts, best, this.samples) * (1 + wobble);
    if (current * stringVoltage(s, current) > limit) {
      let low = 0;
      let high = current;
      for (let k = 0; k < 24; k++) {
        const middle = (low + high) / 2;
        if (middle * stringVoltage(s, middle) > limit) high = middle;
        else low = middle;
      }
      current = low;
    }
    settle(s, current);
    this.finish();
  }

  private currentAt(k: number, volts: number): number {
    const curve = this.curves[k]!;
    const amps = this.shares[k]!;
    if (volts >= curve[0]!) return 0;
    for (let j = 1; j < this.samples; j++)
      if (curve[j]! <= volts) {
        const span = curve[j - 1]! - curve[j]!;
        return amps[j - 1]! + ((amps[j]! - amps[j - 1]!) * (curve[j - 1]! - volts)) / span;
      }
    return amps[this.samples - 1]!;
  }

  private totalAt(volts: number): number {
    let amps = 0;
    for (let k = 0; k < this.connected.length; k++) amps += this.currentAt(k, volts);
    return amps;
  }

  private trackTogether(limit: number, wobble: number): void {
    let best = 0;
    let bestPower = 0;
    let highest = 0;
    for (const curve of this.curves) {
      highest = Math.max(highest, curve[0]!);
      for (const volts of curve.subarray(0, this.samples)) {
        const power = volts * this.totalAt(volts);
        if (power > bestPower) [best, bestPower] = [volts, power];
      }
    }
    if (bestPower <= 0) return this.openCircuit();
    const step = highest * 0.012;
    for (const volts of [best - step, best - step / 2, best + step / 2, best + step]) {
      const power = volts * this.totalAt(volts);
      if (power > bestPower) [best, bestPower] = [volts, power];
    }
    let volts = best * (1 - wobble);
    if (bestPower > limit) {
      let low = volts;
      let high = highest;
      for (let k = 0; k < 24; k++) {
        const middle = (low + high) / 2;
        if (middle * this.totalAt(middle) > limit) low = middle;
        else high = middle;
      }
      volts = high;
    }
    this.connected.forEach((s, k) => {
      settle(s, refine(s, volts, this.currentAt(k, volts)));
    });
    this.finish();
    this.voltage = volts;
    this.power = volts * this.current;
  }

  /**
   * Each unit finds its own module's best point; one current runs on the output side of a string. The inverter holds
   * the input at a voltage that every string of it can reach, and a string's current follows from its power.
   */
  private trackOptimizing(limit: number): void {
    const found = this.connected.map(bestOfEach);
    const total = found.reduce((sum, f) => sum + f.total, 0);
    if (!(total > 0)) return this.openCircuit();
    const kept = Math.min(1, limit / total);
    let volts = Infinity;
    found.forEach((f, k) => {
      // A unit lowers voltage and never raises it: the current must be at least the strongest module's.
      const least = f.amps * 1.03;
      if (f.total > 0) volts = Math.min(volts, f.total / least - least * this.connected[k]!.resistance);
    });
    this.connected.forEach((s, k) => {
      const { total: watts, powers } = found[k]!;
      const ohm = s.resistance;
      // watts = current · (volts + current · ohm)
      const current = (Math.sqrt(volts * volts + 4 * ohm * watts * kept) - volts) / (2 * ohm);
      if (!(watts > 0 && current > 0)) return settle(s, 0);
      s.current = current;
      s.voltage = 0;
      for (let i = 0; i < s.size; i++) {
        if (s.mode[i] === PASSING) s.voltageOut[i] = (powers[i]! * kept) / current;
        else {
          s.voltageOut[i] = s.bypassVoltage[i]!;
          s.voltageIn[i] = moduleVoltage(s, i, 0.01);
        }
        s.voltage += s.voltageOut[i]!;
      }
    });
    this.finish();
    if (this.connected.length > 1) {
      this.voltage = volts;
      this.power = volts * this.current;
    }
  }
}

/** What each optimizing unit of a string gets out of its module, W, their sum, and the strongest module's current, A. */
function bestOfEach(s: StringPlant): { powers: Float64Array; total: number; amps: number } {
  const powers = new Float64Array(s.size);
  let total = 0;
  let amps = 0;
  const knee = kneeShare(s);
  for (let i = 0; i < s.size; i++) {
    if (s.mode[i] !== PASSING) continue;
    let best = 0;
    for (const share of (s.shadedGroups[i] ?? 0) > 0 ? [0.04, 0.09, 0.2, 0.35, 0.5, 0.7, knee] : [knee]) {
      const at = share * (s.photocurrent[i] ?? 0);
      const volts = moduleVoltage(s, i, at);
      if (volts * at > best) {
        best = volts * at;
        s.voltageIn[i] = volts;
      }
    }
    powers[i] = best * OPTIMIZING_EFFICIENCY;
    total += powers[i]!;
    amps = Math.max(amps, best / Math.max(1, s.voltageIn[i]!));
  }
  return { powers, total, amps };
}

/** The current of most power by a parabola through the best sample and its neighbours. */
function peak(amps: Float64Array, volts: Float64Array, best: number, samples: number): number {
  const at = amps[best]!;
  if (best === 0 || best === samples - 1) return at;
  const left = at - amps[best - 1]!;
  const right = amps[best + 1]! - at;
  const power = at * volts[best]!;
  const up = (power - amps[best - 1]! * volts[best - 1]!) / left;
  const down = (amps[best + 1]! * volts[best + 1]! - power) / right;
  const curvature = (down - up) / (left + right);
  if (curvature >= 0) return at;
  const offset = -((up * right + down * left) / (left + right)) / (2 * curvature);
  return at + Math.max(-left / 2, Math.min(right / 2, offset));
}

/** Newton's steps to the current at which the string stands at `volts`. */
function refine(s: StringPlant, volts: number, guess: number): number {
  if (guess <= 0) return 0;
  let current = guess;
  for (let k = 0; k < 3; k++) {
    const v = stringVoltage(s, current);
    const rise = (stringVoltage(s, current * 1.001) - v) / (current * 0.001);
    if (!(rise < -0.01)) break;
    const next = current - (v - volts) / rise;
    if (!(next > 0) || Math.abs(next - current) > 0.2 * current) break;
    current = next;
  }
  return current;
}

/** Share of the photocurrent at the best point of the string's first whole module in full light. */
function kneeShare(s: StringPlant): number {
  let whole = 0;
  while (whole < s.size - 1 && ((s.shadedGroups[whole] ?? 0) > 0 || (s.shortedGroups[whole] ?? 0) > 0))
    whole++;
  const photo = s.photocurrent[whole] ?? 0;
  let best = 0.9;
  let most = 0;
  for (const share of [0.86, 0.89, 0.91, 0.925, 0.94, 0.95, 0.96]) {
    const power = share * photo * moduleVoltage(s, whole, share * photo);
    if (power > most) [best, most] = [share, power];
  }
  return best;
}
