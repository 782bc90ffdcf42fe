import { within } from '../range';

export interface DesignTemperature {
  /** °C of the air. */
  value: number;
  from: 'entered' | 'estimated';
}
export interface DesignTemperatures {
  coldest: DesignTemperature;
  hottest: DesignTemperature;
}

/** Degrees of latitude and °C at sea level: coldest expected and hottest. Own rule, from experience, on the wide side. */
const BY_LATITUDE: readonly (readonly [latitude: number, coldest: number, hottest: number])[] = [
  [0, 14, 40],
  [15, 8, 46],
  [25, -2, 49],
  [35, -14, 48],
  [45, -30, 44],
  [55, -38, 40],
  [65, -45, 35],
  [90, -58, 30],
];
/** K per metre of altitude (the standard atmosphere's). */
const LAPSE = -0.0065;

/**
 * Design temperatures of a place from latitude and altitude alone: an estimate on the wide side, good for finding what
 * certainly holds, never for showing that a limit is exceeded. NEC 690.7 names ASHRAE's extreme annual mean minimum as
 * one source for the real figure.
 *
 * @param latitude °, −90 to 90
 * @param altitude m, −450 to 6000
 */
export function estimatedTemperatures(
  latitude: number,
  altitude: number,
): { coldest: number; hottest: number } {
  within('latitude', latitude, -90, 90, '°');
  within('altitude', altitude, -450, 6000, 'm');
  const size = Math.abs(latitude);
  const at = Math.max(
    1,
    BY_LATITUDE.findIndex(([from]) => from >= size),
  );
  const [low, high] = [BY_LATITUDE[at - 1]!, BY_LATITUDE[at]!];
  const share = (size - low[0]) / (high[0] - low[0]);
  const level = (column: 1 | 2) => low[column] + share * (high[column] - low[column]) + LAPSE * altitude;
  const bounded = (value: number, min: number, max: number) =>
    Math.round(Math.min(max, Math.max(min, value)));
  return { coldest: bounded(level(1), -60, 20), hottest: bounded(level(2), 15, 55) };
}

/** A site's own design temperatures, and estimates where it has none. */
export function designTemperatures(site: {
  latitude: number;
  altitude: number;
  temperatureMin: number | null;
  temperatureMax: number | null;
}): DesignTemperatures {
  const estimate = estimatedTemperatures(site.latitude, site.altitude);
  const of = (entered: number | null, estimated: number): DesignTemperature =>
    entered === null ? { value: estimated, from: 'estimated' } : { value: entered, from: 'entered' };
  return {
    coldest: of(site.temperatureMin, estimate.coldest),
    hottest: of(site.temperatureMax, estimate.hottest),
  };
}
