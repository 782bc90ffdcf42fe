import { OVER_AFTER_S } from './event';

/**
 * What comes and goes is told once each way. Gone counts as over only after it stayed away for half an hour, so that
 * what comes, goes and comes again is one line. What came and is over before anybody was told is never told.
 */
export interface SubjectState {
  /** Since when people know that it is there; null: they don't. */
  toldAt: Date | null;
  /** How often it came back since they know. */
  came: number;
  /** The newest event that was looked at. */
  seenEvent: number;
  /** What is told at `dueAt` if it still holds: that it is there (nobody knows yet), or that it is over. */
  waiting: { event: number; dueAt: Date } | null;
}
export interface SubjectStep {
  state: SubjectState;
  tell: 'comes' | 'goes' | null;
  /** It came back before it counted as over. */
  cameBack: boolean;
}

const NEW: SubjectState = { toldAt: null, came: 0, seenEvent: 0, waiting: null };
const after = (at: Date, s: number): Date => new Date(at.getTime() + s * 1000);
const still = (state: SubjectState): SubjectStep => ({ state, tell: null, cameBack: false });

export interface SubjectEvent {
  id: number;
  phase: 'comes' | 'goes';
  at: Date;
  waitS: number;
  /** It is still so: what came is there, by now. */
  holds: boolean;
}

/** One event more. An event that was seen before changes nothing. */
export function afterEvent(known: SubjectState | null, event: SubjectEvent, now: Date): SubjectStep {
  const before = known ?? NEW;
  if (event.id <= before.seenEvent) return still(before);
  const state = { ...before, seenEvent: event.id };
  if (event.phase === 'goes')
    return still({
      ...state,
      waiting: state.toldAt ? { event: event.id, dueAt: after(event.at, OVER_AFTER_S) } : null,
    });
  if (state.toldAt) {
    const cameBack = state.waiting !== null;
    return {
      state: { ...state, came: state.came + (cameBack ? 1 : 0), waiting: null },
      tell: null,
      cameBack,
    };
  }
  if (!event.holds) return still({ ...state, waiting: null });
  if (event.waitS > 0)
    return still({ ...state, waiting: { event: event.id, dueAt: after(event.at, event.waitS) } });
  return { state: { ...state, toldAt: now, came: 0, waiting: null }, tell: 'comes', cameBack: false };
}

/** What waited is due. `holds`: what came is there by now. */
export function afterWait(state: SubjectState, holds: boolean, now: Date): SubjectStep {
  if (!state.waiting || state.waiting.dueAt > now) return still(state);
  const over = { ...state, waiting: null };
  if (!state.toldAt) {
    if (!holds) return still(over);
    return { state: { ...over, toldAt: now, came: 0 }, tell: 'comes', cameBack: false };
  }
  return { state: { ...over, toldAt: null, came: 0 }, tell: 'goes', cameBack: false };
}
