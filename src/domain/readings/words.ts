import { hypothesisTexts, readingCautions } from '../../words/domain-readings';
import type { Hypothesis, ReadingQuestion } from './reading';

/** A hypothesis as a sentence's subject and verb: "3 of 14 units pass, the others are in shutdown". */
export const hypothesisWords = (h: Hypothesis, question: ReadingQuestion): string =>
  hypothesisTexts[h.kind](h.count, question.units);

/** What stands beside every reading that someone might act on. */
export const READING_CAUTION = readingCautions.reading;
export const ROLL_CALL_CAUTION = readingCautions.rollCall;
