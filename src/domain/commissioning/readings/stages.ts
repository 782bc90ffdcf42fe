import type { UnitType } from '../../equipment/unit-type';
import type { ReadingQuestion } from '../../readings/reading';

/** When a reading at a home run is taken, and between what. */
export const READING_STAGES = ['before_energising', 'after_keep_alive', 'after_roll_call'] as const;
export type ReadingStage = (typeof READING_STAGES)[number];
export const READING_KINDS = ['positive_to_negative', 'positive_to_earth', 'negative_to_earth'] as const;
export type ReadingKind = (typeof READING_KINDS)[number];

/** The stages at which a string of this type is read: units that a keep-alive releases answer no roll call. */
export const stagesFor = (unitType: Pick<UnitType, 'kind' | 'releasedBy'>): ReadingStage[] =>
  unitType.kind === 'shutdown_only' || unitType.releasedBy === 'keep_alive'
    ? ['before_energising', 'after_keep_alive']
    : ['before_energising', 'after_roll_call'];

/** What is usually in force at a stage, to begin with; whoever measures says what really is. */
export function usualCommand(
  stage: ReadingStage,
  inForce: ReadingQuestion['commanded'],
): ReadingQuestion['commanded'] {
  if (stage === 'before_energising') return inForce;
  if (stage === 'after_keep_alive') return inForce === 'unknown' ? 'released' : inForce;
  return inForce;
}
