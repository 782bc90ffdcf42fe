import { expectedFromSaid, samePlane } from '../../words/domain-expected';
import { planeWithin } from '../../words/domain-planes';
import type { ExpectedFrom } from './expected';

/** A plane's name in the middle of a sentence. */
export const planeWords = planeWithin;

/** What an expectation was learned from. @param plane the string's own; null: it has no name */
export const expectedFromWords = (from: ExpectedFrom, plane: string | null): string =>
  expectedFromSaid[from](plane === null ? samePlane : planeWithin(plane));
