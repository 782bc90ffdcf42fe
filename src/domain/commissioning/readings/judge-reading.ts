import { earthReadingSaid } from '../../../words/domain-reading-stages';
import type { ModuleType } from '../../equipment/module-type';
import type { UnitType } from '../../equipment/unit-type';
import { FLOATS_WITHIN, earthFinding, type EarthFinding } from '../../readings/earth';
import { interpretReading, type Interpretation } from '../../readings/interpret';
import {
  ORDINARY_METER,
  type Conditions,
  type Meter,
  type ReadingLight,
  type ReadingQuestion,
} from '../../readings/reading';
import { READING_CAUTION } from '../../readings/words';
import type { ReadingKind, ReadingStage } from './stages';

/** One reading as it was taken at a home run. Volts. */
export interface TakenReading {
  stage: ReadingStage;
  kind: ReadingKind;
  light: ReadingLight;
  meterMode: Meter['mode'];
  commanded: ReadingQuestion['commanded'];
  voltage: number;
  /** ISO 8601. */
  at: string;
}

/** What is known around a reading when it is judged. */
export interface ReadingAround {
  units: number;
  unitType: Pick<UnitType, 'kind' | 'outOfBox' | 'shutdownVoltage'>;
  module: ModuleType;
  /** Units that had answered the roll call when it was taken. */
  heard: number;
  /** Light and cell temperature as a sensor had them; null: nobody measured. */
  conditions: Conditions | null;
  siblings: readonly { name: string; units: number; voltageV: number }[];
  /** Readings of the same string, stage and light that belong to it; null: not taken. */
  own: { between: number | null; positive: number | null; negative: number | null };
}

/** What a reading means, in the shape that is stored with it. */
export interface JudgedReading {
  outcome: Interpretation['outcome'];
  headline: string;
  expected: string;
  likely: { kind: string; count: number; words: string; probability: number; expectedV: number | null }[];
  expectedV: number | null;
  expectedLowV: number | null;
  expectedHighV: number | null;
  siblings: string[];
  heard: number;
  earth: { outcome: EarthFinding['outcome']; words: string } | null;
  obeysInitiator: boolean | null;
  cautions: string[];
}

const meterOf = (mode: Meter['mode']): Meter => ({ ...ORDINARY_METER, mode });

/** The question that a reading + to − puts, with all that is known around it. */
export const questionOf = (reading: TakenReading, around: ReadingAround): ReadingQuestion => ({
  units: around.units,
  unitType: around.unitType,
  module: around.module,
  commanded: reading.commanded,
  heard: around.heard,
  light: reading.light,
  conditions: around.conditions,
  meter: meterOf(reading.meterMode),
  voltageV: reading.voltage,
  siblings: around.siblings.map(({ units, voltageV }) => ({ units, voltageV })),
  earth:
    around.own.positive === null && around.own.negative === null
      ? null
      : { positiveV: around.own.positive, negativeV: around.own.negative },
});

/**
 * Judges a reading against what should be at that moment. A reading + to − is interpreted; one to earth is judged with
 * the string's own voltage and the other conductor's, and can't be told without them. Never says safe.
 * @throws RangeError as `interpretReading`
 */
export function judgeReading(reading: TakenReading, around: ReadingAround): JudgedReading {
  return reading.kind === 'positive_to_negative'
    ? judgeBetween(reading, around)
    : judgeEarth(reading, around);
}

function judgeBetween(reading: TakenReading, around: ReadingAround): JudgedReading {
  const answer = interpretReading(questionOf(reading, around));
  const should = answer.hypotheses.find((h) => h.asExpected && h.kind !== 'unpowered');
  const band = should?.expectedV != null && should.sdV !== null ? 2 * should.sdV : null;
  const earthFault = answer.earth?.outcome === 'fault';
  return {
    outcome: earthFault ? 'finding' : answer.outcome,
    headline: earthFault && answer.outcome === 'as_expected' ? answer.earth!.words : answer.headline,
    expected: answer.expected,
    likely: answer.likely.slice(0, 6).map(({ kind, count, words, probability, expectedV }) => ({
      kind,
      count,
      words,
      probability,
      expectedV,
    })),
    expectedV: should?.expectedV ?? null,
    expectedLowV: band === null ? null : should!.expectedV! - band,
    expectedHighV: band === null ? null : should!.expectedV! + band,
    siblings: around.siblings.map((s) => s.name),
    heard: around.heard,
    earth: answer.earth && { outcome: answer.earth.outcome, words: answer.earth.words },
    obeysInitiator: answer.obeysInitiator,
    cautions: answer.cautions,
  };
}

function judgeEarth(reading: TakenReading, around: ReadingAround): JudgedReading {
  const positive = reading.kind === 'positive_to_earth' ? reading.voltage : around.own.positive;
  const negative = reading.kind === 'negative_to_earth' ? reading.voltage : around.own.negative;
  const { between } = around.own;
  const missing: ReadingKind[] = [];
  if (between === null) missing.push('positive_to_negative');
  if (positive === null) missing.push('positive_to_earth');
  if (negative === null) missing.push('negative_to_earth');
  const found =
    between === null
      ? null
      : earthFinding(
          {
            units: around.units,
            voltageV: between,
            meter: meterOf(reading.meterMode),
            earth: { positiveV: positive, negativeV: negative },
          },
          evenVoltage(between, reading, around),
        );
  const reach = between === null ? null : FLOATS_WITHIN * Math.abs(between);
  const outcome =
    found?.outcome === 'fault' ? 'finding' : found?.outcome === 'no_fault_seen' ? 'as_expected' : 'cant_tell';
  return {
    outcome,
    headline:
      found && (missing.length === 0 || found.outcome === 'fault')
        ? found.words
        : earthReadingSaid.measureToo(missing),
    expected: earthReadingSaid.floats,
    likely: [],
    expectedV: between === null ? null : 0,
    expectedLowV: reach === null ? null : -reach,
    expectedHighV: reach,
    siblings: [],
    heard: around.heard,
    earth: found && { outcome: found.outcome, words: found.words },
    obeysInitiator: null,
    cautions: [READING_CAUTION],
  };
}

/** Whether every module of the string gives alike, so that the place of a fault can be told. */
function evenVoltage(between: number, reading: TakenReading, around: ReadingAround): boolean {
  const answer = interpretReading({ ...questionOf(reading, around), voltageV: between, earth: null });
  const kind = answer.hypotheses[0]?.kind;
  return kind === 'all_passing' || kind === 'all_in_shutdown' || kind === 'reversed';
}
