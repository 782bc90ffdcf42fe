import { earthSaid as said } from '../../words/domain-readings';
import type { ReadingQuestion } from './reading';

/** Readings to earth: is a conductor of the string in contact with it, and where? */

export interface EarthFinding {
  outcome: 'no_fault_seen' | 'fault' | 'cant_tell';
  /** Chance of a fault to earth; null: one reading alone, or a string without voltage, gives none. */
  probability: number | null;
  /** The fault lies between these positions (0: at the negative end of the string, n: at the positive end). */
  between: [number, number] | null;
  /** How likely that place is, given a fault. */
  placeProbability: number;
  words: string;
}

/** One string in a hundred; from experience. */
const PRIOR = 0.01;
/** Of the string's voltage, what leakage and stray charge show to earth on a sound string: standard deviation. */
const SOUND_SPREAD = 0.12;
/** Beyond three standard deviations of that a string is not said to float. */
export const FLOATS_WITHIN = 3 * SOUND_SPREAD;
/** Spread of a module's voltage against its neighbours', relative. */
const MISMATCH = 0.01;

/** Of faults on strings of like modules, those whose ratio lies between two places: shade, dirt, resistance in the fault. */
const BETWEEN_PLACES = 0.1;

/**
 * A sound string floats: to earth a meter shows little and it dies away. With a fault above module k the readings are
 * those of the modules on either side and add up to the string's: −V(− to earth) : V(+ to earth) = k : (n − k). That
 * ratio is a place only where all modules give like voltages (`alike`). Where some units pass and some are in shutdown,
 * every ratio is as likely as any other: readings that add up are a fault all the same, and its place is not told.
 * Null when nothing was measured to earth or the string itself shows too little.
 */
export function earthFinding(
  question: Pick<ReadingQuestion, 'earth' | 'units' | 'voltageV' | 'meter'>,
  alike: boolean,
): EarthFinding | null {
  const { earth, units: n, voltageV, meter } = question;
  if (earth === null || (earth.positiveV === null && earth.negativeV === null)) return null;
  const u = Math.abs(voltageV);
  if (u < 1)
    return {
      outcome: 'cant_tell',
      probability: null,
      between: null,
      placeProbability: 0,
      words: said.tooLittle,
    };
  const sign = voltageV < 0 ? -1 : 1;
  const positive = earth.positiveV === null ? null : sign * earth.positiveV;
  const negative = earth.negativeV === null ? null : -sign * earth.negativeV;
  const density = (x: number, mean: number, sd: number): number =>
    Math.exp(-0.5 * ((x - mean) / sd) ** 2) / sd;
  const meterSd = (x: number): number => Math.hypot(meter.relativeSd * x, meter.sd, 0.003 * u);
  const both = (forPositive: number, forNegative: number, sd: number): number =>
    (positive === null ? 1 : density(positive, forPositive, Math.hypot(sd, meterSd(positive)))) *
    (negative === null ? 1 : density(negative, forNegative, Math.hypot(sd, meterSd(negative))));
  const sound = (1 - PRIOR) * both(0, 0, SOUND_SPREAD * u);
  const onPlace = PRIOR * (alike ? 1 - BETWEEN_PLACES : 0);
  const places = Array.from({ length: n + 1 }, (_, k) => {
    const below = (k / n) * u;
    const sd = (u / n) * MISMATCH * Math.sqrt((k * (n - k)) / n) + 0.002 * u;
    return (onPlace / (n + 1)) * both(u - below, below, sd);
  });
  const anywhere = (PRIOR - onPlace) * anyRatio(positive, negative, u, meterSd);
  const faulty = places.reduce((s, p) => s + p, 0) + anywhere;
  const probability = faulty / (faulty + sound);
  const k = places.indexOf(Math.max(...places));
  const placeProbability = faulty === 0 ? 0 : places[k]! / faulty;
  // one of the two alone may be small because the fault is at that very end
  const taken = positive !== null && negative !== null;
  // far from what leakage shows, but at no place of the model either (units not alike, readings not settled)
  const floats = [positive, negative].every((x) => x !== null && Math.abs(x) <= FLOATS_WITHIN * u);
  const outcome =
    taken && probability >= 0.8
      ? 'fault'
      : taken && floats && probability <= 0.05
        ? 'no_fault_seen'
        : 'cant_tell';
  if (outcome !== 'fault')
    return {
      outcome,
      probability: taken ? probability : null,
      between: null,
      placeProbability: 0,
      words: outcome === 'no_fault_seen' ? said.floats : taken ? said.neither : said.takeBoth,
    };
  const place: [number, number] = reversedPlace(k, n, voltageV);
  const sure = alike && placeProbability >= 0.5;
  return {
    outcome,
    probability,
    between: sure ? place : null,
    placeProbability: alike ? placeProbability : 0,
    words: sure ? said.faultAt(place[0], n) : alike ? said.fault : said.faultUnlike,
  };
}

/** Density of readings to earth when any ratio between them is as likely as another: both add up to the string's. */
function anyRatio(
  positive: number | null,
  negative: number | null,
  u: number,
  meterSd: (x: number) => number,
): number {
  const inside = (x: number): boolean => x > -3 * meterSd(x) && x < u + 3 * meterSd(x);
  const root2Pi = Math.sqrt(2 * Math.PI); // the densities beside it leave this factor out as well
  if (positive !== null && negative !== null) {
    if (!inside(positive) || !inside(negative)) return 0;
    const sd = Math.hypot(meterSd(positive), meterSd(negative), 0.002 * u);
    return (root2Pi / u) * (Math.exp(-0.5 * ((positive + negative - u) / sd) ** 2) / sd);
  }
  const one = positive ?? negative ?? 0;
  return inside(one) ? root2Pi / u : 0;
}

const reversedPlace = (k: number, n: number, voltageV: number): [number, number] => {
  const from = voltageV < 0 ? n - k : k;
  return [from, Math.min(n, from + 1)];
};
