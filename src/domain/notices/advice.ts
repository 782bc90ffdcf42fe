import { adviceByKind, adviceByPart, adviceTogether, anyAdvice } from '../../words/domain-advice';
import { CAUSE_KINDS } from '../causes/kinds';

/** What a day's letter says of a cause: what to do about it, and what to tell whoever goes up the ladder. */

export interface CauseAdvice {
  /** An instruction for today. */
  today: string;
  /** For the person on the ladder; the caution stands once, above all of it. */
  ladder: string;
}

/** @param part the kind of the shared part, if there is one */
export function adviceFor(causeKind: string, part: string | null): CauseAdvice {
  const kind = CAUSE_KINDS.find((known) => known === causeKind);
  const { today, ladder } = kind ? adviceByKind[kind] : anyAdvice;
  const first = part && causeKind !== 'not_shutting_down' ? adviceByPart[part] : undefined;
  return { today: first ? adviceTogether.firstThePart(first, today) : today, ladder };
}
