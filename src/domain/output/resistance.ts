import { loopCouldBe, loopFitSaid, loopSaid } from '../../words/domain-loop';
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
  /**
   * Current of the input, measured with `inputV`: where it agrees with the strings' own, both readings are of one
   * moment. Left out where the inverter doesn't tell it.
   */
  inputA?: number;
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

/** What a loop is held against. Stored: none is renamed. */
export type LoopComparedWith = 'its past' | 'other strings' | 'its cables';

export interface LoopFinding {
  outcome: 'usual' | 'excess' | 'growing' | 'cant_tell';
  words: string;
  fit: LoopFit | null;
  /** Ohm above what it is compared with, with 95 % interval. */
  above: {
    ohm: number;
    low: number;
    high: number;
    comparedWith: LoopComparedWith;
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
/** Input and strings differ by more in current than they usually do, relative: they were read at different moments. */
const APART_MAX = 0.02;
/** Seconds in which two thirds of a change of warmth are over. From experience. */
const ROOF_LAG_S = 420;
const SAMPLES_MIN = 30;
/** More samples than this are brought together to so many points. */
const POINTS_MAX = 140;
/** Standard deviations beyond which a sample is wild. */
const WILD = 4;
const SPAN_MIN = 2.5;
/** Gain errors of many units average out; what is left with the input's own: standard deviation and most, from experience. */
const GAIN_SD = 0.004;
const GAIN_MAX = 0.015;
const ROUNDS = 6;
/** Samples of one hour repeat each other and the other terms are fitted too: so much wider is the interval. By simulation. */
const WIDER = 1.5;

/**
 * Samples of which voltages at both ends are of one moment: where the input's current is known, those in which it agrees
 * with the strings'; otherwise those between which the current hardly moved.
 */
function ofOneMoment(samples: readonly LoopSample[]): LoopSample[] {
  const running = samples.filter((s) => s.ownA >= CURRENT_MIN && s.inputV > 0);
  const ratio = (s: LoopSample): number => (s.inputA ?? NaN) / (s.ownA + s.othersA);
  const known = running.map(ratio).filter((r) => r > 0);
  if (known.length >= Math.max(1, running.length / 2)) {
    const usual = median(known);
    return running.filter((s) => Math.abs(ratio(s) / usual - 1) <= APART_MAX);
  }
  const steady = (s: LoopSample, o: LoopSample | undefined): boolean =>
    o === undefined || Math.abs(o.ownA - s.ownA) <= SKEW_MAX * s.ownA;
  return samples.filter(
    (s, i) => s.ownA >= CURRENT_MIN && s.inputV > 0 && steady(s, samples[i - 1]) && steady(s, samples[i + 1]),
  );
}

/** What the fit rests on, one sample or the mean of some with about the same current. */
interface Point {
  ownA: number;
  othersA: number;
  /** Mean of both ends: errors of one of them alone would pass for a gain. */
  volts: number;
  gap: number;
  /** See `offOf`; 0 where it isn't known. */
  off: number;
  /** See `warmingOf`. */
  warming: number;
}

/** Points of the samples: of many, wild ones left out, means over neighbours in current, so that their noise averages. */
function pointsOf(samples: readonly LoopSample[], warming: ReadonlyMap<LoopSample, number>): Point[] {
  const off = offOf(samples);
  const all = samples.map((s, i): Point => ({
    ownA: s.ownA,
    othersA: s.othersA,
    volts: (s.inputV + s.sumV) / 2,
    gap: s.sumV - s.inputV,
    off: off?.[i] ?? 0,
    warming: warming.get(s) ?? 0,
  }));
  if (all.length <= POINTS_MAX) return all;
  const every = all.length / POINTS_MAX;
  const some = Array.from({ length: POINTS_MAX }, (_, k) => all[Math.floor(k * every)]!);
  const line = theilSen(
    some.map((p) => p.ownA),
    some.map((p) => p.gap),
  );
  const rest = all.map((p) => p.gap - line.intercept - line.slope * p.ownA);
  const wild = WILD * sigmaMad(rest);
  const tame = all.filter((_, i) => Math.abs(rest[i]!) <= wild).sort((a, b) => a.ownA - b.ownA);
  const width = tame.length / POINTS_MAX;
  return Array.from({ length: POINTS_MAX }, (_, k) => {
    const block = tame.slice(
      Math.floor(k * width),
      Math.max(Math.floor((k + 1) * width), Math.floor(k * width) + 1),
    );
    const mean = (of: (p: Point) => number): number =>
      block.reduce((sum, p) => sum + of(p), 0) / block.length;
    return {
      ownA: mean((p) => p.ownA),
      othersA: mean((p) => p.othersA),
      volts: mean((p) => p.volts),
      gap: mean((p) => p.gap),
      off: mean((p) => p.off),
      warming: mean((p) => p.warming),
    };
  });
}

/**
 * How far modules still are from the warmth that the current stands for, A: its excess over its own mean of the last
 * minutes. While they warm, a voltage read some seconds earlier was higher.
 */
function warmingOf(samples: readonly LoopSample[]): Map<LoopSample, number> {
  const out = new Map<LoopSample, number>();
  let mean = 0;
  let atS = -Infinity;
  for (const s of samples) {
    if (!Number.isFinite(s.ownA)) continue;
    const kept = Math.exp(-Math.max(0, s.atS - atS) / ROOF_LAG_S);
    // between two samples the current goes straight from one to the other
    mean = kept * mean + (1 - kept) * s.ownA;
    if (kept > 0.01) out.set(s, s.ownA - mean);
    atS = s.atS;
  }
  return out;
}

/**
 * By how much the input's current was off the strings' in each sample, relative, times the voltage: near the best point
 * a voltage moves about as its current does. Null where it isn't known.
 */
function offOf(samples: readonly LoopSample[]): number[] | null {
  if (samples.some((s) => s.inputA === undefined)) return null;
  const ratios = samples.map((s) => s.inputA! / (s.ownA + s.othersA));
  const usual = median(ratios);
  return samples.map((s, i) => s.inputV * (ratios[i]! / usual - 1));
}

/** The robust fit (Theil–Sen by turns on residuals), or why there is none. */
export function fitLoop(samples: readonly LoopSample[]): LoopFit | string {
  const usable = ofOneMoment(samples);
  if (usable.length < SAMPLES_MIN) return loopFitSaid.tooFewSamples(usable.length, SAMPLES_MIN);
  const points = pointsOf(usable, warmingOf(samples));
  const own = points.map((p) => p.ownA);
  const highestA = Math.max(...usable.map((s) => s.ownA));
  const span = highestA - Math.min(...own);
  if (span < SPAN_MIN) return loopFitSaid.tooNarrow(span, SPAN_MIN);
  const volts = points.map((p) => p.volts);
  const centreV = median(volts);
  const gap = points.map((p) => p.gap);

  // what others add to shared conductors can be told only where it doesn't just follow its own current
  const others = points.map((p) => p.othersA);
  const shares = Math.max(...others) > CURRENT_MIN;
  const follows = shares ? theilSen(own, others) : null;
  const apart = follows === null ? [] : others.map((o, i) => o - follows.intercept - follows.slope * own[i]!);
  const toTell = shares && sigmaMad(apart) > 0.3;

  // a current that had moved on between the two readings had moved the voltage too
  const off = points.map((p) => p.off);
  const moved = sigmaMad(off) > 0;
  let perOff = 0;
  const warming = points.map((p) => p.warming);
  const warms = sigmaMad(warming) > 0;
  let perWarming = 0;
  let gain = 0;
  let gainSd: number = GAIN_SD;
  let sharedOhm = 0;
  let line = theilSen(own, gap);
  const gainMatters = Math.max(...volts) - Math.min(...volts) > 0.03 * centreV;
  for (let round = 0; round < ROUNDS; round++) {
    if (moved)
      perOff = theilSen(
        off,
        points.map((_, i) => gap[i]! - line.slope * own[i]! - gain * volts[i]! - sharedOhm * others[i]!),
      ).slope;
    if (warms)
      perWarming = theilSen(
        warming,
        points.map(
          (_, i) =>
            gap[i]! - line.slope * own[i]! - gain * volts[i]! - sharedOhm * others[i]! - perOff * off[i]!,
        ),
      ).slope;
    const settled = (i: number): number => gap[i]! - perOff * off[i]! - perWarming * warming[i]!;
    const without = (i: number): number => settled(i) - line.slope * own[i]!;
    if (toTell)
      sharedOhm = Math.max(
        0,
        theilSen(
          others,
          points.map((_, i) => without(i) - gain * volts[i]!),
        ).slope,
      );
    if (gainMatters) {
      const b = theilSen(
        volts,
        points.map((_, i) => without(i) - sharedOhm * others[i]!),
      );
      // what the days say and what meters are like, each by its weight
      const own2 = ((b.slopeHigh - b.slopeLow) / 3.92) ** 2;
      const usual2 = GAIN_SD ** 2;
      gain = Math.min(GAIN_MAX, Math.max(-GAIN_MAX, (b.slope * usual2) / (usual2 + own2)));
      gainSd = Math.sqrt((usual2 * own2) / (usual2 + own2));
    }
    line = theilSen(
      own,
      points.map((_, i) => settled(i) - gain * volts[i]! - sharedOhm * others[i]!),
    );
  }
  // a gain error that isn't known makes the resistance uncertain as far as voltage follows current
  const vByA = theilSen(own, volts).slope;
  const half = Math.hypot((WIDER * (line.slopeHigh - line.slopeLow)) / 2, 1.96 * gainSd * Math.abs(vByA));
  return {
    ohm: line.slope,
    low: line.slope - half,
    high: line.slope + half,
    sharedOhm: toTell ? sharedOhm : null,
    gain,
    samples: usable.length,
    highestA,
  };
}

export interface LoopComparison {
  /** Fit of an earlier time with everything in order: growth is measured against it. */
  past: LoopFit | null;
  /** Own resistances of like strings, and what their cables and sound connectors should have, ohm. */
  siblings: readonly { ohm: number; cableOhm: number }[];
  /** By how much those of like strings have grown since the same time: what all show alike is the weather's. */
  siblingsGrowthOhm?: readonly number[];
  /** What its cables and sound connectors should have, ohm. */
  cableOhm: number;
}

/** Above this a connector is worth a look: at 10 A it makes 10 W in one place. From experience. */
export const EXCESS_OHM = 0.1;

export const SIBLINGS_MIN = 5;
/** Standard deviations that an excess must have: eight sound strings in a thousand reach it by chance. */
export const DEVIATIONS = 2.4;

/**
 * Compares a fit with the string's own past, else with at least five like strings, else with its cables. Long cables are
 * told from a bad connector by growth and by siblings only: against the cables alone the threshold is doubled.
 */
export function judgeLoop(
  fit: LoopFit | string,
  against: LoopComparison,
  excessOhm = EXCESS_OHM,
): LoopFinding {
  const threshold = {
    ohm: excessOhm,
    source: excessOhm === EXCESS_OHM ? loopSaid.source : loopSaid.sourceOrganisation,
  };
  if (typeof fit === 'string')
    return {
      outcome: 'cant_tell',
      words: loopSaid.cantTell(fit),
      fit: null,
      above: null,
      heatW: null,
      threshold,
      couldBe: [],
      confidence: 0,
    };
  const half = (fit.high - fit.low) / 2;
  const byPast = against.past !== null;
  // a longer home run is no fault: the others are taken as if they had the cables of this one
  const siblingsOhm = against.siblings.map((s) => s.ohm - s.cableOhm + against.cableOhm);
  const bySiblings = !byPast && siblingsOhm.length >= SIBLINGS_MIN;
  const reference = byPast ? against.past!.ohm : bySiblings ? median(siblingsOhm) : against.cableOhm;
  const referenceHalf = byPast
    ? (against.past!.high - against.past!.low) / 2
    : bySiblings
      ? 1.96 * sigmaMad(siblingsOhm)
      : 0.3 * against.cableOhm;
  const limit = byPast || bySiblings ? excessOhm : 2 * excessOhm;
  const wide = Math.hypot(half, referenceHalf);
  const growth = against.siblingsGrowthOhm ?? [];
  const common = byPast && growth.length >= SIBLINGS_MIN ? median(growth) : 0;
  const ohm = fit.ohm - reference - common;
  const above: NonNullable<LoopFinding['above']> = {
    ohm,
    low: ohm - wide,
    high: ohm + wide,
    comparedWith: byPast ? 'its past' : bySiblings ? 'other strings' : 'its cables',
  };
  const found = ohm > limit && ohm > (DEVIATIONS / 1.96) * wide;
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
          loopCouldBe.connector,
          loopCouldBe.lead,
          ...(byPast ? [] : [loopCouldBe.longerCables]),
          loopCouldBe.calibration,
        ]
      : [],
    confidence,
  });
  if (found)
    return made(
      byPast ? 'growing' : 'excess',
      loopSaid.more(ohm, above.comparedWith, fit.highestA ** 2 * ohm, fit.highestA),
      byPast ? 0.9 : bySiblings ? 0.85 : 0.6,
    );
  if (ohm + wide > 2 * limit) return made('cant_tell', loopSaid.tooWide(wide, 2 * limit), 0);
  return made('usual', loopSaid.usual, 0.85);
}
