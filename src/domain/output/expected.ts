import type { ModuleType } from '../equipment/module-type';
import { vocOf } from '../photovoltaics/module/open-circuit';
import { temperatureCellNoct } from '../photovoltaics/temperature/cell';
import { median, sigmaMad } from './robust';

/** What one passing unit of a string should give now. Volts; irradiance in W/m², temperatures in °C. */

export interface ExpectedInput {
  module: ModuleType;
  /** String current flows: the module works near its maximum power point, else it stands at voc. */
  underLoad: boolean;
  /** Typical voltage of a passing unit, one figure for each other string of the same plane and module type. */
  otherStrings: readonly number[];
  /** Voltages of the passing units of the string itself. */
  ownUnits: readonly number[];
  /** Irradiance in the plane: measured, and of a clear sky; null: no sensor. */
  poaMeasured: number | null;
  poaClear: number;
  temperatureCellMeasured: number | null;
  temperatureAir: number | null;
}

export type ExpectedFrom = 'other_strings' | 'own_units' | 'sensor' | 'clear_sky';
export interface Expected {
  /** V a module */
  voltage: number;
  /** Relative standard deviation of a whole string of such modules. */
  relativeSd: number;
  from: ExpectedFrom;
  /** Strings that it was learned from; 0: it comes from elsewhere. */
  strings: number;
}

/** Fewer siblings than this have no spread worth computing. */
export const SIBLINGS_FOR_SPREAD = 5;
/** Own units, fewer than which say nothing of what is usual. */
const OWN_UNITS_MIN = 3;
/** Under this, W/m², a module is too dark for its voltage to be foretold. */
const POA_MIN = 30;
/** Relative standard deviations; from experience, wide on purpose. */
const SD = { fewSiblings: 0.03, ownUnits: 0.04, sensor: 0.04, clearSky: 0.07, floor: 0.012 } as const;
/** Air temperature where nothing measures it, °C: a day of no season. */
const AIR_UNKNOWN = 15;
/** Of a clear sky's light, what clouds leave on an ordinary day: the voltage depends on it by its logarithm only. */
const CLOUD_SHARE = 0.6;

/**
 * The expectation and where it comes from, the most direct first: other strings of the plane, the string's own
 * passing units, the datasheet under a measured irradiance, the datasheet under a clear sky. Spread over at least five
 * siblings from the median absolute deviation (× 1.4826: Iglewicz & Hoaglin 1993), else a fixed wide one. Null while
 * there is too little light to say.
 */
export function expectedModule(input: ExpectedInput): Expected | null {
  const { otherStrings, ownUnits } = input;
  const ofOthers = otherStrings.length > 0 ? median(otherStrings) : 0;
  if (ofOthers > 0) {
    const relativeSd =
      otherStrings.length >= SIBLINGS_FOR_SPREAD
        ? Math.max(SD.floor, sigmaMad(otherStrings) / ofOthers)
        : SD.fewSiblings;
    return { voltage: ofOthers, relativeSd, from: 'other_strings', strings: otherStrings.length };
  }
  const ofOwn = ownUnits.length >= OWN_UNITS_MIN ? median(ownUnits) : 0;
  if (ofOwn > 0) return { voltage: ofOwn, relativeSd: SD.ownUnits, from: 'own_units', strings: 0 };
  const measured = input.poaMeasured;
  if (measured !== null && measured >= POA_MIN)
    return { voltage: moduleVoltage(input, measured), relativeSd: SD.sensor, from: 'sensor', strings: 0 };
  if (measured === null && input.poaClear >= POA_MIN)
    return {
      voltage: moduleVoltage(input, Math.max(POA_MIN, input.poaClear * CLOUD_SHARE)),
      relativeSd: SD.clearSky,
      from: 'clear_sky',
      strings: 0,
    };
  return null;
}

/** A module's voltage by its datasheet: voc, or under load voc's share that the datasheet gives vmp at STC. */
export function moduleVoltage(
  input: Pick<ExpectedInput, 'module' | 'underLoad' | 'temperatureCellMeasured' | 'temperatureAir'>,
  poa: number,
): number {
  const light = Math.min(1500, Math.max(1, poa));
  const cell =
    input.temperatureCellMeasured ??
    temperatureCellNoct(light, input.temperatureAir ?? AIR_UNKNOWN, input.module.noct);
  const voc = vocOf(input.module, light, Math.min(100, Math.max(-40, cell)));
  return input.underLoad ? (voc * input.module.vmpRef) / input.module.vocRef : voc;
}

/** Nine times in ten the string lies between these, for `units` passing modules. */
export function expectedBand(
  expected: Pick<Expected, 'voltage' | 'relativeSd'>,
  units: number,
): [number, number] {
  const total = expected.voltage * units;
  const half = 1.645 * expected.relativeSd * total;
  return [total - half, total + half];
}
