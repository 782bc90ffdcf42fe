import { positive, within } from '../range';

/**
 * Table 690.7(A) of NFPA 70 (2017, 2020, 2023), crystalline and multicrystalline silicon: lowest temperature of each row
 * in °C and its factor. Known from pages that quote the standard, two of them transcribed independently and agreeing.
 */
const TABLE_690_7_A: readonly (readonly [fromC: number, factor: number])[] = [
  [25, 1],
  [20, 1.02],
  [15, 1.04],
  [10, 1.06],
  [5, 1.08],
  [0, 1.1],
  [-5, 1.12],
  [-10, 1.14],
  [-15, 1.16],
  [-20, 1.18],
  [-25, 1.2],
  [-30, 1.21],
  [-35, 1.23],
  [-40, 1.25],
];

/**
 * Voltage factor of Table 690.7(A) at the lowest expected temperature in °C (−90 to 60); a temperature between two rows
 * takes the colder one. null below −40 °C, where the table ends.
 */
export function coldVoltageFactor(temperatureMin: number): number | null {
  within('temperatureMin', temperatureMin, -90, 60, '°C');
  return TABLE_690_7_A.find(([from]) => temperatureMin >= from)?.[1] ?? null;
}

/**
 * A datasheet voltage at another cell temperature by its relative coefficient, V: NEC 690.7(A)(1) for voc at the lowest
 * expected ambient temperature.
 *
 * @param coefficient relative, 1/K, −0.02 to 0.01
 */
export function voltageAtTemperature(voltageRef: number, coefficient: number, temperature: number): number {
  positive('voltageRef', voltageRef, 1e5, 'V');
  within('coefficient', coefficient, -0.02, 0.01, '1/K');
  within('temperature', temperature, -90, 150, '°C');
  return voltageRef * (1 + coefficient * (temperature - 25));
}

export interface StringSizingInputs {
  /** V at STC */
  vocRef: number;
  vmpRef: number;
  /** Relative, 1/K, negative. */
  betaVoc: number;
  betaVmp: number;
  /** Lowest expected ambient, °C. */
  temperatureMin: number;
  /** Hottest cell, °C. */
  temperatureCellMax: number;
  /** Highest voltage that everything on the string may see, V. */
  voltageMax: number;
  /** Lower end of the inverter's MPPT window, V. */
  mpptMin: number;
}

export interface StringSizing {
  /** V of one module, coldest day, open circuit. */
  vocCold: number;
  /** V of one module, hottest day, at maximum power. */
  vmpHot: number;
  /** Most modules by the coefficient. */
  most: number;
  /** Fewest modules that keep the string in the MPPT window. */
  fewest: number;
  /** V, open circuit, coldest day, with the most modules. */
  vocStringCold: number;
  /** Factor of Table 690.7(A) and the most modules by it; null where the table ends. */
  tableFactor: number | null;
  mostByTable: number | null;
}

// a whole number of modules that fits exactly must not be lost to the last binary digit
const whole = { down: (x: number) => Math.floor(x + 1e-9), up: (x: number) => Math.ceil(x - 1e-9) };

/**
 * How many modules a series string may and must have: cold open-circuit voltage by NEC 690.7(A)(1) with Table 690.7(A)
 * beside it as a cross-check, hot voltage at maximum power against the MPPT window.
 *
 * @throws RangeError naming the parameter
 */
export function stringSizing(inputs: StringSizingInputs): StringSizing {
  const { vocRef, vmpRef, betaVoc, betaVmp, temperatureMin, temperatureCellMax } = inputs;
  positive('voltageMax', inputs.voltageMax, 1e5, 'V');
  within('mpptMin', inputs.mpptMin, 0, 1e5, 'V');
  const vocCold = voltageAtTemperature(vocRef, betaVoc, temperatureMin);
  const vmpHot = voltageAtTemperature(vmpRef, betaVmp, temperatureCellMax);
  if (vmpHot <= 0)
    throw new RangeError(`betaVmp ${betaVmp} 1/K leaves no voltage at ${temperatureCellMax} °C`);
  const tableFactor = coldVoltageFactor(temperatureMin);
  const most = whole.down(inputs.voltageMax / vocCold);
  return {
    vocCold,
    vmpHot,
    most,
    fewest: whole.up(inputs.mpptMin / vmpHot),
    vocStringCold: most * vocCold,
    tableFactor,
    mostByTable: tableFactor === null ? null : whole.down(inputs.voltageMax / (vocRef * tableFactor)),
  };
}

/** 690.8(A)(1): circuits are reckoned at 125 % of isc. */
const IRRADIANCE_FACTOR = 1.25;
/** 690.8(B)(1): conductors carry 125 % of that for hours. */
const CONTINUOUS_FACTOR = 1.25;

export interface CircuitCurrents {
  /** Largest current of the circuit, A: NEC 690.8(A)(1). */
  currentMax: number;
  /** What its conductors must carry before correction for temperature and bundling, A: NEC 690.8(B)(1). */
  conductorMin: number;
  /** Smallest rating of an overcurrent device, A: NEC 690.9(B), from memory. */
  overcurrentDeviceMin: number;
}

/** Design currents of `strings` like strings in parallel; iscRef in A. */
export function circuitCurrents(iscRef: number, strings = 1): CircuitCurrents {
  positive('iscRef', iscRef, 1000, 'A');
  within('strings', strings, 1, 1000, '');
  const currentMax = iscRef * strings * IRRADIANCE_FACTOR;
  return {
    currentMax,
    conductorMin: currentMax * CONTINUOUS_FACTOR,
    overcurrentDeviceMin: currentMax * CONTINUOUS_FACTOR,
  };
}

/** V that may remain after shutdown: NEC 690.12(B)(1) outside the array boundary, (B)(2) inside it. */
export const VOLTAGE_OUTSIDE_ARRAY = 30;
export const VOLTAGE_INSIDE_ARRAY = 80;

/** Most units a string may have so that all of them in shutdown stay within `limit` V: floor(limit/shutdownVoltage.max). */
export function mostUnitsInShutdown(shutdownVoltageMax: number, limit = VOLTAGE_OUTSIDE_ARRAY): number {
  positive('shutdownVoltageMax', shutdownVoltageMax, 100, 'V');
  positive('limit', limit, 1e5, 'V');
  return whole.down(limit / shutdownVoltageMax);
}
