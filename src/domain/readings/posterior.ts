import { hypothesesFor } from './hypotheses';
import { oneUnit, type OneUnit } from './one-unit';
import type { Hypothesis, Meter, ReadingQuestion } from './reading';

/**
 * Bayes over the hypotheses. What one module and one unit give is common to the string and its siblings, so both are
 * carried along as unknowns: in closed form without siblings, on a grid with them (each sibling may itself be wrong in
 * any of the ways that this string may be).
 */

// closer together than what siblings leave open, or the grid decides instead of them
const GRID_V = 161;
const GRID_S = 33;
const GRID_REACH = 4; // standard deviations
/** Squared deviation from which on a density counts as none. */
const Z2_MAX = 60;

const gauss = (x: number, mean: number, variance: number): number => {
  const z2 = ((x - mean) * (x - mean)) / variance;
  return z2 > Z2_MAX ? 0 : Math.exp(-z2 / 2) / Math.sqrt(2 * Math.PI * variance);
};

/** Whether any point of a row of the grid explains the reading at all. */
function withinReach(
  h: Hypothesis,
  v: number,
  sAxis: readonly { at: number }[],
  x: number,
  variance: number,
): boolean {
  const from = h.passing * v + h.inShutdown * sAxis[0]!.at;
  const to = h.passing * v + h.inShutdown * sAxis.at(-1)!.at;
  const reach = Math.sqrt(Z2_MAX * variance);
  return x >= Math.min(from, to) - reach && x <= Math.max(from, to) + reach;
}

const meterVariance = (meter: Meter, voltageV: number): number =>
  (meter.relativeSd * voltageV) ** 2 + meter.sd ** 2;

/** Independent part of a hypothesis' variance. */
const ownVariance = (h: Hypothesis, one: OneUnit): number =>
  Math.abs(h.passing) * one.vocOwnSd ** 2 + Math.abs(h.inShutdown) * one.shutdownOwnSd ** 2 + h.ownSd ** 2;

/** Density of readings that nothing explains: even over twice what two such strings could give. */
function unexplainedDensity(units: number, one: OneUnit): number {
  return 1 / (4.8 * units * one.voc + 40);
}

export interface Posterior {
  hypotheses: Hypothesis[];
  probability: number[];
  /** Expected reading and standard deviation of each, siblings taken into account. */
  expectedV: number[];
  sdV: number[];
}

export function posteriorOf(question: ReadingQuestion): Posterior {
  const hypotheses = hypothesesFor(question);
  const one = oneUnit(question);
  return question.siblings.length === 0
    ? closedForm(question, hypotheses, one)
    : onGrid(question, hypotheses, one);
}

function closedForm(question: ReadingQuestion, hypotheses: Hypothesis[], one: OneUnit): Posterior {
  const x = question.voltageV;
  const meter = meterVariance(question.meter, x);
  const expectedV = hypotheses.map((h) => h.passing * one.voc + h.inShutdown * one.shutdown);
  const variance = hypotheses.map(
    (h) => (h.passing * one.vocSd) ** 2 + (h.inShutdown * one.shutdownSd) ** 2 + ownVariance(h, one) + meter,
  );
  const weight = hypotheses.map((h, i) =>
    h.kind === 'unexplained'
      ? h.prior * unexplainedDensity(question.units, one)
      : h.prior * gauss(x, expectedV[i]!, variance[i]!),
  );
  return { hypotheses, probability: normalised(weight), expectedV, sdV: variance.map(Math.sqrt) };
}

function onGrid(question: ReadingQuestion, hypotheses: Hypothesis[], one: OneUnit): Posterior {
  const axis = (points: number, mean: number, sd: number, least: number): { at: number; weight: number }[] =>
    Array.from({ length: points }, (_, k) => {
      const z = -GRID_REACH + (2 * GRID_REACH * k) / (points - 1);
      return { at: Math.max(least, mean + z * sd), weight: Math.exp((-z * z) / 2) };
    });
  const vAxis = axis(GRID_V, one.voc, one.vocSd, 0);
  const sAxis = axis(GRID_S, one.shutdown, one.shutdownSd, 0);
  // how well each pair of values explains the siblings, each sibling being whatever it may be
  const joint = vAxis.map((v) => sAxis.map((s) => v.weight * s.weight));
  for (const sibling of question.siblings) {
    const its = hypothesesFor({
      ...question,
      units: sibling.units,
      heard: Math.min(question.heard, sibling.units),
    });
    const meter = meterVariance(question.meter, sibling.voltageV);
    const variances = its.map((h) => ownVariance(h, one) + meter);
    const flat = unexplainedDensity(sibling.units, one);
    // most hypotheses rest on one of the two values only: their part is worked out once along that axis
    const alongV = vAxis.map(() => 0);
    const alongS = sAxis.map(() => 0);
    let flatPart = 0;
    const mixed: [Hypothesis, number][] = [];
    its.forEach((h, i) => {
      if (h.kind === 'unexplained') flatPart += h.prior * flat;
      else if (h.inShutdown === 0)
        vAxis.forEach((v, a) => {
          alongV[a]! += h.prior * gauss(sibling.voltageV, h.passing * v.at, variances[i]!);
        });
      else if (h.passing === 0)
        sAxis.forEach((s, b) => {
          alongS[b]! += h.prior * gauss(sibling.voltageV, h.inShutdown * s.at, variances[i]!);
        });
      else mixed.push([h, variances[i]!]);
    });
    const likely = vAxis.map((_, a) => sAxis.map((__, b) => flatPart + alongV[a]! + alongS[b]!));
    for (const [h, variance] of mixed)
      vAxis.forEach((v, a) => {
        if (!withinReach(h, v.at, sAxis, sibling.voltageV, variance)) return;
        const row = likely[a]!;
        sAxis.forEach((s, b) => {
          row[b]! += h.prior * gauss(sibling.voltageV, h.passing * v.at + h.inShutdown * s.at, variance);
        });
      });
    let most = 0;
    joint.forEach((row, a) => {
      for (let b = 0; b < row.length; b++) most = Math.max(most, (row[b]! *= likely[a]![b]!));
    });
    if (most > 0) for (const row of joint) for (let b = 0; b < row.length; b++) row[b]! /= most;
  }
  const total = joint.reduce((sum, row) => sum + row.reduce((r, w) => r + w, 0), 0);
  const vWeight = joint.map((row) => row.reduce((r, w) => r + w, 0) / total);
  const sWeight = sAxis.map((_, b) => joint.reduce((r, row) => r + row[b]!, 0) / total);
  const x = question.voltageV;
  const meter = meterVariance(question.meter, x);
  const flat = unexplainedDensity(question.units, one);
  const moment = (of: (v: number, s: number) => number): number =>
    joint.reduce(
      (sum, row, a) => sum + row.reduce((r, w, b) => r + w * of(vAxis[a]!.at, sAxis[b]!.at), 0),
      0,
    ) / total;
  const [meanV, meanS] = [moment((v) => v), moment((_, s) => s)];
  const varianceV = moment((v) => (v - meanV) ** 2);
  const varianceS = moment((_, s) => (s - meanS) ** 2);
  const covariance = moment((v, s) => (v - meanV) * (s - meanS));
  const expectedV: number[] = [];
  const sdV: number[] = [];
  const weight = hypotheses.map((h) => {
    const own = ownVariance(h, one) + meter;
    let likely = 0;
    if (h.inShutdown === 0)
      vAxis.forEach((v, a) => (likely += vWeight[a]! * gauss(x, h.passing * v.at, own)));
    else if (h.passing === 0)
      sAxis.forEach((s, b) => (likely += sWeight[b]! * gauss(x, h.inShutdown * s.at, own)));
    else
      vAxis.forEach((v, a) => {
        if (!withinReach(h, v.at, sAxis, x, own)) return;
        sAxis.forEach((s, b) => {
          likely += (joint[a]![b]! / total) * gauss(x, h.passing * v.at + h.inShutdown * s.at, own);
        });
      });
    expectedV.push(h.passing * meanV + h.inShutdown * meanS);
    const common =
      h.passing ** 2 * varianceV + h.inShutdown ** 2 * varianceS + 2 * h.passing * h.inShutdown * covariance;
    sdV.push(Math.sqrt(Math.max(0, common) + own));
    return h.prior * (h.kind === 'unexplained' ? flat : likely);
  });
  return { hypotheses, probability: normalised(weight), expectedV, sdV };
}

function normalised(weights: number[]): number[] {
  const sum = weights.reduce((s, w) => s + w, 0);
  return weights.map((w) => w / sum);
}
