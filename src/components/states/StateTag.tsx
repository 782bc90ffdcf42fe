import type { UnitState, Verdict } from '../../domain/verdicts/codes';
import { Tag } from '../ui/Tag';
import { lookOf } from './words';

/** A unit's state or verdict: shape, word, colour. */
export function StateTag({ state, verdict }: { state: UnitState | null; verdict: Verdict | null }) {
  const look = lookOf(state, verdict);
  return (
    <Tag tone={look.tone} shape={look.shape}>
      {look.word}
    </Tag>
  );
}
