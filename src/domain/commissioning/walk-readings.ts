import { oneUnit } from '../readings/one-unit';
import { expectedState, type ReadingQuestion } from '../readings/reading';

/** Open-circuit readings + to − that a meter should show on a string that is separated from all others. Volts. */
export interface ExpectedReading {
  volts: number;
  /** The middle 95 %. */
  low: number;
  high: number;
}
export interface WalkReadings {
  inShutdown: ExpectedReading;
  passing: ExpectedReading;
  /** With the units as they are commanded and were heard. */
  now: ExpectedReading & { words: string };
}

const TWO_SIDED_95 = 1.96;

/**
 * What to expect on the roof before the meter is put on, by type, light and command. At night and under snow units have
 * no power: 0 V then, which proves nothing.
 */
export function walkReadings(
  question: Omit<ReadingQuestion, 'voltageV' | 'earth' | 'siblings'>,
): WalkReadings {
  const whole: ReadingQuestion = { ...question, voltageV: 0, earth: null, siblings: [] };
  const one = oneUnit(whole);
  const reading = (passing: number, inShutdown: number): ExpectedReading => {
    const volts = passing * one.voc + inShutdown * one.shutdown;
    const sd = Math.hypot(
      passing * one.vocSd,
      Math.sqrt(passing) * one.vocOwnSd,
      inShutdown * one.shutdownSd,
      Math.sqrt(inShutdown) * one.shutdownOwnSd,
      question.meter.relativeSd * volts,
      question.meter.sd,
    );
    return { volts, low: Math.max(0, volts - TWO_SIDED_95 * sd), high: volts + TWO_SIDED_95 * sd };
  };
  const { units } = question;
  const state = expectedState(whole);
  return {
    inShutdown: reading(0, units),
    passing: reading(units, 0),
    now: { ...reading(state.passing, units - state.passing), words: state.words },
  };
}
