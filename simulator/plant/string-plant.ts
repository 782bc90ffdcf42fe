import type { ModuleType } from '../../src/domain/equipment/module-type';
import type { UnitType } from '../../src/domain/equipment/unit-type';
import { keyOf, mix, normalWithin, uniform } from '../chance';
import { typeNamed, type StringPlan } from './plan';

/** What a unit is really doing. Codes in `StringPlant.mode`. */
export const UNPOWERED = 0;
export const PASSING = 1;
export const SHUTDOWN = 2;
/** Released and testing itself: still at shutdown voltage. */
export const STARTING = 3;
export const NO_UNIT = 4;
export const MODES = ['unpowered', 'passing', 'shutdown', 'starting', 'no unit'] as const;
export type Mode = (typeof MODES)[number];

/** W/m² at which a module can just power its unit, and how far below it the unit lets go. */
const WAKE = 14;

/**
 * A string as it really hangs on the roof: each module with its own deviations, each unit with its own meter
 * errors and delays. Arrays run over the places in order of position.
 */
export class StringPlant {
  readonly size: number;
  /** Photocurrent over the datasheet's, at the same light. */
  readonly strength: Float64Array;
  readonly vocRef: Float64Array;
  readonly seriesResistance: Float64Array;
  /** K above the plane's cells at 1000 W/m². */
  readonly warmer: Float64Array;
  readonly shutdownVoltage: Float64Array;
  readonly bypassVoltage: Float64Array;
  readonly voltageGain: Float64Array;
  readonly currentGain: Float64Array;
  readonly wake: Float64Array;
  readonly signal: Float64Array;
  /** Serials of the units that really sit here, and whether the logger has heard each of them (1) yet. */
  readonly serials: (string | null)[];
  readonly heard: Uint8Array;
  readonly mode: Uint8Array;
  /** What the unit will turn to, and when (epoch seconds); NaN: nothing is pending. */
  readonly pendingMode: Uint8Array;
  readonly pendingAtS: Float64Array;
  /** Groups of cells without their share of the beam, and the share lost. */
  readonly shadedGroups: Uint8Array;
  readonly shadeLoss: Float64Array;
  /** Groups of cells that their diode shorts. */
  readonly shortedGroups: Uint8Array;
  /** Its load-break switch is open: no current, whatever its input does. */
  isolated = false;

  // ---- what the last solution found ----
  readonly irradiance: Float64Array;
  readonly temperature: Float64Array;
  readonly photocurrent: Float64Array;
  readonly voc: Float64Array;
  readonly voltageOut: Float64Array;
  readonly voltageIn: Float64Array;
  /** A, through the string. */
  current = 0;
  /** V, over the units, before cables. */
  voltage = 0;
  /** V over the thermal slope of all cells of one module, at this temperature. */
  slope = 1;
  /** Ohm in the path outside the modules: cables and connectors. */
  resistance: number;

  readonly moduleType: ModuleType;
  readonly unitType: UnitType;
  readonly slopeRef: number;
  readonly centreX: number;
  readonly centreY: number;
  readonly key: number;

  constructor(
    readonly plan: StringPlan,
    siteKey: string,
    seed: number,
    types: { modules: readonly ModuleType[]; units: readonly UnitType[] },
  ) {
    const n = plan.slots.length;
    this.size = n;
    this.key = mix(mix(seed, keyOf(siteKey)), keyOf(plan.name));
    this.moduleType = typeNamed(types.modules, plan.slots[0]?.moduleType ?? '');
    this.unitType = typeNamed(types.units, plan.unitType);
    const floats = () => new Float64Array(n);
    this.strength = floats();
    this.vocRef = floats();
    this.seriesResistance = floats();
    this.warmer = floats();
    this.shutdownVoltage = floats();
    this.bypassVoltage = floats();
    this.voltageGain = floats();
    this.currentGain = floats();
    this.wake = floats();
    this.signal = floats();
    this.irradiance = floats();
    this.temperature = floats();
    this.photocurrent = floats();
    this.voc = floats();
    this.voltageOut = floats();
    this.voltageIn = floats();
    this.shadeLoss = floats();
    this.pendingAtS = floats().fill(NaN);
    this.serials = plan.slots.map((slot) => slot.serial);
    this.heard = new Uint8Array(n);
    this.mode = new Uint8Array(n);
    this.pendingMode = new Uint8Array(n);
    this.shadedGroups = new Uint8Array(n);
    this.shortedGroups = new Uint8Array(n);
    // Connectors: two milliohms a pair, one more pair than units; not on the drawing.
    this.resistance = plan.cableResistance + 0.002 * (n + 1) * (0.8 + 0.4 * uniform(this.key, 1));

    const { vocRef, iscRef, vmpRef, impRef } = this.moduleType;
    // Two conditions at the maximum power point give slope and series resistance of the explicit curve
    // V(I) = voc + slope·ln(1 − I/isc) − I·Rs.
    this.slopeRef = (2 * vmpRef - vocRef) / (Math.log(1 - impRef / iscRef) + impRef / (iscRef - impRef));
    const rs = Math.max(0.02, vmpRef / impRef - this.slopeRef / (iscRef - impRef));
    const { shutdownVoltage, bypassVoltage, voltageAccuracy, currentAccuracy } = this.unitType;
    let x = 0;
    let y = 0;
    plan.slots.forEach((slot, i) => {
      const chance = mix(this.key, 1000 + i);
      const draw = (index: number) => normalWithin(chance, index, 2.5);
      this.strength[i] = 1 + 0.007 * draw(0);
      this.vocRef[i] = vocRef * (1 + 0.004 * draw(1));
      this.seriesResistance[i] = rs * (1 + 0.08 * draw(2));
      // The ends of a row run cooler than its middle.
      this.warmer[i] = 0.9 * draw(3) - 1.5 * Math.exp(-Math.min(i, n - 1 - i));
      const spread = draw(4) / 2.5;
      this.shutdownVoltage[i] =
        shutdownVoltage.nominal +
        spread *
          (spread > 0
            ? shutdownVoltage.max - shutdownVoltage.nominal
            : shutdownVoltage.nominal - shutdownVoltage.min);
      this.bypassVoltage[i] = bypassVoltage * (1 + 0.1 * draw(5));
      this.voltageGain[i] = 1 + 0.4 * voltageAccuracy * draw(6);
      this.currentGain[i] = 1 + 0.4 * currentAccuracy * draw(7);
      this.wake[i] = WAKE * (1 + 0.15 * draw(8));
      this.signal[i] = -68 + 7 * draw(9);
      this.mode[i] = slot.serial === null ? NO_UNIT : UNPOWERED;
      x += slot.roofX / n;
      y += slot.roofY / n;
    });
    this.centreX = x;
    this.centreY = y;
  }
}
