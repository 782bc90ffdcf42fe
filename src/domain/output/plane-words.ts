import { planeWithin } from '../../words/domain-planes';

/** A plane's name in the middle of a sentence. */
export const planeWords = planeWithin;
