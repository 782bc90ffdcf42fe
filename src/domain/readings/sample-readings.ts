import type { ModuleType } from '../equipment/module-type';
import { UNIT_PRESETS } from '../equipment/unit-type';
import { vocOf } from '../photovoltaics/module/open-circuit';
import { hypothesesFor } from './hypotheses';
import { ORDINARY_METER, type Hypothesis, type ReadingQuestion } from './reading';

/** Readings made up for the tests of this folder, of strings whose truth is known. */

export const MODULE: ModuleType = {
  name: 'M60',
  vocRef: 41.2,
  iscRef: 11.4,
  vmpRef: 34.1,
  impRef: 10.8,
  betaVoc: -0.0028,
  alphaIsc: 0.0005,
  gammaPmp: -0.0036,
  cellsInSeries: 60,
  bypassGroups: 3,
  noct: 45,
};

export function question(more: Partial<ReadingQuestion>): ReadingQuestion {
  return {
    units: 14,
    unitType: UNIT_PRESETS.shutdown_only,
    module: MODULE,
    commanded: 'unknown',
    heard: 0,
    light: 'bright',
    conditions: null,
    meter: ORDINARY_METER,
    voltageV: 0,
    siblings: [],
    earth: null,
    ...more,
  };
}

/** Mulberry32: a small generator with a seed. */
export function generator(seed: number): () => number {
  let a = seed >>> 0;
  return () => {
    a = (a + 0x6d2b79f5) >>> 0;
    let t = a;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4_294_967_296;
  };
}

const LIGHTS = ['bright', 'bright', 'bright', 'dull', 'dull', 'snow', 'night'] as const;

/**
 * One simulated reading and its truth. Light and temperature are drawn, and voc follows from them by the datasheet's
 * physics rather than by the interpreter's linear spread; tolerances are triangular or even, not normal; siblings may be
 * wrong themselves.
 */
export function simulate(random: () => number): { question: ReadingQuestion; truth: Hypothesis } {
  const even = (sd: number): number => (2 * random() - 1) * sd * Math.sqrt(3);
  const triangular = (sd: number): number => (random() + random() - 1) * sd * Math.sqrt(6);
  const kind = (['shutdown_only', 'monitored', 'monitored', 'optimizing'] as const)[
    Math.floor(4 * random())
  ]!;
  const n = 4 + Math.floor(17 * random());
  const light = LIGHTS[Math.floor(LIGHTS.length * random())]!;
  const known = random() < 0.5;
  const low = random() < 0.15;
  const base = question({
    units: n,
    unitType: UNIT_PRESETS[kind],
    light,
    commanded: (['released', 'shutdown', 'unknown'] as const)[Math.floor(3 * random())]!,
    heard: random() < 0.4 ? n : random() < 0.5 ? 0 : Math.floor(n * random()),
    meter: { ...ORDINARY_METER, mode: low ? 'low_impedance' : 'high_impedance' },
  });
  // the weather as it is, within what each kind of light is said to mean
  const usual = {
    bright: [700, 0.4, 40, 12],
    dull: [150, 0.6, 18, 9],
    snow: [25, 0.9, -2, 5],
    night: [2, 1, 8, 8],
  } as const;
  const [g, gSd, t, tSd] = usual[light];
  const poa = g * Math.exp(triangular(Math.log(1 + gSd)));
  const cell = t + triangular(tSd);
  const conditions =
    known && light !== 'night'
      ? {
          poaGlobal: poa * Math.exp(even(0.05)),
          poaRelativeSd: 0.05,
          temperatureCell: cell + even(2),
          temperatureSd: 2,
        }
      : null;
  const voc = vocOf(MODULE, Math.min(1500, poa), cell) * (1 + triangular(0.015));
  const { nominal, min, max } = base.unitType.shutdownVoltage;
  const pulled = low ? Math.max(0, 0.6 + even(0.25)) : 1;
  const shutdown = nominal + even((max - min) / 4);
  const measure = (truth: Hypothesis): number => {
    let v = 0;
    const whole = Math.floor(Math.abs(truth.passing));
    for (let i = 0; i < whole; i++) v += voc * (1 + even(0.006));
    v += voc * (Math.abs(truth.passing) - whole);
    for (let i = 0; i < Math.abs(truth.inShutdown); i++) v += (shutdown + even((max - min) / 6)) * pulled;
    const sign = truth.passing < 0 || truth.inShutdown < 0 ? -1 : 1;
    const strange = truth.kind === 'unexplained' ? (2 * random() - 1) * (2.4 * n * voc + 20) : 0;
    const stray = truth.ownSd > 0 ? triangular(truth.ownSd) : 0;
    const true_ = sign * v + strange + stray;
    return true_ * (1 + even(0.004)) + even(0.05);
  };
  const draw = (q: ReadingQuestion): Hypothesis => {
    const list = hypothesesFor(q);
    let u = random();
    for (const h of list) {
      u -= h.prior;
      if (u <= 0) return h;
    }
    return list.at(-1)!;
  };
  const truth = draw(base);
  const many = random() < 0.5 ? 0 : 1 + Math.floor(3 * random());
  const siblings = Array.from({ length: many }, () => {
    const units = Math.max(2, n - 2 + Math.floor(5 * random()));
    const its = draw({ ...base, units, heard: Math.min(base.heard, units) });
    return { units, voltageV: measure(its) };
  });
  return { question: { ...base, conditions, siblings, voltageV: measure(truth) }, truth };
}
