import type { UnitState, Verdict } from '../../domain/verdicts/codes';
import type { Tone } from '../ui/Tag';

export interface StateLook {
  word: string;
  shape: string;
  tone: Tone;
}
const STATES: Record<UnitState, StateLook> = {
  passing: { word: 'Passing', shape: '▮', tone: 'petrol' },
  shutdown: { word: 'In shutdown', shape: '▂', tone: 'plum' },
  unheard: { word: 'Unheard', shape: '', tone: 'outline' },
  silent: { word: 'Silent', shape: '▨', tone: 'slate' },
  dark: { word: 'Dark', shape: '☾', tone: 'slate' },
};
const VERDICTS: Partial<Record<Verdict, StateLook>> = {
  not_shutting_down: { word: 'Not shutting down', shape: '◆', tone: 'crimson' },
  stuck: { word: 'Stuck in shutdown', shape: '▼', tone: 'rust' },
  unconfirmed: { word: 'Unconfirmed', shape: '?', tone: 'slate' },
  late: { word: 'Shut down late', shape: '◷', tone: 'rust' },
  flapping: { word: 'Flapping', shape: '≈', tone: 'rust' },
};

/** The word, shape and colour of a unit: its verdict where that says more than its state. */
export function lookOf(state: UnitState | null, verdict: Verdict | null): StateLook {
  const judged = verdict ? VERDICTS[verdict] : undefined;
  if (judged) return judged;
  return state ? STATES[state] : { word: 'Tells nothing itself', shape: '', tone: 'plain' };
}
