import type { LoopComparedWith } from '../domain/output/resistance';

/** What is said of the resistance between the units of a string and its input. */

export const loopComparedWith: Record<LoopComparedWith, string> = {
  'its past': 'its past',
  'other strings': 'other strings',
  'its cables': 'its cables',
};
/** The same of what is stored with a cause. */
export const loopThan = (than: string): string =>
  (loopComparedWith as Readonly<Record<string, string | undefined>>)[than] ?? than;

/** Why there is no fit, after a colon. */
export const loopFitSaid = {
  noSamples: 'no samples',
  tooFewSamples: (samples: number, needed: number) =>
    `${samples} steady samples with current, ${needed} are needed`,
  tooNarrow: (spanA: number, neededA: number) =>
    `the current spans ${spanA.toFixed(1)} A only, ${neededA} A are needed`,
};

export const loopSaid = {
  source: 'P = I²R: 10 W in one place at 10 A, from experience',
  sourceOrganisation: 'P = I²R; set by the organisation',
  /** @param why one of `loopFitSaid` */
  cantTell: (why: string) => `The loop's resistance can not be told: ${why}.`,
  more: (ohm: number, than: LoopComparedWith, heatW: number, highestA: number) =>
    `${ohm.toFixed(2)} Ω more than ${loopComparedWith[than]}: up to ${heatW.toFixed(0)} W of heat in one place at ${highestA.toFixed(1)} A. Connectors on the module side lie outside this measurement.`,
  tooWide: (wideOhm: number, ohm: number) =>
    `The loop's resistance is known to ±${wideOhm.toFixed(2)} Ω only: ${ohm.toFixed(1)} Ω too many can't be ruled out.`,
  usual:
    'Nothing unusual between the units and the input. Connectors on the module side lie outside this measurement: no finding is not proof.',
};

export const loopCouldBe = {
  connector: 'a connector going bad or mismated',
  lead: 'a damaged lead',
  longerCables: 'longer cables than assumed',
  calibration: 'a shift in the calibration of the input',
};
