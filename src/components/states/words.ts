import type { UnitState, Verdict } from '../../domain/verdicts/codes';
import type { Tone } from '../ui/Tag';
import { statesWords } from '../../words/states';

export interface StateLook {
  word: string;
  shape: string;
  tone: Tone;
}
const STATES: Record<UnitState, StateLook> = {
  passing: { word: statesWords.passing, shape: '▮', tone: 'petrol' },
  shutdown: { word: statesWords.inShutdown, shape: '▂', tone: 'plum' },
  unheard: { word: statesWords.unheard, shape: '', tone: 'outline' },
  silent: { word: statesWords.silent, shape: '▨', tone: 'slate' },
  dark: { word: statesWords.dark, shape: '☾', tone: 'slate' },
};
const VERDICTS: Partial<Record<Verdict, StateLook>> = {
  not_shutting_down: { word: statesWords.notShuttingDown, shape: '◆', tone: 'crimson' },
  stuck: { word: statesWords.stuckInShutdown, shape: '▼', tone: 'rust' },
  unconfirmed: { word: statesWords.unconfirmed, shape: '?', tone: 'slate' },
  late: { word: statesWords.shutDownLate, shape: '◷', tone: 'rust' },
  flapping: { word: statesWords.flapping, shape: '≈', tone: 'rust' },
};

/** The word, shape and colour of a unit: its verdict where that says more than its state. */
export function lookOf(state: UnitState | null, verdict: Verdict | null): StateLook {
  const judged = verdict ? VERDICTS[verdict] : undefined;
  if (judged) return judged;
  return state ? STATES[state] : { word: statesWords.tellsNothingItself, shape: '', tone: 'plain' };
}
