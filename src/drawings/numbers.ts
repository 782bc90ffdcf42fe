import { COUNTS, isOne, lists, LOCALE, pluralOf } from '../words/language';

/**
 * How numbers are written, on screen, in mail and in reports: thousands with a comma, a real minus sign, a
 * space that does not break before the unit, a dash for what is not known.
 */
const NBSP = '\u00a0';
export const UNKNOWN = '–';

const formats = new Map<number, Intl.NumberFormat>();
function format(digits: number): Intl.NumberFormat {
  let found = formats.get(digits);
  if (!found) {
    found = new Intl.NumberFormat(LOCALE, { minimumFractionDigits: digits, maximumFractionDigits: digits });
    formats.set(digits, found);
  }
  return found;
}

type Value = number | null | undefined;
const known = (value: Value): value is number =>
  value !== null && value !== undefined && Number.isFinite(value);

/** A plain number with `digits` decimals; never "−0". */
export function number(value: Value, digits = 0): string {
  if (!known(value)) return UNKNOWN;
  const text = format(digits).format(Math.abs(value));
  return value < 0 && /[1-9]/.test(text) ? `−${text}` : text;
}

/** A number and its unit, which stay on one line. */
export const quantity = (value: Value, unit: string, digits = 0): string =>
  known(value) ? `${number(value, digits)}${NBSP}${unit}` : UNKNOWN;

/** Three significant figures at most, so that a figure does not promise more than it knows. */
function scaled(value: Value, steps: readonly (readonly [number, string])[]): string {
  if (!known(value)) return UNKNOWN;
  const size = Math.abs(value);
  const step = steps.find(([from]) => size >= from * 0.9995) ?? steps[steps.length - 1];
  if (!step) return UNKNOWN;
  const inUnit = value / step[0];
  const digits = step[0] === 1 || Math.abs(inUnit) >= 99.95 ? 0 : 1;
  return quantity(inUnit, step[1], digits);
}

const POWER = [
  [1e6, 'MW'],
  [1e3, 'kW'],
  [1, 'W'],
] as const;
const ENERGY = [
  [1e9, 'GWh'],
  [1e6, 'MWh'],
  [1e3, 'kWh'],
  [1, 'Wh'],
] as const;
/** W, kW or MW from watts. */
export const power = (watts: Value): string => scaled(watts, POWER);
/** Wh, kWh, MWh or GWh from watt-hours. */
export const energy = (wattHours: Value): string => scaled(wattHours, ENERGY);
/** Volts: one decimal below 20 V, where one unit in shutdown (0.6 V) counts. */
export const volts = (value: Value): string =>
  quantity(value, 'V', known(value) && Math.abs(value) < 20 ? 1 : 0);
export const amperes = (value: Value): string =>
  quantity(value, 'A', known(value) && Math.abs(value) < 2 ? 2 : 1);
/** How temperatures are read; what is stored, computed and exchanged stays in °C. */
export type TemperatureUnit = 'metric' | 'imperial';
/** In a browser the page says it; a server names whose page it is making. */
let readersUnit = (): TemperatureUnit =>
  globalThis.document?.documentElement.dataset.units === 'imperial' ? 'imperial' : 'metric';
export const readTemperaturesBy = (unit: () => TemperatureUnit): void => {
  readersUnit = unit;
};
/** A temperature in °C, as the reader's organisation reads them. */
export const celsius = (value: Value, digits = 0): string =>
  readersUnit() === 'imperial'
    ? quantity(known(value) ? value * 1.8 + 32 : null, '°F', digits)
    : quantity(value, '°C', digits);
export const decibelMilliwatts = (value: Value): string => quantity(value, 'dBm');
export const irradiance = (value: Value): string => quantity(value, 'W/m²');
const moneyFormats = new Map<string, Intl.NumberFormat>();
function moneyFormat(currency: string, whole: boolean): Intl.NumberFormat {
  const key = `${currency}${whole ? '' : '.'}`;
  let found = moneyFormats.get(key);
  if (!found) {
    found = new Intl.NumberFormat(LOCALE, {
      style: 'currency',
      currency,
      currencyDisplay: 'narrowSymbol',
      ...(whole ? { maximumFractionDigits: 0 } : {}),
    });
    moneyFormats.set(key, found);
  }
  return found;
}
/** Money in a currency of ISO 4217: whole units from a hundred up, smaller sums with their parts. */
export function money(value: Value, currency: string): string {
  if (!known(value)) return UNKNOWN;
  const text = moneyFormat(currency, Math.abs(value) >= 100).format(Math.abs(value));
  return value < 0 && /[1-9]/.test(text) ? `−${text}` : text;
}
/** A ratio 0 … 1 as per cent. */
export const percent = (ratio: Value, digits = 0): string =>
  quantity(known(ratio) ? ratio * 100 : null, '%', digits);

/** A count that begins a sentence: a word up to twelve, figures above. */
export const countAtStart = (n: number): string => COUNTS[n] ?? number(n);
/** "1 unit", "1,240 units". */
export const counted = (n: number, one: string, many = pluralOf(one)): string =>
  `${number(n)}${NBSP}${isOne(n) ? one : many}`;
/** "5", "5 and 9", "3, 5 and 9". */
export function listed(items: readonly (string | number)[]): string {
  if (items.length < 2) return String(items[0] ?? '');
  return lists.lastTwo(items.slice(0, -1).join(', '), items[items.length - 1] ?? '');
}
