import { median, sigmaMad } from './robust';
import { theilSen } from './theil-sen';

/**
 * Is a connector or lead of a string going bad? Sum of unit output voltages − input voltage = a + b·V + R·I: the
 * resistance of everything between the units and the input, with b taking up the gain errors of both measurements.
 * Volts, amperes, ohms. Connectors on the module side lie outside this loop: no finding is not proof.
 */

export interface LoopSample {
  atS: number;
  /** Sum of the outputs of all units of the string. */
  sumV: number;
  inputV: number;
  ownA: number;
  /** Current of the other strings on the same input; 0 where it is alone. */
  othersA: number;
}

export interface LoopFit {
  /** Of the string's own loop, with 95 % interval. */
  ohm: number;
  low: number;
  high: number;
  /** Of the conductors that all strings of the input share; null: alone, or not to be told from its own. */
  sharedOhm: number | null;
  /** Gain error between both measurements, relative. */
  gain: number;
  samples: number;
  highestA: number;
}

export interface LoopFinding {
  outcome: 'usual' | 'excess' | 'growing' | 'cant_tell';
  words: string;
  fit: LoopFit | null;
  /** Ohm above what it is compared with, with 95 % interval. */
  above: {
    ohm: number;
    low: number;
    high: number;
    comparedWith: 'its past' | 'other strings' | 'its cables';
  } | null;
  /** Heat where it sits, at the highest current seen: P = I²R, W. */
  heatW: number | null;
  threshold: { ohm: number; source: string };
  couldBe: string[];
  confidence: number;
}

/** Low currents say nothing of a resistance. */
const CURRENT_MIN = 1.5;
/** Current that differs by more from one report to the next, relative: both readings may be from different moments. */
const SKEW_MAX = 0.08;
const SAMPLES_MIN = 30;
const SAMPLES_MAX = 140;
const SPAN_MIN = 2.5;
/** Gain errors of many units average out; what is left with the input's own is within this (from experience). */
const GAIN_MAX = 0.015;
const ROUNDS = 4;

/** The robust fit (Theil–Sen by turns on residuals), or why there is none. */
export function fitLoop(samples: readonly LoopSample[]): LoopFit | string {
  const usable = samples.filter((s, i) => {
    const before = samples[i - 1];
    const after = samples[i + 1];
    const steady = (o: LoopSample | undefined): boolean =>
      o === undefined || Math.abs(o.ownA - s.ownA) <= SKEW_MAX * s.ownA;
    return s.ownA >= CURRENT_MIN && s.inputV > 0 && steady(before) && steady(after);
  });
  if (usable.length < SAMPLES_MIN)
    return `${usable.length} steady samples with current, ${SAMPLES_MIN} are needed`;
  const every = Math.max(1, usable.length / SAMPLES_MAX);
  const chosen = Array.from(
    { length: Math.min(usable.length, SAMPLES_MAX) },
    (_, k) => usable[Math.floor(k * every)]!,
  );
  const own = chosen.map((s) => s.ownA);
  const highestA = Math.max(...own);
  const span = highestA - Math.min(...own);
  if (span < SPAN_MIN) return `the current spans ${span.toFixed(1)} A only, ${SPAN_MIN} A are needed`;
  const volts = chosen.map((s) => s.inputV);
  const centreV = median(volts);
  const gap = chosen.map((s) => s.sumV - s.inputV);

  // what others add to shared conductors can be told only where it doesn't just follow its own current
  const others = chosen.map((s) => s.othersA);
  const shares = Math.max(...others) > CURRENT_MIN;
  const follows = shares ? theilSen(own, others) : null;
  const apart = follows === null ? [] : others.map((o, i) => o - follows.intercept - follows.slope * own[i]!);
  const toTell = shares && sigmaMad(apart) > 0.3;

  let gain = 0;
  let sharedOhm = 0;
  let line = theilSen(own, gap);
  const gainMatters = Math.max(...volts) - Math.min(...volts) > 0.03 * centreV;
  for (let round = 0; round < ROUNDS; round++) {
    const without = (i: number): number => gap[i]! - line.slope * own[i]!;
    if (toTell)
      sharedOhm = Math.max(
        0,
        theilSen(
          others,
          chosen.map((_, i) => without(i) - gain * volts[i]!),
        ).slope,
      );
    if (gainMatters) {
      const b = theilSen(
        volts,
        chosen.map((_, i) => without(i) - sharedOhm * others[i]!),
      ).slope;
      gain = Math.min(GAIN_MAX, Math.max(-GAIN_MAX, b));
    }
    line = theilSen(
      own,
      chosen.map((_, i) => gap[i]! - gain * volts[i]! - sharedOhm * others[i]!),
    );
  }
  // a gain error that isn't known makes the resistance uncertain as far as voltage follows current
  const vByA = theilSen(own, volts).slope;
  const half = Math.hypot((line.slopeHigh - line.slopeLow) / 2, 1.96 * 0.004 * Math.abs(vByA));
  return {
    ohm: line.slope,
    low: line.slope - half,
    high: line.slope + half,
    sharedOhm: toTell ? sharedOhm : null,
    gain,
    samples: chosen.length,
    highestA,
  };
}

export interface LoopComparison {
  /** Fit of an earlier time with everything in order: growth is measured against it. */
  past: LoopFit | null;
  /** Own resistances of like strings. */
  siblingsOhm: readonly number[];
  /** What its cables and sound connectors should have, ohm. */
  cableOhm: number;
}

/** Above this a connector is worth a look: at 10 A it makes 10 W in one place. From experience. */
export const EXCESS_OHM = 0.1;

/**
 * Compares a fit with the string's own past, else with at least five like strings, else with its cables. Long cables are
 * told from a bad connector by growth and by siblings only: against the cables alone the threshold is doubled.
 */
export function judgeLoop(fit: LoopFit | string, against: LoopComparison): LoopFinding {
  const threshold = { ohm: EXCESS_OHM, source: 'P = I²R: 10 W in one place at 10 A, from experience' };
  if (typeof fit === 'string')
    return {
      outcome: 'cant_tell',
      words: `The loop's resistance can not be told: ${fit}.`,
      fit: null,
      above: null,
      heatW: null,
      threshold,
      couldBe: [],
      confidence: 0,
    };
  const half = (fit.high - fit.low) / 2;
  const byPast = against.past !== null;
  const bySiblings = !byPast && against.siblingsOhm.length >= 5;
  const reference = byPast ? against.past!.ohm : bySiblings ? median(against.siblingsOhm) : against.cableOhm;
  const referenceHalf = byPast
    ? (against.past!.high - against.past!.low) / 2
    : bySiblings
      ? 1.96 * sigmaMad(against.siblingsOhm)
      : 0.3 * against.cableOhm;
  const limit = byPast || bySiblings ? EXCESS_OHM : 2 * EXCESS_OHM;
  const wide = Math.hypot(half, referenceHalf);
  const ohm = fit.ohm - reference;
  const above: NonNullable<LoopFinding['above']> = {
    ohm,
    low: ohm - wide,
    high: ohm + wide,
    comparedWith: byPast ? 'its past' : bySiblings ? 'other strings' : 'its cables',
  };
  const found = ohm > limit && above.low > 0;
  const heatW = found ? fit.highestA ** 2 * ohm : null;
  const made = (outcome: LoopFinding['outcome'], words: string, confidence: number): LoopFinding => ({
    outcome,
    words,
    fit,
    above,
    heatW,
    threshold: { ...threshold, ohm: limit },
    couldBe: found
      ? [
          'a connector going bad or mismated',
          'a damaged lead',
          ...(byPast ? [] : ['longer cables than assumed']),
          'a shift in the calibration of the input',
        ]
      : [],
    confidence,
  });
  if (found)
    return made(
      byPast ? 'growing' : 'excess',
      `${ohm.toFixed(2)} Ω more than ${above.comparedWith}: up to ${heatW!.toFixed(0)} W of heat in one place at ${fit.highestA.toFixed(1)} A. Connectors on the module side lie outside this measurement.`,
      byPast ? 0.9 : bySiblings ? 0.85 : 0.6,
    );
  if (wide > 2 * limit)
    return made('cant_tell', `The loop's resistance is known to ±${wide.toFixed(2)} Ω only.`, 0);
  return made(
    'usual',
    'Nothing unusual between the units and the input. Connectors on the module side lie outside this measurement: no finding is not proof.',
    0.85,
  );
}
