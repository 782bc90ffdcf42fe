import { commandTexts } from '../../words/domain-verdicts-events';
import type { InForce } from './codes';

/** What is in force, as it stands at the beginning of a line. */
export const commandWords = (inForce: InForce): string => commandTexts[inForce];
